package steps

// TrapOutlet is the water (kg/kg) at which a trap stops that is run to goal: its
// floor and the lowest outlet that is claimed of any trap stand in the way.
func TrapOutlet(feed, goal, floor, lowest float64) float64 {
	reach, _ := trapReach(feed, goal, floor, lowest)
	return reach
}
