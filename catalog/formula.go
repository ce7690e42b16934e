package catalog

import (
	"fmt"
	"regexp"
	"strconv"
)

// stoichiometry is the source id of figures that follow from a formula.
const stoichiometry = "stoichiometry"

// atomicKgPerMol are conventional standard atomic weights (IUPAC; from memory).
var atomicKgPerMol = map[string]float64{
	"H": 1.008e-3, "B": 10.81e-3, "C": 12.011e-3, "N": 14.007e-3, "O": 15.999e-3, "F": 18.998e-3, "Na": 22.990e-3, "Mg": 24.305e-3,
	"Al": 26.982e-3, "Si": 28.085e-3, "P": 30.974e-3, "S": 32.06e-3, "Cl": 35.45e-3, "K": 39.098e-3, "Ca": 40.078e-3, "Br": 79.904e-3, "I": 126.904e-3,
}

// waterKgPerMol is the molar mass of water.
const waterKgPerMol = 2*1.008e-3 + 15.999e-3

// atoms counts the atoms of a formula by element.
type atoms map[string]int

var formulaPart = regexp.MustCompile(`^([A-Z][a-z]?)([0-9]*)`)

// parseFormula reads a plain formula such as C7H8 or CaCl2, without brackets.
func parseFormula(text string) (atoms, error) {
	count := atoms{}
	for rest := text; rest != ""; {
		found := formulaPart.FindStringSubmatch(rest)
		if found == nil || atomicKgPerMol[found[1]] == 0 {
			return nil, fmt.Errorf("%q is not a formula that can be read; write it without brackets, like C7H8", text)
		}
		n := 1
		if found[2] != "" {
			n, _ = strconv.Atoi(found[2])
		}
		if n < 1 || n > 200 {
			return nil, fmt.Errorf("%q has %d atoms of %s", text, n, found[1])
		}
		count[found[1]] += n
		rest = rest[len(found[0]):]
	}
	if len(count) == 0 {
		return nil, fmt.Errorf("the formula is empty")
	}
	return count, nil
}

func (a atoms) kgPerMol() float64 {
	var sum float64
	for _, element := range keysOf(a) { // sorted: the sum must not depend on the order
		sum += float64(a[element]) * atomicKgPerMol[element]
	}
	return sum
}

func (a atoms) halogenated() bool { return a["F"]+a["Cl"]+a["Br"]+a["I"] > 0 }

// MolarMassKgPerMol is the molar mass of the dry agent; 0 where it has no formula.
func (a *Agent) MolarMassKgPerMol() float64 {
	count, err := parseFormula(a.Formula)
	if err != nil {
		return 0
	}
	return count.kgPerMol()
}
