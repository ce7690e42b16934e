// Package workbook writes a report as a spreadsheet file. Prices, sums, costs per
// litre and ranks are live formulas, each stored with the value it must have;
// results of the simulation are values that change only by a new run.
//
// A sheet is first laid out as a grid in memory, then written in one pass.
// The same report always gives the same bytes.
package workbook
