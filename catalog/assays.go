package catalog

import "parch/internal/quantity"

var assayKeys = []string{"coulometric", "volumetric"}

func (s *shelf) readAssays() {
	s.cat.Assays = map[string]Assay{}
	methods := s.root(assaysFile).Map(assayKeys...)
	for _, key := range assayKeys {
		f := methods.Need(key).Map("repeatability", "detection limit", "highest", "injections", "sample")
		injections := s.value(f.Need("injections"), quantity.Number)
		if n := int(injections.SI); float64(n) != injections.SI || n < 1 {
			f.Get("injections").Fail("%q is not a whole number of at least 1", injections.Text)
		}
		s.cat.Assays[key] = Assay{
			Key:            key,
			Repeatability:  s.value(f.Need("repeatability"), quantity.WaterContent),
			DetectionLimit: s.value(f.Need("detection limit"), quantity.WaterContent),
			Highest:        s.value(f.Need("highest"), quantity.WaterContent),
			Injections:     int(injections.SI),
			InjectionsFrom: injections.Origin,
			Sample:         s.value(f.Need("sample"), quantity.Mass),
		}
	}
}
