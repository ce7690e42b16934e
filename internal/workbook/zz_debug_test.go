package workbook

import (
	"bytes"
	"fmt"
	"os"
	"testing"
	"time"
)

func TestDebugLive(t *testing.T) {
	r := demo(t)
	for range 2 {
		start := time.Now()
		var b bytes.Buffer
		err := Write(&b, r)
		fmt.Println("write", time.Since(start), b.Len(), err)
		os.WriteFile("/tmp/alive-demo.xlsx", b.Bytes(), 0o644)
	}
}

func TestDebugFaults(t *testing.T) {
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l := lay(m)
	for _, g := range l.grids {
		for _, row := range g.rows {
			for c := range row {
				if row[c].formula != "" {
					row[c].value = nil
				}
			}
		}
	}
	e, _ := newEvaluator(l.grids, l.names)
	n := 0
	for _, g := range l.grids[1:] {
		for r, row := range g.rows {
			for c := range row {
				if row[c].formula == "" {
					continue
				}
				if v, bad := e.cell(g, c+1, r+1).(fault); bad && n < 25 {
					n++
					fmt.Println(g.name, at(c+1, r+1), v, row[c].formula)
				}
			}
		}
	}
	fmt.Println(e.failed)
}
