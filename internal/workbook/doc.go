// Package workbook writes a report as a spreadsheet file. The steps of the
// routes follow the inputs by closed forms and by curves that the program
// tabulates; bills, costs per litre and ranks follow the steps and the prices. Every
// formula is stored with the value it must have, which is computed from the formula
// itself. Steps that the sheet cannot follow are values that change only by a new
// run, and the sheet says so.
//
// A sheet is first laid out as a grid in memory, then written in one pass.
// The same report always gives the same bytes.
package workbook
