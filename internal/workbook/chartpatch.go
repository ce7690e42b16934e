package workbook

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"html"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
)

// patchChart puts right what the chart writer leaves open: bars that run from top
// to bottom have their value axis at the bottom, and every series carries its
// values, for readers that do not look them up. A fragment that is not found as
// expected is an error: the chart would look different from what was checked.
func patchChart(part []byte, values func(reference string) ([]cell, error)) ([]byte, error) {
	var err error
	if bytes.Contains(part, []byte(`<barDir val="bar">`)) {
		if part, err = turnBars(part); err != nil {
			return nil, err
		}
		if part, err = outlineBars(part); err != nil {
			return nil, err
		}
	}
	if bytes.Contains(part, []byte("<scatterChart>")) {
		if part, err = mendScatter(part); err != nil {
			return nil, err
		}
	}
	part = darken(part)
	if part, err = cacheText(part, values); err != nil {
		return nil, err
	}
	return cacheNumbers(part, values)
}

// turnBars moves the value axis of horizontal bars to the bottom.
func turnBars(part []byte) ([]byte, error) {
	i := bytes.Index(part, []byte("<valAx>"))
	if i < 0 {
		return nil, fmt.Errorf("no value axis")
	}
	categories, valueAxis := part[:i], part[i:]
	categories, err := replaceOnce(categories, `<axPos val="t">`, `<axPos val="l">`)
	if err != nil {
		return nil, err
	}
	for _, change := range [][2]string{
		{`<axPos val="l">`, `<axPos val="b">`},
		{`<crosses val="autoZero">`, `<crosses val="max">`},
		{`rot="-5400000" spcFirstLastPara="false" vert="horz"`, `rot="0" spcFirstLastPara="false" vert="horz"`},
	} {
		if valueAxis, err = replaceOnce(valueAxis, change[0], change[1]); err != nil {
			return nil, err
		}
	}
	return append(bytes.Clone(categories), valueAxis...), nil
}

// anchored is a chart as the chart writer anchors it when it shall keep its size:
// it puts the size into the end of the anchor, as an offset far beyond one cell,
// which readers may cut down to that cell.
var anchored = regexp.MustCompile(`<xdr:twoCellAnchor editAs="oneCell">(<xdr:from>.*?</xdr:from>)<xdr:to>` +
	`<xdr:col>\d+</xdr:col><xdr:colOff>(\d+)</xdr:colOff><xdr:row>\d+</xdr:row><xdr:rowOff>(\d+)</xdr:rowOff></xdr:to>(.*?)</xdr:twoCellAnchor>`)

// anchorBySize anchors every chart at its first cell and gives it its size.
func anchorBySize(part []byte) ([]byte, error) {
	if n, found := bytes.Count(part, []byte("<xdr:twoCellAnchor")), len(anchored.FindAll(part, -1)); n == 0 || n != found {
		return nil, fmt.Errorf("%d anchors, %d of them as expected", n, found)
	}
	return anchored.ReplaceAll(part, []byte(`<xdr:oneCellAnchor>$1<xdr:ext cx="$2" cy="$3"></xdr:ext>$4</xdr:oneCellAnchor>`)), nil
}

// paleLine is the colour that the chart writer gives to grid lines and axes.
const paleLine = `<a:schemeClr val="tx1"><a:lumMod val="15000"></a:lumMod><a:lumOff val="85000"></a:lumOff></a:schemeClr>`

// darken makes grid lines and axes visible on paper.
func darken(part []byte) []byte {
	return bytes.ReplaceAll(part, []byte(paleLine), []byte(`<a:srgbClr val="`+gridInk+`"></a:srgbClr>`))
}

var (
	acrossText   = regexp.MustCompile(`<xVal><strRef><f>([^<]*)</f></strRef></xVal>`)
	acrossNumber = `<xVal><numRef><f>$1</f><numCache><formatCode></formatCode></numCache></numRef></xVal>`
	categoryOnly = []byte(`<auto val="1"></auto><lblAlgn val="ctr"></lblAlgn><lblOffset val="100"></lblOffset><noMultiLvlLbl val="0"></noMultiLvlLbl>`)
)

// logWords stand in the title of every logarithmic axis.
const logWords = "(logarithmic axis)"

// mendScatter makes the values along the horizontal axis numbers, takes away what
// only an axis of categories has, and makes the axis logarithmic where its title
// says so.
func mendScatter(part []byte) ([]byte, error) {
	if series, found := bytes.Count(part, []byte("<ser>")), len(acrossText.FindAll(part, -1)); series != found {
		return nil, fmt.Errorf("%d series of points, %d of them as expected", series, found)
	}
	part = acrossText.ReplaceAll(part, []byte(acrossNumber))
	start, end := bytes.Index(part, []byte("<valAx>")), bytes.Index(part, []byte("</valAx>"))
	if start < 0 || end < start {
		return nil, fmt.Errorf("no horizontal axis")
	}
	before, axis, after := part[:start], part[start:end], part[end:]
	axis, err := replaceOnce(axis, string(categoryOnly), `<crossBetween val="midCat"></crossBetween>`)
	if err != nil {
		return nil, err
	}
	if bytes.Contains(axis, []byte(logWords)) {
		if axis, err = replaceOnce(axis, "<scaling>", `<scaling><logBase val="10"></logBase>`); err != nil {
			return nil, err
		}
	}
	return slices.Concat(before, axis, after), nil
}

var barFill = regexp.MustCompile(`(</tx><spPr><a:solidFill><a:srgbClr val="[0-9A-F]{6}"></a:srgbClr></a:solidFill>)</spPr>`)

// noBar is how the chart writer leaves a bar that carries others and is not seen.
const noBar = `</tx><spPr><a:solidFill><a:srgbClr val="` + unseen + `"></a:srgbClr></a:solidFill></spPr>`

// outlineBars draws a dark line around every bar: some of the hues are pale.
func outlineBars(part []byte) ([]byte, error) {
	empty := bytes.Count(part, []byte(noBar))
	part = bytes.ReplaceAll(part, []byte(noBar), []byte(`</tx><spPr><a:noFill></a:noFill></spPr>`))
	if series, fills := bytes.Count(part, []byte("<ser>")), len(barFill.FindAll(part, -1)); series != fills+empty {
		return nil, fmt.Errorf("%d series of bars, %d of them filled as expected", series, fills)
	}
	line := `${1}<a:ln w="9525"><a:solidFill><a:srgbClr val="` + darkInk + `"></a:srgbClr></a:solidFill></a:ln></spPr>`
	return barFill.ReplaceAll(part, []byte(line)), nil
}

func replaceOnce(part []byte, old, fresh string) ([]byte, error) {
	if n := bytes.Count(part, []byte(old)); n != 1 {
		return nil, fmt.Errorf("%q stands %d times in a chart, expected once", old, n)
	}
	return bytes.Replace(part, []byte(old), []byte(fresh), 1), nil
}

var (
	textReference   = regexp.MustCompile(`<strRef><f>([^<]*)</f></strRef>`)
	numberReference = regexp.MustCompile(`<numRef><f>([^<]*)</f><numCache><formatCode></formatCode></numCache></numRef>`)
)

func cacheText(part []byte, values func(string) ([]cell, error)) ([]byte, error) {
	return cache(part, textReference, values, func(reference, points string) string {
		return "<strRef><f>" + reference + "</f><strCache>" + points + "</strCache></strRef>"
	})
}

func cacheNumbers(part []byte, values func(string) ([]cell, error)) ([]byte, error) {
	return cache(part, numberReference, values, func(reference, points string) string {
		return "<numRef><f>" + reference + "</f><numCache><formatCode>General</formatCode>" + points + "</numCache></numRef>"
	})
}

func cache(part []byte, pattern *regexp.Regexp, values func(string) ([]cell, error), wrap func(reference, points string) string) ([]byte, error) {
	if !pattern.Match(part) {
		return nil, fmt.Errorf("no reference like %s in a chart", pattern)
	}
	var failed error
	out := pattern.ReplaceAllFunc(part, func(found []byte) []byte {
		reference := string(pattern.FindSubmatch(found)[1])
		cells, err := values(reference)
		if err != nil {
			failed = err
			return found
		}
		return []byte(wrap(reference, points(cells)))
	})
	return out, failed
}

func points(cells []cell) string {
	var b strings.Builder
	fmt.Fprintf(&b, `<ptCount val="%d"></ptCount>`, len(cells))
	for i, c := range cells {
		var v string
		switch x := c.value.(type) {
		case float64:
			v = strconv.FormatFloat(x, 'g', -1, 64)
		case string:
			var escaped bytes.Buffer
			_ = xml.EscapeText(&escaped, []byte(clean(x)))
			v = escaped.String()
		default:
			continue
		}
		fmt.Fprintf(&b, `<pt idx="%d"><v>%s</v></pt>`, i, v)
	}
	return b.String()
}

// lookUpDrawn keeps the cells that charts refer to, for when the sheets are written.
func (w *file) lookUpDrawn() error {
	w.drawn = map[string][]cell{}
	for _, g := range w.grids {
		for _, p := range g.charts {
			var references []string
			if title := p.chart.Title.Formula; title != "" {
				references = append(references, title)
			}
			for _, s := range p.chart.Series {
				references = append(references, s.Name, s.Categories, s.Values)
			}
			for _, reference := range references {
				cells, err := w.valuesAt(reference)
				if err != nil {
					return fmt.Errorf("chart on %s: %w", g.name, err)
				}
				w.drawn[reference] = cells
			}
		}
	}
	return nil
}

// drawnAt are the cells of a reference as a chart writes it.
func (w *file) drawnAt(reference string) ([]cell, error) {
	cells, ok := w.drawn[html.UnescapeString(reference)]
	if !ok {
		return nil, fmt.Errorf("%s was not looked up", reference)
	}
	return cells, nil
}

// valuesAt looks up the cells of a reference such as Costs!$D$5:$D$9. A cell that
// does not exist is an error: the chart would draw nothing.
func (w *file) valuesAt(reference string) ([]cell, error) {
	sheet, place, ok := strings.Cut(reference, "!")
	if !ok {
		return nil, fmt.Errorf("%q names no sheet", reference)
	}
	from, to, ranged := strings.Cut(strings.ReplaceAll(place, "$", ""), ":")
	if !ranged {
		to = from
	}
	c1, r1, err := excelize.CellNameToCoordinates(from)
	if err != nil {
		return nil, err
	}
	c2, r2, err := excelize.CellNameToCoordinates(to)
	if err != nil {
		return nil, err
	}
	for _, g := range w.grids {
		if quotedSheet(g.name) == sheet {
			return g.cells(c1, r1, c2, r2)
		}
	}
	return nil, fmt.Errorf("%q: no such sheet", reference)
}

func (g *grid) cells(c1, r1, c2, r2 int) (out []cell, err error) {
	for r := r1; r <= r2; r++ {
		for c := c1; c <= c2; c++ {
			if r > len(g.rows) || c > len(g.rows[r-1]) || g.rows[r-1][c-1].value == nil {
				return nil, fmt.Errorf("sheet %s: nothing in %s to draw", g.name, at(c, r))
			}
			out = append(out, g.rows[r-1][c-1])
		}
	}
	return out, nil
}
