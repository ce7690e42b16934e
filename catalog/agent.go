package catalog

import "strings"

// Agent is a drying agent named by its material.
type Agent struct {
	Key, Name, Kind string   // Kind: "sieve", "salt", "reactive", "oxide"
	Formula         string   // of the dry agent; "" for sieves and gels
	Aliases         []string // what else it is called
	Own             bool     // from the user's own file
	Isotherm        *Isotherm
	Hydrates        []Hydrate        // of a salt, in the order in which they form
	Claim           *Claim           // what a salt may promise
	Reaction        *Reaction        // of a reactive agent with water
	Residuals       []Residual       // measured, in named solvents
	PoreSpace       map[string]Value // share of the capacity left by a solvent that enters the pores; others leave all
	UselessAbove    *Value           // K, where a salt gives its water up again
	Window          *Value           // m, opening of the pores of a sieve
	BulkDensity     *Value           // kg/m3
	BeadDiameter    *Value           // m
	BeadDensity     *Value           // kg/m3, of the bead with its pores
	BeadPorosity    *Value           // -, macropores
	BeadTortuosity  *Value           // -
	HoldUp          *Value           // m3 solvent kept per kg of drained agent
	Lives           *Value           // uses before discard when regenerated
	Fade            *Value           // share of capacity lost per regeneration
	MaxDose         *Value           // kg/m3
	HeatOfUptake    *Value           // J per mole of water taken up from vapour
	HeatCapacity    *Value           // J/(kg K)
	LoadingBand     float64          // factor either way on the loading, 1 = none stated
	BandOrigin      Origin           // of LoadingBand
}

// Hydrate is a pair of solid phases that holds the water activity while it lasts.
type Hydrate struct {
	Pair     string
	Water    float64 // mol taken up per mol of the anhydrous salt
	Capacity Value   // kg water per kg of anhydrous salt
	Heat     Value   // J released per mol of liquid water
	Activity Value   // of water at 25 C, with its band
}

// Claim bounds what a salt is said to reach. The outlet claimed is never below
// the equilibrium, the share left and the least outlet.
type Claim struct {
	Removed Value            // share of the dissolved water removed in 15 min
	Except  map[string]Value // the same, for solvents in which it differs
	Least   Value            // kg/kg, lowest outlet
	Dose    Value            // kg/m3, to which Removed belongs
	Target  Value            // kg/kg; for a lower one a salt is not the last step
}

// Plain is the agent's name without its form.
func (a *Agent) Plain() string {
	name, _, _ := strings.Cut(a.Name, ", ")
	return name
}

// Reaction is what one agent does with water.
type Reaction struct {
	Equation string
	Water    float64 // mol consumed per mol of agent
	Hydrogen float64 // mol set free per mol of agent
	Solvent  float64 // mol of solvent bound per mol of surplus (magnesium in an alcohol); 0 for most
	Need     Value   // kg agent per kg water, by stoichiometry
	GasM3    Value   // m3 hydrogen per kg agent at 20 C; 0 where none
	Surplus  Value   // kg agent used per kg needed
	Activity Value   // water activity taken where nothing was measured, with its band
	Feed     Value   // kg/kg, most water in a feed
	Waste    string  // price item of the spent agent
}

// Residual is the water that an agent left in a solvent when it was measured.
type Residual struct {
	Solvent string
	Water   Value   // kg/kg
	TimeS   float64 // s; 0 where not stated
	How     string  // "reflux", "still", ...
}
