package workbook

import (
	"strings"

	"github.com/xuri/excelize/v2"
)

// look is the appearance of a cell and, with it, the cell's meaning.
type look uint8

const (
	plain     look = iota
	title          // name of the sheet
	purpose        // what the sheet is for
	block          // heading of a block
	heading        // heading of a column
	words          // running text, wrapped
	link           // jump to another sheet
	input          // may be edited
	formula        // computed by the sheet
	program        // computed by the program: changes only by a new run
	message        // state of the checks
	best           // flag of names and ids: not bold, which would take more room
	pass           // flag
	warn           // flag
	fail           // flag
	field          // left open, to be filled in by hand
	likeInput      // shows what an input looks like
)

// paint is one row of the style table. Colours are RRGGBB.
type paint struct {
	ink, paper      string
	bold, underline bool
	size            float64
	outlined, wrap  bool
	unlocked        bool
}

const (
	white   = "FFFFFF"
	black   = "000000"
	rule    = "8A8A8A" // outline of cells
	darkInk = "404040" // axis text and outlines of charts
	gridInk = "A6A6A6" // grid lines and axes of charts
	unseen  = "FEFEFE" // stands for no fill: a bar that only carries others
)

var paints = map[look]paint{
	plain:   {ink: black, paper: white, size: 10},
	title:   {ink: "2E4F46", paper: white, bold: true, size: 16},
	purpose: {ink: "3D3D3D", paper: white, size: 10},
	block:   {ink: "2E4F46", paper: white, bold: true, size: 12},
	heading: {ink: white, paper: "2E4F46", bold: true, size: 10, wrap: true},
	words:   {ink: black, paper: white, size: 10, wrap: true},
	link:    {ink: "143D6B", paper: white, underline: true, size: 10},
	input:   {ink: "143D6B", paper: "E6F0F8", size: 10, outlined: true, unlocked: true},
	formula: {ink: black, paper: white, size: 10},
	program: {ink: "3D3D3D", paper: "EFEDE8", size: 10, wrap: true},
	message: {ink: black, paper: white, bold: true, size: 10},
	best:    {ink: "0E5A43", paper: "DCEDE4", size: 10},
	pass:    {ink: "0E5A43", paper: "DCEDE4", bold: true, size: 10},
	warn:    {ink: "6B4A00", paper: "F6EBCB", bold: true, size: 10},
	fail:    {ink: "7A1B12", paper: "F5DFD8", bold: true, size: 10},
	field:   {ink: black, paper: white, size: 10, outlined: true, wrap: true},

	likeInput: {ink: "143D6B", paper: "E6F0F8", size: 10, outlined: true},
}

// typeface of the whole workbook.
const typeface = "Arial"

// styled is a look with a number format.
type styled struct {
	look   look
	format string
	number bool // a number, or the heading of numbers
}

func (s styled) style() *excelize.Style {
	p := paints[s.look]
	st := &excelize.Style{
		Font:       &excelize.Font{Family: typeface, Bold: p.bold, Size: p.size, Color: p.ink},
		Alignment:  &excelize.Alignment{Vertical: "top", WrapText: p.wrap},
		Protection: &excelize.Protection{Locked: !p.unlocked},
	}
	if p.underline {
		st.Font.Underline = "single"
	}
	if p.paper != white {
		st.Fill = excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{p.paper}}
	}
	if p.outlined {
		for _, side := range []string{"left", "right", "top", "bottom"} {
			st.Border = append(st.Border, excelize.Border{Type: side, Color: rule, Style: 1})
		}
	}
	if format := s.set(); format != "" {
		st.CustomNumFmt = &format
	}
	switch s.look {
	case title, purpose, block, link, message:
	default:
		st.Alignment.Horizontal, st.Alignment.Indent = "left", 1
	}
	if s.number {
		st.Alignment.Horizontal = "right"
		st.Alignment.WrapText = s.look == heading
		if s.padded() {
			st.Alignment.Indent = 0
		}
	}
	return st
}

// edge leaves the right of a number free, as much as an indent of one. Some readers lose
// the indent of a number beside one that differs in its format alone.
const edge = `"   "`

// padded reports whether the format of a number has the edge. Readers fit the digits of a
// number without a format to its column only where nothing follows them.
func (s styled) padded() bool {
	return s.number && s.look != heading && s.format != "" && s.format != "General"
}

// set is the number format as it is written, each of its sections with the edge.
func (s styled) set() string {
	if !s.padded() {
		return s.format
	}
	return strings.ReplaceAll(s.format, ";", edge+";") + edge
}

// overlay is what a conditional format changes.
func (l look) overlay() *excelize.Style {
	p := paints[l]
	return &excelize.Style{
		Font: &excelize.Font{Bold: p.bold, Color: p.ink},
		Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{p.paper}},
	}
}
