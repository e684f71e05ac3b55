package run

import (
	"math"

	"creaseproof/cases"
	"creaseproof/cases/limits"
)

// LimitDocument is what `creaseproof limit --json` prints. What does not apply
// is absent.
type LimitDocument struct {
	Schema int         `json:"schema"`
	Cases  []LimitCase `json:"cases"`
}

// LimitCase is a case with the values of its limits.
type LimitCase struct {
	Case   string         `json:"case"`
	Limits []limits.Value `json:"limits"`
}

// Document is the outcome for the given cases, in their order. A limit that
// means nothing is open, for the reason that the error gives.
func (o *LimitOutcome) Document(list []*cases.Case) LimitDocument {
	doc := LimitDocument{Schema: Schema, Cases: []LimitCase{}}
	byCase := map[*cases.Case][]limits.Value{}
	for _, r := range o.Results {
		for _, v := range r.Values {
			for _, x := range []**float64{&v.Equipartition, &v.Target, &v.TargetError, &v.Gap, &v.RelativeGap, &v.Rate, &v.RateError, &v.Limit, &v.LimitError} {
				if *x != nil && (math.IsNaN(**x) || math.IsInf(**x, 0)) {
					*x = nil // JSON has no spelling for it
				}
			}
			byCase[r.Case] = append(byCase[r.Case], v)
		}
		if r.Err != nil {
			v := limits.Empty(r.Limit)
			v.Reason = "without meaning: " + problem(r.Err)
			byCase[r.Case] = append(byCase[r.Case], v)
		}
	}
	for _, c := range list {
		values := byCase[c]
		if values == nil {
			values = []limits.Value{}
		}
		doc.Cases = append(doc.Cases, LimitCase{Case: c.Name, Limits: values})
	}
	return doc
}
