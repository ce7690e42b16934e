package job

import _ "embed"

//go:embed demo.yaml
var demo []byte

// Demo returns the demonstration job: an invented site with invented prices.
func Demo() (name string, data []byte) { return "demo.yaml", append([]byte(nil), demo...) }
