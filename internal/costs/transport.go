package costs

import "strings"

// Transport is the entry of an item in the list of dangerous goods.
type Transport struct {
	UN    string // number, "" where none is known here
	Class string // of hazard, "+" before a subsidiary one
	Group string // packing group
	Basis string // what the entry rests on
}

const (
	listed     = "UN Model Regulations, dangerous goods list; from memory: the supplier's safety data sheet decides"
	collective = "a collective entry (ethers, not otherwise specified), from memory: the supplier's safety data sheet decides"
	byAir      = "listed for transport by air only, from memory: the supplier's safety data sheet decides"
	unlisted   = "not a dangerous good as far as is remembered; the supplier's safety data sheet decides"
	unknown    = "no entry here; see the supplier's safety data sheet"
)

// dangerousGoods are UN number, class and packing group by item, recalled from
// the dangerous goods list of the UN Model Regulations on the Transport of
// Dangerous Goods (the list of ADR chapter 3.2), not seen in print.
var dangerousGoods = map[string]Transport{
	"toluene":                  {"1294", "3", "II", listed},
	"benzene":                  {"1114", "3", "II", listed},
	"ethylbenzene":             {"1175", "3", "II", listed},
	"o-xylene":                 {"1307", "3", "III", listed},
	"m-xylene":                 {"1307", "3", "III", listed},
	"p-xylene":                 {"1307", "3", "III", listed},
	"n-pentane":                {"1265", "3", "II", listed},
	"n-hexane":                 {"1208", "3", "II", listed},
	"n-heptane":                {"1206", "3", "II", listed},
	"n-octane":                 {"1262", "3", "II", listed},
	"isooctane":                {"1262", "3", "II", listed},
	"cyclohexane":              {"1145", "3", "II", listed},
	"methylcyclohexane":        {"2296", "3", "II", listed},
	"diethyl-ether":            {"1155", "3", "I", listed},
	"diisopropyl-ether":        {"1159", "3", "II", listed},
	"mtbe":                     {"2398", "3", "II", listed},
	"tetrahydrofuran":          {"2056", "3", "II", listed},
	"2-methyltetrahydrofuran":  {"2536", "3", "II", listed},
	"1-4-dioxane":              {"1165", "3", "II", listed},
	"1-2-dimethoxyethane":      {"2252", "3", "II", listed},
	"anisole":                  {"2222", "3", "III", listed},
	"dichloromethane":          {"1593", "6.1", "III", listed},
	"chloroform":               {"1888", "6.1", "III", listed},
	"carbon-tetrachloride":     {"1846", "6.1", "II", listed},
	"1-2-dichloroethane":       {"1184", "3+6.1", "II", listed},
	"chlorobenzene":            {"1134", "3", "III", listed},
	"ethyl-acetate":            {"1173", "3", "II", listed},
	"isopropyl-acetate":        {"1220", "3", "II", listed},
	"n-butyl-acetate":          {"1123", "3", "II", listed},
	"dimethyl-carbonate":       {"1161", "3", "II", listed},
	"acetone":                  {"1090", "3", "II", listed},
	"2-butanone":               {"1193", "3", "II", listed},
	"4-methyl-2-pentanone":     {"1245", "3", "II", listed},
	"methanol":                 {"1230", "3+6.1", "II", listed},
	"ethanol":                  {"1170", "3", "II", listed},
	"1-propanol":               {"1274", "3", "II", listed},
	"2-propanol":               {"1219", "3", "II", listed},
	"1-butanol":                {"1120", "3", "III", listed},
	"isobutanol":               {"1212", "3", "III", listed},
	"tert-butanol":             {"1120", "3", "II", listed},
	"acetonitrile":             {"1648", "3", "II", listed},
	"n-n-dimethylformamide":    {"2265", "3", "III", listed},
	"pyridine":                 {"1282", "3", "II", listed},
	"triethylamine":            {"1296", "3+8", "II", listed},
	"acetic-acid":              {"2789", "8+3", "II", listed},
	"cyclopentyl-methyl-ether": {"3271", "3", "II", collective},
	"calcium-oxide":            {"1910", "8", "III", byAir},
	"calcium-hydride":          {"1404", "4.3", "I", listed},
	"sodium":                   {"1428", "4.3", "I", listed},
	"phosphorus-pentoxide":     {"1807", "8", "II", listed},
	"potassium-hydroxide":      {"1813", "8", "II", listed},
	"magnesium":                {"1869", "4.1", "III", listed},
}

// harmless are materials that stand in no list of dangerous goods, from memory.
var harmless = []string{"n-methyl-2-pyrrolidone", "n-n-dimethylacetamide", "dimethyl-sulfoxide", "sieve-", "alumina", "silica-gel", "sodium-sulfate", "magnesium-sulfate", "calcium-sulfate", "calcium-chloride", "potassium-carbonate"}

func transportOf(item string) Transport {
	if t, ok := dangerousGoods[solventOf(item)]; ok {
		return t
	}
	for _, material := range harmless {
		if strings.HasPrefix(item, material) {
			return Transport{Basis: unlisted}
		}
	}
	return Transport{Basis: unknown}
}
