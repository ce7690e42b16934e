package workbook

import (
	"bytes"
	"encoding/xml"
	"io"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// childOrder is the order of children that the schema of the file format
// prescribes (ISO/IEC 29500-1, DrawingML charts; from memory), as far as charts
// here use it.
var childOrder = map[string][]string{
	"chartSpace":   {"date1904", "lang", "roundedCorners", "AlternateContent", "style", "clrMapOvr", "pivotFmts", "protection", "chart", "spPr", "txPr", "externalData", "printSettings", "userShapes"},
	"chart":        {"title", "autoTitleDeleted", "pivotFmts", "view3D", "floor", "sideWall", "backWall", "plotArea", "legend", "plotVisOnly", "dispBlanksAs", "showDLblsOverMax"},
	"title":        {"tx", "layout", "overlay", "spPr", "txPr"},
	"barChart":     {"barDir", "grouping", "varyColors", "ser", "dLbls", "gapWidth", "overlap", "serLines", "axId"},
	"scatterChart": {"scatterStyle", "varyColors", "ser", "dLbls", "axId"},
	"lineChart":    {"grouping", "varyColors", "ser", "dLbls", "dropLines", "hiLowLines", "upDownBars", "marker", "smooth", "axId"},
	"ser":          {"idx", "order", "tx", "spPr", "invertIfNegative", "pictureOptions", "marker", "dPt", "dLbls", "trendline", "errBars", "cat", "val", "xVal", "yVal", "smooth", "shape"},
	"catAx": {"axId", "scaling", "delete", "axPos", "majorGridlines", "minorGridlines", "title", "numFmt", "majorTickMark", "minorTickMark", "tickLblPos",
		"spPr", "txPr", "crossAx", "crosses", "crossesAt", "auto", "lblAlgn", "lblOffset", "noMultiLvlLbl"},
	"valAx": {"axId", "scaling", "delete", "axPos", "majorGridlines", "minorGridlines", "title", "numFmt", "majorTickMark", "minorTickMark", "tickLblPos",
		"spPr", "txPr", "crossAx", "crosses", "crossesAt", "crossBetween", "majorUnit", "minorUnit", "dispUnits"},
	"scaling":  {"logBase", "orientation", "max", "min"},
	"strRef":   {"f", "strCache"},
	"strCache": {"ptCount", "pt"},
	"numRef":   {"f", "numCache"},
	"numCache": {"formatCode", "ptCount", "pt"},
	"legend":   {"legendPos", "legendEntry", "layout", "overlay", "spPr", "txPr"},
}

type element struct {
	XMLName  xml.Name
	Children []element `xml:",any"`
	Text     string    `xml:",chardata"`
}

func (e element) all(name string) (out []element) {
	for _, c := range e.Children {
		if c.XMLName.Local == name {
			out = append(out, c)
		}
		out = append(out, c.all(name)...)
	}
	return out
}

func charts(t *testing.T, b *book) map[string]element {
	t.Helper()
	out := map[string]element{}
	for name, part := range b.parts {
		if strings.HasPrefix(name, "xl/charts/chart") {
			var e element
			if err := xml.Unmarshal(part, &e); err != nil {
				t.Fatal(err)
			}
			out[name] = e
		}
	}
	return out
}

func TestChartsFollowTheSchema(t *testing.T) {
	for _, k := range everyKind(t) {
		for name, e := range charts(t, k.book) {
			inOrder(t, k.name+": "+name, e)
		}
	}
}

func inOrder(t *testing.T, where string, e element) {
	where += "/" + e.XMLName.Local
	if order, ok := childOrder[e.XMLName.Local]; ok && strings.HasSuffix(e.XMLName.Space, "/chart") {
		last := 0
		for _, c := range e.Children {
			i := slices.Index(order, c.XMLName.Local)
			if i < 0 {
				t.Errorf("%s: %s does not belong there", where, c.XMLName.Local)
			} else if i < last {
				t.Errorf("%s: %s comes too late", where, c.XMLName.Local)
			}
			last = max(last, i)
		}
	}
	for _, c := range e.Children {
		inOrder(t, where, c)
	}
}

// What charts draw is there: every cell of every reference is filled, and every chart
// that was laid out is in the file, anchored by its size, with an alternative text.
func TestChartsDrawWhatIsThere(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { chartsDrawWhatIsThere(t, k) })
	}
}

var bySize = regexp.MustCompile(`<xdr:oneCellAnchor><xdr:from>[^T]*?</xdr:from><xdr:ext cx="\d{7}" cy="\d{7,8}"></xdr:ext><xdr:graphicFrame`)

func chartsDrawWhatIsThere(t *testing.T, k kind) {
	all := charts(t, k.book)
	want := 0
	for _, g := range k.layout.grids {
		want += len(g.charts)
	}
	if len(all) != want {
		t.Errorf("%d charts, want %d", len(all), want)
	}
	if k.name == "demonstration" && want < 3*len(k.layout.lots) {
		t.Errorf("only %d charts", want)
	}
	for name, e := range all {
		for _, f := range e.all("f") {
			sheet, place, _ := strings.Cut(strings.ReplaceAll(f.Text, "$", ""), "!")
			from, to, ok := strings.Cut(place, ":")
			if !ok {
				to = from
			}
			if !allFilled(t, k.book.cells[strings.Trim(sheet, "'")], from, to) {
				t.Errorf("%s draws %s, where something is missing", name, f.Text)
			}
		}
		if n := len(e.all("ptCount")); n != len(e.all("f")) {
			t.Errorf("%s: %d references, %d of them with values", name, len(e.all("f")), n)
		}
		if n := len(e.all("ser")); n == 0 || n > 10 {
			t.Errorf("%s draws %d series", name, n)
		}
		if len(e.all("logBase")) == 0 && len(e.all("barChart")) == 0 {
			t.Errorf("%s is neither a chart of bars nor on a log axis", name)
		}
	}
	anchored, described := 0, 0
	for name, part := range k.book.parts {
		if strings.HasPrefix(name, "xl/drawings/drawing") {
			anchored += len(bySize.FindAllString(string(part), -1))
			described += len(altText.FindAllString(string(part), -1))
		}
		if bytes.Contains(part, []byte("twoCellAnchor")) {
			t.Errorf("%s has a chart that is not anchored by its size", name)
		}
	}
	if anchored != want || described != want {
		t.Errorf("of %d charts %d are anchored by their size, %d have an alternative text", want, anchored, described)
	}
}

// altText is a description that says something.
var altText = regexp.MustCompile(` descr="[^"]{40,}"`)

func allFilled(t *testing.T, cells map[string]stored, from, to string) bool {
	t.Helper()
	c1, r1, err1 := excelize.CellNameToCoordinates(from)
	c2, r2, err2 := excelize.CellNameToCoordinates(to)
	if err1 != nil || err2 != nil || r2 < r1 || c2 < c1 {
		t.Errorf("range %s:%s", from, to)
		return false
	}
	for r := r1; r <= r2; r++ {
		for c := c1; c <= c2; c++ {
			if !filled(cells[at(c, r)]) {
				return false
			}
		}
	}
	return true
}

// No chart covers a cell with content or another chart.
func TestChartsCoverNothing(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { chartsCoverNothing(t, k.layout) })
	}
}

func chartsCoverNothing(t *testing.T, l *layout) {
	for _, g := range l.grids {
		for i, p := range g.charts {
			for row := p.row; row <= g.under(p); row++ {
				for c := p.column; c < p.column+columnsUnder(g, p) && row <= len(g.rows) && c <= len(g.rows[row-1]); c++ {
					if x := g.rows[row-1][c-1]; x.value != nil || x.formula != "" {
						t.Errorf("%s: chart %d covers %s", g.name, i+1, at(c, row))
					}
				}
			}
			for _, q := range g.charts[i+1:] {
				if q.row <= g.under(p) && p.row <= g.under(q) && p.column+columnsUnder(g, p) > q.column && q.column+columnsUnder(g, q) > p.column {
					t.Errorf("%s: charts at rows %d and %d overlap", g.name, p.row, q.row)
				}
			}
		}
	}
}

// columnsUnder is the number of columns under a chart, at 7 pixels a unit of width:
// the narrowest that the typeface gives.
func columnsUnder(g *grid, p placed) int {
	left, n := float64(p.chart.Dimension.Width), 0
	for ; left > 0 && p.column-1+n < len(g.widths); n++ {
		left -= g.widths[p.column-1+n] * 7
	}
	return n
}

// A chart that is not as expected must not pass silently.
func TestChartPatchFailsLoudly(t *testing.T) {
	none := func(string) ([]cell, error) { return []cell{text(plain, "a<b")}, nil }
	good := `<barDir val="bar"></barDir><ser></tx><spPr><a:solidFill><a:srgbClr val="0072B2"></a:srgbClr></a:solidFill></spPr></ser>` +
		`<strRef><f>A!$A$1</f></strRef><numRef><f>A!$A$1</f><numCache><formatCode></formatCode></numCache></numRef>` +
		`<catAx><axPos val="t"></axPos></catAx><valAx><axPos val="l"></axPos><crosses val="autoZero"></crosses><x rot="-5400000" spcFirstLastPara="false" vert="horz"></x></valAx>`
	out, err := patchChart([]byte(good), none)
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range []string{`<axPos val="b">`, `<crosses val="max">`, `<v>a&lt;b</v>`, `<a:ln w="9525">`} {
		if !bytes.Contains(out, []byte(s)) {
			t.Errorf("no %s in %s", s, out)
		}
	}
	for _, gone := range []string{`<axPos val="t">`, `<crosses val="autoZero">`, `<strRef><f>A!$A$1</f></strRef>`, `<valAx>`, `<a:srgbClr val="0072B2">`, `rot="-5400000"`} {
		if _, err := patchChart([]byte(strings.Replace(good, gone, "", 1)), none); err == nil {
			t.Errorf("without %s the patch passes", gone)
		}
	}
	if _, err := anchorBySize([]byte(`<xdr:twoCellAnchor editAs="absolute"></xdr:twoCellAnchor>`)); err == nil {
		t.Error("an unexpected anchor passes")
	}
	if _, err := patchChart([]byte(good), func(string) ([]cell, error) { return nil, io.EOF }); err == nil {
		t.Error("a reference to nothing passes")
	}
}
