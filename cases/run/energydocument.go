package run

import (
	"math"

	"creaseproof/cases"

	"creaseproof/cases/creases"
)

// EnergyDocument is what `creaseproof energy --json` prints. Energies, errors
// and areas are numbers; what does not apply is absent.
type EnergyDocument struct {
	Schema int          `json:"schema"`
	Cases  []EnergyCase `json:"cases"`
}

// EnergyCase is a case with the values of its surfaces.
type EnergyCase struct {
	Case     string           `json:"case"`
	Surfaces []creases.Result `json:"surfaces"`
}

// Document is the outcome for the given cases, in their order. A surface that
// means nothing is open, for the reason that the error gives, after the values
// found before.
func (o *EnergyOutcome) Document(list []*cases.Case) EnergyDocument {
	doc := EnergyDocument{Schema: Schema, Cases: []EnergyCase{}}
	byCase := map[*cases.Case][]creases.Result{}
	for _, r := range o.Results {
		for _, v := range r.Values {
			for _, x := range []**float64{&v.Energy, &v.Error, &v.Area, &v.Slices, &v.SlicesError, &v.Claimed} {
				if *x != nil && (math.IsNaN(**x) || math.IsInf(**x, 0)) {
					*x = nil // JSON has no spelling for it
				}
			}
			byCase[r.Case] = append(byCase[r.Case], v)
		}
		if r.Unread() {
			byCase[r.Case] = append(byCase[r.Case], unfinished(r.Surface, "without meaning: "+problem(r.Err)))
		}
	}
	for _, c := range list {
		values := byCase[c]
		if values == nil {
			values = []creases.Result{}
		}
		doc.Cases = append(doc.Cases, EnergyCase{Case: c.Name, Surfaces: values})
	}
	return doc
}
