package workbook

import (
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"
)

// A4, landscape, one page wide. Lengths in points.
const (
	paperA4         = 9
	marginInches    = 0.4
	footInches      = 0.6
	printableWidth  = 841.9 - 2*72*marginInches
	printableHeight = 595.3 - 72*(marginInches+footInches)
	pointsPerUnit   = 6.1 // width of one unit of column width, a digit of the typeface
)

// view sets what stands before the rows in the file: it must come before them.
func (e *emitter) view(g *grid) error {
	fit, colour, gridLines := g.percent == 0, g.tab, false
	if err := e.file.SetSheetProps(g.name, &excelize.SheetPropsOptions{FitToPage: &fit, TabColorRGB: &colour}); err != nil {
		return err
	}
	used := at(1, 1) + ":" + at(len(g.widths), g.last())
	if err := e.file.SetSheetDimension(g.name, used); err != nil {
		return err
	}
	return e.file.SetSheetView(g.name, 0, &excelize.ViewOptions{ShowGridLines: &gridLines})
}

// page sets how the sheet prints: one page wide, headings repeated.
func (e *emitter) page(g *grid) error {
	size, orientation, wide, tall := paperA4, "landscape", 1, 0
	if g.portrait {
		orientation = "portrait"
	}
	if g.onePage {
		tall = 1
	}
	layout := &excelize.PageLayoutOptions{Size: &size, Orientation: &orientation, FitToWidth: &wide, FitToHeight: &tall}
	if g.percent > 0 {
		percent := uint(g.percent)
		layout = &excelize.PageLayoutOptions{Size: &size, Orientation: &orientation, AdjustTo: &percent}
	}
	if err := e.file.SetPageLayout(g.name, layout); err != nil {
		return err
	}
	side, foot := marginInches, footInches
	if err := e.file.SetPageMargins(g.name, &excelize.PageLayoutMarginsOptions{
		Left: &side, Right: &side, Top: &side, Bottom: &foot, Footer: &side}); err != nil {
		return err
	}
	if err := e.file.SetHeaderFooter(g.name, &excelize.HeaderFooterOptions{OddFooter: "&L&A&RPage &P of &N"}); err != nil {
		return err
	}
	return e.printRange(g)
}

func (e *emitter) printRange(g *grid) error {
	sheet := "'" + g.name + "'!"
	printed := g.printed
	if len(printed) == 0 {
		printed = []rows{{1, max(g.last(), g.drawnTo())}}
	}
	areas := make([]string, len(printed))
	for i, r := range printed {
		areas[i] = sheet + fixed(1, r.first) + ":" + fixed(g.printColumns, r.last)
	}
	names := []excelize.DefinedName{{Name: "_xlnm.Print_Area", RefersTo: strings.Join(areas, ","), Scope: g.name}}
	if g.frozenRows > 0 && !g.onePage && g.percent == 0 {
		first, last := g.titles()
		names = append(names, excelize.DefinedName{Name: "_xlnm.Print_Titles",
			RefersTo: fmt.Sprintf("%s$%d:$%d", sheet, first, last), Scope: g.name})
	}
	for _, n := range names {
		if err := e.file.SetDefinedName(&n); err != nil {
			return err
		}
	}
	return nil
}

// titles are the rows repeated on each printed page: the headings of a sheet that prints
// one set of columns, else the top of the sheet with the run that it belongs to, or with
// the row below if that is blank.
func (g *grid) titles() (first, last int) {
	switch {
	case g.heads.last > 0:
		return g.heads.first, g.heads.last
	case !g.mixed:
		return g.frozenRows, g.frozenRows
	case g.bannerRows > 0:
		return 1, frameRows + g.bannerRows
	case g.blankRow(frameRows + 1):
		return 1, frameRows + 1
	}
	return 1, frameRows
}

// free reports whether a page begins with a row that is left free: the last of a banner is,
// as long as nothing is edited.
func (g *grid) free() bool {
	_, last := g.titles()
	return g.mixed && last > frameRows
}

func (g *grid) blankRow(row int) bool { return row <= len(g.rows) && len(g.rows[row-1]) == 0 }

// protect guards against slips: only inputs can be edited. There is no password.
func (e *emitter) protect(g *grid) error {
	return e.file.ProtectSheet(g.name, &excelize.SheetProtectionOptions{
		SelectLockedCells: true, SelectUnlockedCells: true,
		FormatColumns: true, FormatRows: true, EditObjects: false, AutoFilter: true,
	})
}

// scale is the factor by which the sheet is printed, as far as widths tell.
func (g *grid) scale() float64 {
	width := 0.0
	for _, w := range g.widths[:g.printColumns] {
		width += w * pointsPerUnit
	}
	return min(1, printableWidth/width)
}

// The smaller of A4 and Letter, upright, within the margins. Points.
const (
	uprightWidth  = 595.3 - 2*72*marginInches
	uprightHeight = 792 - 72*(marginInches+footInches)
	reserve       = 0.97 // readers differ in the height of rows
)

// widestUnit is the width in points of one unit of column width where the widest of the
// usual typefaces stands in for the workbook's own: a digit of DejaVu Sans or Verdana is
// 0.636 of its size (from the file of DejaVu Sans 2.37; Verdana from memory), columns
// are measured in digits of 11 points, and readers round them up to whole pixels.
const widestUnit = 7.1

// pageScale is the scale at which rows that are printed by themselves fit on an upright
// page of either size, whatever typeface they are printed in.
func (g *grid) pageScale(r rows) float64 {
	width := 0.0
	for _, w := range g.widths[:g.printColumns] {
		width += w * widestUnit
	}
	return min(1, uprightWidth/width, uprightHeight*reserve/g.span(r.first, r.last))
}

// cardScale is the scale in per cent at which the largest part that is printed by
// itself fits. A reader that scales to the page by itself would spread all parts over
// the pages of one.
func (g *grid) cardScale() int {
	scale := 1.0
	for _, r := range g.printed {
		scale = min(scale, g.pageScale(r))
	}
	return max(10, int(100*scale))
}
