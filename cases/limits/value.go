package limits

import (
	"fmt"
	"math"

	"creaseproof/cases/casefile"
	"creaseproof/quadrature/limit"
)

// What the energies of an approximation do as eps falls, as far as numbers can
// show it.
const (
	// Sharp: at the smallest eps the energy is within the relative gap allowed
	// of the jump energy, and the gap did not grow twice in turn.
	Sharp = "sharp"
	// Above: it is not, and the extrapolated limit is above the jump energy, by
	// more than the last energies differ.
	Above = "above"
	// Below: it is not, and the extrapolated limit is below the jump energy.
	Below = "below"
	// Infinite: the approximation has infinite energy.
	Infinite = "infinite"
	// Undecided: none of these can be said.
	Undecided = "open"
)

// Value is what came of one limit at one choice of its values. The lists
// run along with Eps.
type Value struct {
	Approximation string            `json:"approximation"` // its name
	Kind          string            `json:"kind"`          // profile, front, mollified
	Values        map[string]string `json:"values,omitempty"`

	Eps         []float64 `json:"eps"`
	Energy      []float64 `json:"energy"`
	Compression []float64 `json:"compression"`
	Bending     []float64 `json:"bending"`
	Curvature   []float64 `json:"curvature"` // eps ∫K
	Error       []float64 `json:"error"`     // estimates of the absolute errors of these

	// Equipartition is compression over bending at the smallest eps.
	Equipartition *float64 `json:"equipartition,omitempty"`

	// Target is the jump energy, claimed or integrated over the same domain.
	Target        *float64 `json:"target,omitempty"`
	TargetError   *float64 `json:"target_error,omitempty"`
	TargetClaimed bool     `json:"target_claimed"`
	// Jumps is the integral over the jumps, where Target is claimed and differs
	// from it by more than its error.
	Jumps *float64 `json:"-"`

	// Gap is the energy at the smallest eps minus Target, RelativeGap over Target.
	Gap         *float64 `json:"gap,omitempty"`
	RelativeGap *float64 `json:"relative_gap,omitempty"`
	// Rate is the fitted order of the gap in eps, RateError its standard error.
	Rate      *float64 `json:"rate,omitempty"`
	RateError *float64 `json:"rate_error,omitempty"`
	// BelowRounding says that the gap at the smallest eps is not above the
	// errors of the integrals, so that no rate is fitted.
	BelowRounding bool `json:"below_rounding,omitempty"`
	// Limit is the energy extrapolated to eps = 0.
	Limit      *float64 `json:"limit,omitempty"`
	LimitError *float64 `json:"limit_error,omitempty"`

	Evaluations int    `json:"evaluations"`
	Outcome     string `json:"outcome"`
	Expected    string `json:"expected"`
	Met         bool   `json:"met"`
	Reason      string `json:"reason,omitempty"`

	Complete bool `json:"-"` // every eps was integrated, or one is infinite
}

// defaultGap is the relative gap that is allowed at the smallest eps.
const defaultGap = 1e-3

// Empty is a value of a limit of which nothing is known.
func Empty(l *casefile.Limit) Value {
	v := Value{Approximation: l.Name, Kind: l.Approximation, Expected: l.Expect, Outcome: Undecided,
		Eps: []float64{}, Energy: []float64{}, Compression: []float64{}, Bending: []float64{}, Curvature: []float64{}, Error: []float64{}}
	if v.Expected == "" {
		v.Expected = Sharp
	}
	return v
}

func (v *Value) add(e limit.Energy) {
	v.Eps = append(v.Eps, e.Eps)
	v.Energy = append(v.Energy, e.Energy)
	v.Compression = append(v.Compression, e.Compression)
	v.Bending = append(v.Bending, e.Bending)
	v.Curvature = append(v.Curvature, e.Curvature)
	v.Error = append(v.Error, e.Error+4e-16*math.Abs(e.Energy))
	v.Evaluations += e.Evaluations
}

// rounding is the relative size of what rounding does to a claimed energy and
// to the sums of an integral.
const rounding = 1e-14

// Judge compares the energies with the target, and finishes the value: what
// comes after Target follows from what comes before it.
func (v *Value) Judge(l *casefile.Limit) {
	within := defaultGap
	if l != nil && l.Within != nil {
		within, _ = l.Within.Float64()
	}
	v.Complete = true
	n := len(v.Eps)
	if n == 0 || v.Target == nil {
		return
	}
	target := *v.Target
	last := n - 1
	if v.Bending[last] != 0 {
		q := v.Compression[last] / v.Bending[last]
		v.Equipartition = &q
	}
	gaps, errors := make([]float64, n), make([]float64, n)
	for i, e := range v.Energy {
		gaps[i] = e - target
		errors[i] = v.Error[i] + *v.TargetError + rounding*math.Abs(target)
	}
	v.Gap = &gaps[last]
	unit, theGap := math.Abs(target), "relative gap"
	if target != 0 {
		q := gaps[last] / unit
		v.RelativeGap = &q
	} else {
		unit, theGap = 1, "gap"
	}
	v.BelowRounding = math.Abs(gaps[last]) <= errors[last]
	if r := limit.FitRate(v.Eps, gaps, errors); r != nil && !v.BelowRounding && !v.Exponential() {
		v.Rate = &r.Value
		if !math.IsNaN(r.Deviation) {
			v.RateError = &r.Deviation
		}
	}
	allowed := within * unit
	x, e := limit.Extrapolate(v.Eps, v.Energy, v.Error)
	if !math.IsInf(e, 0) {
		v.Limit, v.LimitError = &x, &e
	}
	switch {
	case v.Error[last] > allowed:
		v.Reason = fmt.Sprintf("the energy at the smallest eps has an estimated error of %.2g, more than the gap of %.2g that is allowed", v.Error[last], allowed)
	case math.Abs(gaps[last]) <= allowed && grows(gaps, errors):
		v.Reason = "the gap at the smallest eps is as small as is asked, but it grows as eps falls: the energy may have no limit"
	case math.Abs(gaps[last]) <= allowed && v.Jumps != nil && math.Abs(target-*v.Jumps) > allowed:
		v.Reason = fmt.Sprintf("the energy tends to the claimed %.10g, but the integral over the jumps is %.10g: leave energy out, and the approximation is compared with that", target, *v.Jumps)
	case math.Abs(gaps[last]) <= allowed:
		v.Outcome = Sharp
	case v.Limit == nil:
		v.Reason = fmt.Sprintf("the %s at the only eps is %.3g, more than the %.3g allowed: one energy shows no limit, add smaller eps", theGap, gaps[last]/unit, within)
	case math.Abs(x-target) > allowed+5*e && math.Abs(v.Energy[last]-v.Energy[last-1]) > math.Abs(x-target):
		v.Reason = fmt.Sprintf("the %s at the smallest eps is %.3g, more than the %.3g allowed; from the eps before to that one the energy changed by more than its limit is away from the jump energy: add smaller eps", theGap, gaps[last]/unit, within)
	case x-target > allowed+5*e:
		v.Outcome = Above
		v.Reason = fmt.Sprintf("the limit %.10g is above the jump energy by %.4g%s", x, x-target, percent(x-target, target))
	case target-x > allowed+5*e:
		v.Outcome = Below
		v.Reason = fmt.Sprintf("the limit %.10g is below the jump energy by %.4g%s: the domain, the branches or the claimed energy are not those of one crease", x, target-x, percent(target-x, target))
	default:
		v.Reason = fmt.Sprintf("the %s at the smallest eps is %.3g, more than the %.3g allowed; the limit %.10g ± %.2g is not away from the jump energy: add smaller eps", theGap, gaps[last]/unit, within, x, e)
	}
	if v.Outcome == Above || v.Outcome == Below {
		v.Rate, v.RateError = nil, nil // the gap does not fall
	}
	v.Met = v.Outcome == v.Expected
}

// Exponential reports whether the gap falls faster than powers of eps do: its
// order between two eps is above 2, and half as great again between the next
// two, as far as it is well above the errors. No rate is fitted then.
func (v *Value) Exponential() bool {
	if v.Target == nil || v.TargetError == nil {
		return false
	}
	var slopes []float64
	for i := 1; i < len(v.Eps); i++ {
		a, b := v.Energy[i-1]-*v.Target, v.Energy[i]-*v.Target
		if math.Abs(b) <= 10*(v.Error[i]+*v.TargetError+rounding*math.Abs(*v.Target)) {
			break
		}
		slopes = append(slopes, math.Log(math.Abs(a/b))/math.Log(v.Eps[i-1]/v.Eps[i]))
	}
	for i, s := range slopes {
		if !(s > 2) || i > 0 && s < 1.5*slopes[i-1] {
			return false
		}
	}
	return len(slopes) > 1
}

// grows reports whether the gap, well above its errors, grew twice in turn.
func grows(gaps, errors []float64) bool {
	n := len(gaps)
	if n < 3 {
		return false
	}
	for i := n - 2; i < n; i++ {
		a, b := gaps[i-1], gaps[i]
		if a*b < 0 || math.Abs(b) < 1.1*math.Abs(a) || math.Abs(b-a) <= 3*(errors[i-1]+errors[i]) {
			return false
		}
	}
	return true
}

func percent(x, of float64) string {
	if of == 0 {
		return ""
	}
	return fmt.Sprintf(" (%.3g%%)", 100*x/math.Abs(of))
}
