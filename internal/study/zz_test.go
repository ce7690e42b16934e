package study_test

import (
	"fmt"
	"os"
	"testing"
	"time"

	"parch/internal/study"
)

func TestZZ(t *testing.T) {
	jobs := map[string]string{"demo": demo(t)}
	for _, f := range []string{"saturated-toluene", "reclaimed-ethyl-acetate", "acetonitrile"} {
		data, _ := os.ReadFile("../../testdata/jobs/" + f + ".yaml")
		jobs[f] = string(data)
	}
	for n, y := range jobs {
		t0 := time.Now()
		r := compare(t, y, study.Options{})
		fmt.Println(n, time.Since(t0))
		for _, l := range r.Lots {
			fmt.Println("  ", l.Job.Name)
			for _, b := range l.BreakEvens {
				fmt.Printf("     %s now %.4g at %.6g %s (%.3g-%.3g) below %s above %s never %t step %t\n", b.Key, b.Now, b.At, b.Unit, b.From, b.To, b.Below, b.Above, b.Never, b.Step)
			}
			for i, row := range l.WhatIf.Cells {
				fmt.Printf("     %.3g:", l.WhatIf.StartWater[i]*1e6)
				for k, c := range row {
					fmt.Printf("  [%.3g: %s %.2f %s]", l.WhatIf.Target[k]*1e6, c.ID, c.CostPerLitre, c.Note)
				}
				fmt.Println()
			}
		}
	}
}
