package thermo

// leastGap is how many points of the hull's grid an edge must skip to count as a
// gap: rounding skips one or two where the Gibbs energy is nearly straight.
const leastGap = 3

// CountGaps counts the miscibility gaps of a pair at tK: the edges of the lower
// convex hull of the Gibbs energy of mixing that skip points. The hull sees stable
// gaps only, not the spinodals of a metastable island inside one.
func (m *NRTL) CountGaps(tK float64) int {
	hull, n := m.hull(tK)
	count := 0
	for k := 1; k < n; k++ {
		if hull[k]-hull[k-1] > leastGap {
			count++
		}
	}
	return count
}
