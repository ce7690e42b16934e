package bench

import (
	"slices"

	"parch/internal/steps"
)

// Takes lists the flags that mean something to a step.
func Takes(k steps.Kind) []string { return slices.Concat(common, uses[k].takes) }

// FindAgent finds an agent by what it is called.
var FindAgent = findAgent
