package study

import (
	"context"
	"fmt"
	"parch/catalog"
	"parch/internal/job"
	"testing"
	"time"
)

func TestLead(t *testing.T) {
	t0 := time.Now()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	fmt.Println("load", time.Since(t0))
	n, d := job.Demo()
	j, err := job.Read(n, d, c)
	if err != nil {
		t.Fatal(err)
	}
	t0 = time.Now()
	r, err := Compare(context.Background(), j, c, Options{})
	if err != nil {
		t.Fatal(err)
	}
	fmt.Println("compare", time.Since(t0))
	for _, l := range r.Lots {
		fmt.Println(l.Job.Name, l.AcceptAt*1e6, l.CannotShow, l.NothingToDo)
		for _, x := range l.Routes {
			fmt.Printf("  %2d %-30s %v %.4g mg/kg h %.3g att %.3g E %.3g cost %s per L %s  set %+v\n", x.Rank, x.ID, x.Run.Meets, x.Run.WaterOut*1e6, x.Run.HoursTotal, x.Run.HoursAttended, x.Run.EnergyKWh, x.Bill.PerBatch.StringFixed(2), x.Bill.PerLitre.StringFixed(3), x.Run.Settings)
			for _, o := range x.Run.Outcomes {
				fmt.Println("       ", o.Kind, o.Agent, o.WhyText, fmt.Sprintf("%.3g kg agent, lost %.3g L", o.AgentKg, o.SolventLostL))
			}
			for h, a := range x.Bill.ByHead {
				fmt.Print("  ", h, "=", a.StringFixed(2))
			}
			fmt.Println()
		}
		for _, e := range l.Excluded {
			fmt.Println("   x", e.ID, e.Reason, e.Source)
		}
	}
}
