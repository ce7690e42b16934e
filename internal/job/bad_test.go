package job

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"parch/internal/document"
)

func linesOf(t *testing.T, text string) []string {
	t.Helper()
	j, err := Read("job.yaml", []byte(text), shelf())
	var invalid *document.Invalid
	switch {
	case err == nil:
		return nil
	case j != nil:
		t.Error("a job and an error")
	case !errors.As(err, &invalid):
		t.Fatalf("%T is not *document.Invalid", err)
	}
	return invalid.Lines()
}

// Each row adds or replaces one line of a sound job and names the message.
func TestBadValues(t *testing.T) {
	const sound = "lots:\n- solvent: toluene\n  batch: 18 L\n  water: 480 mg/kg\n  target: 15 mg/kg\n"
	for _, c := range []struct{ old, now, want string }{
		// solvents
		{"toluene", "tolune", `job.yaml:2: lots[0].solvent: "tolune" is not a solvent of the catalog; did you mean "toluene" or "toluol"?`},
		{"toluene", "honey", `job.yaml:2: lots[0].solvent: "honey" is not a solvent of the catalog; solvents: dichloromethane, ethyl-acetate, tetrahydrofuran, toluene`},
		{"toluene", "Water", `job.yaml:2: lots[0].solvent: water is what is taken out; name the solvent it is in`},
		// required keys
		{"  batch: 18 L\n", "", `job.yaml:2: lots[0]: "batch" is missing`},
		{"  target: 15 mg/kg\n", "", `job.yaml:2: lots[0]: "target" is missing`},
		{sound, "title: a\n", `job.yaml:1: "lots" is missing`},
		{sound, "lots: []\n", `job.yaml:1: lots: the list is empty; name at least one lot`},
		{sound, "lots: toluene\n", `job.yaml:1: lots: a list is wanted here, this is a single value`},
		{sound, "- lots\n", `job.yaml:1: keys with values are wanted here, this is a list`},
		// unknown and doubled keys
		{"  batch", "  volume", `job.yaml:2: lots[0]: "batch" is missing` + "\n" + `job.yaml:3: lots[0]: unknown key "volume"`},
		{"  batch", "  batc: 1 L\n  batch", `job.yaml:3: lots[0]: unknown key "batc"; did you mean "batch" or "batches" or "failed batch"?`},
		{"lots:", "currancy: EUR\nlots:", `job.yaml:1: unknown key "currancy"; did you mean "currency"?`},
		{"  batch", "  batch: 1 L\n  batch", `job.yaml:4: lots[0]: "batch" stands twice; it is already on line 3`},
		// units
		{"480 mg/kg", `"480"`, `job.yaml:4: lots[0].water: "480" has no unit; write "480 mg/kg"`},
		{"18 L", "18 kg", `job.yaml:3: lots[0].batch: "18 kg" is a mass, but a volume is wanted here; allowed: L, mL, m3, US gal, uL, cm3`},
		{"18 L", "1,8 L", `job.yaml:3: lots[0].batch: "1,8 L" has a comma; write a decimal point (1.5) and no thousands separator (1500)`},
		// impossible values
		{"18 L", "-18 L", `job.yaml:3: lots[0].batch: "-18 L" is not possible here; allowed: 0.05 L to 10000 L`},
		{"18 L", "1e400 L", `job.yaml:3: lots[0].batch: "1e400 L" is too large`},
		{"18 L", "NaN", `job.yaml:3: lots[0].batch: "NaN" is not a finite number`},
		{"18 L", ".nan L", `job.yaml:3: lots[0].batch: ".nan L" is not a finite number`},
		{"480 mg/kg", "60 %", `job.yaml:4: lots[0].water: "60 %" is not possible here; allowed: 0 mg/kg to 500000 mg/kg, or saturated`},
		{"15 mg/kg", "0 mg/kg", `job.yaml:5: lots[0].target: "0 mg/kg" is not possible here; allowed: 0.01 mg/kg to 500000 mg/kg`},
		{"15 mg/kg", "600 mg/kg\n  free water: 5 mL", `job.yaml:5: lots[0].target: "600 mg/kg" is not below the water now (480 mg/kg), yet there is free water: a lot with free water is not dry. Check both, or remove the free water`},
		{"15 mg/kg", "15 mg/kg\n  free water: 18 L", `job.yaml:6: lots[0].free water: "18 L" is as much as the batch (18 L) or more`},
		{"15 mg/kg", "15 mg/kg\n  not below: 15 mg/kg", `job.yaml:6: lots[0].not below: "15 mg/kg" is not below the target (15 mg/kg)`},
		{"15 mg/kg", "15 mg/kg\n  needed within: 0 h", `job.yaml:6: lots[0].needed within: "0 h" is not possible here; allowed: 1 min to 366 d`},
		{"15 mg/kg", "15 mg/kg\n  batches: 0 /yr", `job.yaml:6: lots[0].batches: "0 /yr" is not possible here; allowed: 0.1 /yr to 10000 /yr`},
		{"15 mg/kg", "15 mg/kg\n  heater: 2 MW", `job.yaml:6: lots[0].heater: "2 MW": "MW" is not a unit known here; allowed: kW, W`},
		{"15 mg/kg", "15 mg/kg\n  sieve history: 400 °C", `job.yaml:6: lots[0].sieve history: "400 °C" is not possible here; allowed: 150 °C to 300 °C, where there are data`},
		{"15 mg/kg", "15 mg/kg\n  sieve history: sunny", `job.yaml:6: lots[0].sieve history: "sunny" is not a history known here; write the oven's temperature ("300 C", "300 C closed hot", "250 C, closed hot, 30 d", "200 C, vacuum 1 hPa"), what the sieve holds ("residual 1.5 g/100 g") or one of: furnace-300-closed, furnace-300, oven-150, oven-200, oven-250, opened-tin`},
		{"15 mg/kg", "15 mg/kg\n  peroxide: {reading: 0 mg/L}", `job.yaml:6: lots[0].peroxide: "date" is missing`},
		{"15 mg/kg", "15 mg/kg\n  peroxide: {reading: 0 ppm, date: 2026-11-28}", `job.yaml:6: lots[0].peroxide.reading: "0 ppm": "ppm" is not clear for a solution; test strips read mg/L: write "mg/L"; allowed: g/L, mg/L, kg/m3, g/mL, mg/mL, mg/m3, g/m3, % m/v`},
		{"15 mg/kg", "15 mg/kg\n  peroxide: {reading: 0 mg/L, date: 28.11.2026}", `job.yaml:6: lots[0].peroxide.date: "28.11.2026" is not a date; write it like "2026-10-01"`},
		// site
		{"lots:", "site: {room: 70 °C}\nlots:", `job.yaml:1: site.room: "70 °C" is not possible here; allowed: 5 °C to 40 °C`},
		{"lots:", "site: {pressure: 0 kPa}\nlots:", `job.yaml:1: site.pressure: "0 kPa" is not possible here; allowed: 10 hPa to 1100 hPa, absolute`},
		{"lots:", "site: {receiver: 0 °C}\nlots:", `job.yaml:1: site.receiver: "0 °C" is not possible here; allowed: 1 °C to 40 °C; water would freeze in a colder one`},
		{"lots:", "site: {karl fischer: titration}\nlots:", `job.yaml:1: site.karl fischer: "titration" is not allowed here; allowed: coulometric, volumetric`},
		{"lots:", "objective: speed\nlots:", `job.yaml:1: objective: "speed" is not allowed here; allowed: cost, time, waste, energy`},
		{"lots:", "assurance: 101 %\nlots:", `job.yaml:1: assurance: "101 %" is not possible here; allowed: 50 % to 99.9 %`},
		// money
		{"lots:", "currency: QQQ\nlots:", `job.yaml:1: currency: "QQQ" is not a currency; write its ISO 4217 code in capitals, such as EUR`},
		{"lots:", "currency: eur\nlots:", `job.yaml:1: currency: "eur" is not a currency; write its ISO 4217 code in capitals, such as EUR`},
		{"lots:", "site: {technician: 48 USD/h}\nlots:", `job.yaml:1: site.technician: "48 USD/h" is in USD, but the currency of the job is EUR (by default; "currency" is not given); use one currency, or give a dated rate under "rates"`},
		{"lots:", "site: {technician: 48 €/h}\nlots:", `job.yaml:1: site.technician: "48 €/h" has a currency sign; write the ISO 4217 code after the number, such as "148 EUR"`},
		{"lots:", "site: {technician: 48 EUR}\nlots:", `job.yaml:1: site.technician: "48 EUR" is not a price per hour; write it like "48 EUR/h"`},
		{"lots:", "site: {technician: -1 EUR/h}\nlots:", `job.yaml:1: site.technician: "-1 EUR/h" is negative; a price is zero or more`},
		// price list
		{"lots:", "prices: [{item: sieve-3b, pack: 5 kg, price: 1 EUR}]\nlots:", `job.yaml:1: prices[0].item: "sieve-3b" is not an item that is priced here; did you mean "sieve-3a" or "sieve-4a"?`},
		{"lots:", "prices: [{item: sieve-3a, pack: 5 L, price: 1 EUR}]\nlots:", `job.yaml:1: prices[0].pack: "5 L" is a volume, but a mass is wanted here; allowed: kg, g, mg, ug, t, lb`},
		{"lots:", "prices: [{item: sieve-3a, pack: 0 kg, price: 1 EUR}]\nlots:", `job.yaml:1: prices[0].pack: "0 kg" is not a possible pack; allowed: 0.000001 to 1000000 kg`},
		{"lots:", "prices: [{item: sieve-3a, price: 1 EUR}]\nlots:", `job.yaml:1: prices[0]: "sieve-3a" needs a pack, such as "pack: 5 kg", or a price per kg`},
		{"lots:", "prices: [{item: sieve-3a, pack: 5 kg, price: 1 EUR/kg}]\nlots:", `job.yaml:1: prices[0].price: "1 EUR/kg" is a price per unit, and there is a pack as well; give the price of the pack, or no pack`},
		{"lots:", "prices: [{item: sieve-3a, price: 1 EUR/L}]\nlots:", `job.yaml:1: prices[0].price: "1 EUR/L" is not a price per kg, the unit of "sieve-3a"`},
		{"lots:", "prices: [{item: toluene, pack: 20 L, price: 1 EUR, water: 5 mg/kg}]\nlots:", `job.yaml:1: prices[0].water: only a dry grade ("toluene-dry") has a water limit`},
		{"lots:", "prices: [{item: ethyl-acetate-dry, pack: 20 L, price: 1 EUR}]\nlots:", `job.yaml:1: prices[0]: "water" is missing`},
		{"lots:", "prices:\n- {item: sieve-3a, price: 1 EUR/kg}\n- {item: sieve-3a, price: 2 EUR/kg}\nlots:", `job.yaml:3: prices[1]: a price of "sieve-3a" is already given on line 2`},
		{"lots:", "site: {technician: 48 EUR/h}\nprices: [{item: technician, price: 50 EUR/h}]\nlots:", `job.yaml:2: prices[0]: a price of "technician" is already given on line 1`},
		{"lots:", "currency: CHF\nsite: {technician: 48 EUR/h}\nlots:", `job.yaml:2: site.technician: "48 EUR/h" is in EUR, but the currency of the job is CHF; use one currency, or give a dated rate under "rates"`},
		// packs and terms
		{"lots:", "date: 2026-11-30\nprices: [{item: sieve-3a, pack: 5 kg, price: 1 EUR, date: 2026-12-01}]\nlots:", `job.yaml:2: prices[0].date: "2026-12-01" is after the date of the job, 2026-11-30`},
		{"lots:", "prices: [{item: sieve-3a, pack: 5 kg, price: 1 EUR, date: 2026-10-01, valid until: 2026-09-30}]\nlots:", `job.yaml:1: prices[0].valid until: "2026-09-30" is before the date of the price, 2026-10-01`},
		{"lots:", "prices: [{item: sieve-3a, pack: 5 kg, price: 1 EUR, minimum order: 0}]\nlots:", `job.yaml:1: prices[0].minimum order: "0" is not a possible order; allowed: 1 to 100000 packs`},
		{"lots:", "prices: [{item: sieve-3a, price: 1 EUR/kg, minimum order: 2}]\nlots:", `job.yaml:1: prices[0].minimum order: counts packs; give a pack with its price`},
		{"lots:", "prices: [{item: sieve-3a, pack: 5 kg, price: 1 EUR, lead time: 14}]\nlots:", `job.yaml:1: prices[0].lead time: "14" has no unit; write "14 h"`},
		{"lots:", "prices:\n- {item: sieve-3a, pack: 5 kg, price: 1 EUR}\n- {item: sieve-3a, pack: 5000 g, price: 2 EUR}\nlots:", `job.yaml:3: prices[1]: a price of "sieve-3a" is already given on line 2`},
		{"lots:", "prices:\n- {item: toluene-dry, pack: 5 L, price: 1 EUR, water: 10 mg/kg}\n- {item: toluene-dry, pack: 20 L, price: 2 EUR, water: 30 mg/kg}\nlots:", `job.yaml:3: prices[1]: the packs of "toluene-dry" state different water (line 2); one item has one limit`},
		{"lots:", "prices: prices.csv\nlots:", `job.yaml:1: prices: the price list "prices.csv" cannot be read from here`},
		// rates of exchange
		{"lots:", "rates: [{from: USD, rate: 0.92}]\nlots:", `job.yaml:1: rates[0]: "date" is missing`},
		{"lots:", "rates: [{from: EUR, rate: 1, date: 2026-11-01}]\nlots:", `job.yaml:1: rates[0].from: "EUR" is the currency of the job itself`},
		{"lots:", "rates: [{from: USD, rate: 0, date: 2026-11-01}]\nlots:", `job.yaml:1: rates[0].rate: "0" is not a possible rate; allowed: 0.000001 to 1000000, up to 8 decimals`},
		// cooling, write-off, storage
		{"lots:", "site: {sieve flush: water}\nlots:", `job.yaml:1: site.sieve flush: "water" is not allowed here; allowed: nitrogen, vacuum, none`},
		{"lots:", "site: {lots over a charge: 13}\nlots:", `job.yaml:1: site.lots over a charge: "13" is not possible here; allowed: 1 to 12`},
		{"lots:", "site: {lots over a charge: some}\nlots:", `job.yaml:1: site.lots over a charge: "some" is not a whole number`},
		{"lots:", "site: {cooling: river}\nlots:", `job.yaml:1: site.cooling: "river" is not allowed here; allowed: tap, chiller, loop`},
		{"lots:", "equipment costing: annuity\nlots:", `job.yaml:1: equipment costing: an annuity needs a rate of interest; write for example "interest: 6 %"`},
		{"lots:", "interest: 60 %\nlots:", `job.yaml:1: interest: "60 %" is not possible here; allowed: 0.1 % to 50 % a year`},
		{"lots:", "storage limits: [{limit: 100 L}]\nlots:", `job.yaml:1: storage limits[0]: give either a class (flammable, halogenated, reactive) or an item`},
		{"lots:", "storage limits: [{class: flammable, limit: 100 EUR}]\nlots:", `job.yaml:1: storage limits[0].limit: "100 EUR": "EUR" is not a unit known here; allowed: kg, g, mg, ug, t, lb`},
		// choices
		{"lots:", "equipment: [{item: still-20, owned: yes}]\nlots:", `job.yaml:1: equipment[0].item: "still-20" is not an apparatus of the catalog; did you mean "still-20l"?`},
		{"lots:", "exclude: {steps: [boil]}\nlots:", `job.yaml:1: exclude.steps[0]: "boil" is not a step; allowed: settle, trap, forerun, salt, soak, column, reactive, buy`},
		{"lots:", "accept: {agents: [gunpowder]}\nlots:", `job.yaml:1: accept.agents[0]: "gunpowder" is not a drying agent; allowed: sieve-3a, sieve-4a, sodium`},
		{"lots:", "stock: [{item: sieve-3a, on hand: 4 L}]\nlots:", `job.yaml:1: stock[0].on hand: "4 L" is a volume, but a mass is wanted here; allowed: kg, g, mg, ug, t, lb`},
		{"lots:", "stock: [{item: toluene, on hand: {a: 1}}]\nlots:", `job.yaml:1: stock[0].on hand: a single value is wanted here, this is a set of keys`},
		{"lots:", "stock: [{item: toluene, on hand: 1e9 L}]\nlots:", `job.yaml:1: stock[0].on hand: "1e9 L" is not possible here; allowed: 0 L to 1000 m3`},
		// names
		{"- solvent", "- name: =1+1\n  solvent", `job.yaml:2: lots[0].name: "=1+1" begins with "="; in a sheet that would be taken for a formula. Begin with a letter or a digit`},
		{"- solvent", "- name: \"a\\nb\"\n  solvent", `job.yaml:2: lots[0].name: "a\nb" contains a line break or a character that cannot be printed`},
		{"- solvent", "- name: \"a\\u202eb\"\n  solvent", `job.yaml:2: lots[0].name: "a\u202eb" contains a line break or a character that cannot be printed`},
		{"- solvent", "- name: " + strings.Repeat("n", 81) + "\n  solvent", `job.yaml:2: lots[0].name: "` + strings.Repeat("n", 59) + `…" has 81 characters; at most 80`},
		{sound, sound + "- {name: a, solvent: toluene, batch: 1 L, water: 1 g/kg, target: 1 mg/kg}\n- {name: a, solvent: toluene, batch: 1 L, water: 1 g/kg, target: 1 mg/kg}\n", `job.yaml:7: lots[2].name: "a" is already given on line 6`},
		{"lots:", "title: \"@home\"\nlots:", `job.yaml:1: title: "@home" begins with "@"; in a sheet that would be taken for a formula. Begin with a letter or a digit`},
		// the file
		{sound, "", "job.yaml: the file is empty"},
		{sound, sound + "---\n" + sound, "job.yaml:6: a second YAML document begins here; a file holds one"},
		{"toluene", "*a", "job.yaml:2: aliases (*name) are not used here; write the value out"},
		{sound, "lots: " + strings.Repeat("[", 20000), "job.yaml:1: nested deeper than 32 levels"},
		{sound, "PK\x03\x04\x00\x00", "job.yaml:1: this is not a text file: it contains a zero byte"},
	} {
		text := strings.Replace(sound, c.old, c.now, 1)
		if diff := cmp.Diff(strings.Split(c.want, "\n"), linesOf(t, text)); diff != "" {
			t.Errorf("%q:\n%s", c.now, diff)
		}
	}
}

// A file with many mistakes is answered once, with all of them in the order of the file.
func TestAllProblemsAtOnce(t *testing.T) {
	text := `title: "+44"
currency: EUR
objectve: cost
site: {room: 21, technician: 48 GBP/h}
prices:
  - {item: sieve-9z, pack: 5 kg, price: 148 USD}
lots:
  - name: first
    solvent: tolune
    batch: -1 L
    water: 480
    target: 15 ppm
    target: 16 ppm
  - name: first
    solvent: &x toluene
    batch: 1e400 L
    water: 480 ppmv
`
	want := []string{
		`job.yaml:1: title: "+44" begins with "+"; in a sheet that would be taken for a formula. Begin with a letter or a digit`,
		`job.yaml:3: unknown key "objectve"; did you mean "objective"?`,
		`job.yaml:4: site.room: "21" has no unit; write "21 °C"`,
		`job.yaml:4: site.technician: "48 GBP/h" is in GBP, but the currency of the job is EUR; use one currency, or give a dated rate under "rates"`,
		`job.yaml:6: prices[0].price: "148 USD" is in USD, but the currency of the job is EUR; use one currency, or give a dated rate under "rates"`,
		`job.yaml:6: prices[0].item: "sieve-9z" is not an item that is priced here; did you mean "sieve-3a" or "sieve-4a"?`,
		`job.yaml:9: lots[0].solvent: "tolune" is not a solvent of the catalog; did you mean "toluene" or "toluol"?`,
		`job.yaml:10: lots[0].batch: "-1 L" is not possible here; allowed: 0.05 L to 10000 L`,
		`job.yaml:11: lots[0].water: "480" has no unit; write "480 mg/kg"`,
		`job.yaml:13: lots[0]: "target" stands twice; it is already on line 12`,
		`job.yaml:14: lots[1].name: "first" is already given on line 8`,
		`job.yaml:14: lots[1]: "target" is missing`,
		`job.yaml:15: lots[1].solvent: anchors (&name) are not used here; write the value out where it is needed`,
		`job.yaml:16: lots[1].batch: "1e400 L" is too large`,
		`job.yaml:17: lots[1].water: "480 ppmv": "ppmv" is by volume of what is not clear; write "mg/kg", or "% V/V"; allowed: mg/kg, ppm, g/kg, % m/m, %, kg/kg, ug/g, mg/g; with a density also mg/L, g/L, ug/mL, mmol/L, mol/L, % m/V, % V/V`,
	}
	if diff := cmp.Diff(want, linesOf(t, text)); diff != "" {
		t.Error(diff)
	}
}

func TestTooManyLots(t *testing.T) {
	var text strings.Builder
	text.WriteString("lots:\n")
	for i := range 101 {
		fmt.Fprintf(&text, "- {name: lot %d, solvent: toluene, batch: 1 L, water: 480 mg/kg, target: 15 mg/kg}\n", i)
	}
	want := []string{"job.yaml:2: lots: 101 lots are too many for one file; at most 100"}
	if diff := cmp.Diff(want, linesOf(t, text.String())); diff != "" {
		t.Error(diff)
	}
}
