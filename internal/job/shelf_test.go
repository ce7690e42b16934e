package job

import (
	"parch/catalog"
	"parch/internal/quantity"
)

// shelf is a small catalog of the tests' own, so that messages do not change with the data.
func shelf() *catalog.Catalog {
	value := func(text string, d quantity.Dimension) catalog.Value {
		reading, err := quantity.Parse(text, d)
		if err != nil {
			panic(err)
		}
		return catalog.Value{SI: reading.SI, Text: text, Origin: catalog.Origin{Source: "practice", Confidence: catalog.CommonPractice}}
	}
	history := func(key, temperature, residual string) catalog.History {
		h := catalog.History{Key: key, Text: key, ResidualKgPerKg: value(residual, quantity.MassRatio)}
		if temperature != "" {
			h.TemperatureK = value(temperature, quantity.Temperature).SI
		}
		return h
	}
	grade := value("30 mg/kg", quantity.WaterContent)
	return &catalog.Catalog{
		Date: "2026-12-01",
		Solvents: map[string]*catalog.Solvent{
			"water":           {Key: "water", Name: "water"},
			"toluene":         {Key: "toluene", Name: "toluene", Class: "aromatic", Aliases: []string{"toluol"}},
			"dichloromethane": {Key: "dichloromethane", Name: "dichloromethane", Class: "halogenated", Aliases: []string{"DCM"}},
			"ethyl-acetate":   {Key: "ethyl-acetate", Name: "ethyl acetate", Class: "ester"},
			"tetrahydrofuran": {Key: "tetrahydrofuran", Name: "tetrahydrofuran", Class: "ether", Aliases: []string{"THF"}, Hazards: catalog.Hazards{PeroxideClass: "B"}},
		},
		Carriers: map[string]*catalog.Carrier{"benzene": {Key: "benzene", ByName: true}},
		Agents:   map[string]*catalog.Agent{"sieve-3a": {Key: "sieve-3a"}, "sieve-4a": {Key: "sieve-4a"}},
		Matrix: map[[2]string]catalog.Verdict{
			{"halogenated", "sodium"}: {Word: "dangerous", Reason: "can explode"},
			{"aromatic", "sodium"}:    {Word: "caution"},
		},
		Histories: []catalog.History{
			history("furnace-300-closed", "300 °C", "1.0 g/100 g"), history("furnace-300", "300 °C", "2.0 g/100 g"),
			history("oven-150", "150 °C", "6 g/100 g"), history("oven-200", "200 °C", "3.5 g/100 g"), history("oven-250", "250 °C", "2.5 g/100 g"),
			history("opened-tin", "", "7.5 g/100 g"),
		},
		Apparatus: map[string]*catalog.Apparatus{"still-20l": {Key: "still-20l"}, "drum-25l": {Key: "drum-25l"}},
		Prices: map[string]catalog.Price{
			"technician": {Item: "technician", Unit: "hour"}, "electricity": {Item: "electricity", Unit: "kwh"},
			"cooling-water": {Item: "cooling-water", Unit: "m3"}, "karl-fischer": {Item: "karl-fischer", Unit: "test"},
			"sieve-3a": {Item: "sieve-3a", Unit: "kg"}, "toluene": {Item: "toluene", Unit: "litre"},
			"toluene-dry": {Item: "toluene-dry", Unit: "litre", WaterMax: &grade},
		},
		Practice: catalog.Practice{
			"site-room": value("20 °C", quantity.Temperature), "site-pressure": value("1013.25 hPa", quantity.Pressure),
			"site-receiver": value("18 °C", quantity.Temperature), "site-humidity": value("50 %", quantity.Share),
			"site-attended-per-day": value("7 h", quantity.Time), "site-peroxide-limit": value("5 mg/L", quantity.MassConcentration),
		},
	}
}
