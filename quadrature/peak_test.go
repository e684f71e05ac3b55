package quadrature

import (
	"context"
	"errors"
	"math"
	"testing"
)

// Peaks and dips between the first nodes. Where one is as wide as the distance
// of the places that are looked at beside the nodes, about 1/256 of a range, it
// must be integrated to the tolerance or show in the error.
func TestPeaks(t *testing.T) {
	gauss := func(x, at, width float64) float64 { return math.Exp(-(x - at) * (x - at) / (width * width)) }
	root := math.Sqrt(math.Pi)
	segment := Polygon{Vertices: [][]float64{{0, 0}, {0, 1}}}
	circle := Patch{Dim: 2, Params: []Range{{0, 2 * math.Pi}}, Map: func(s, x []float64, jac [][]float64) {
		x[0], x[1] = math.Cos(s[0]), math.Sin(s[0])
		jac[0][0], jac[0][1] = -x[1], x[0]
	}}
	sheet := Patch{Dim: 3, Params: []Range{{0, 1}, {0, 1}}, Map: func(s, x []float64, jac [][]float64) {
		x[0], x[1], x[2] = 0, s[0], s[1]
		clear(jac[0])
		clear(jac[1])
		jac[0][1], jac[1][2] = 1, 1
	}}
	for _, c := range []struct {
		name    string
		surface Surface
		density func(x []float64) float64
		want    float64
	}{
		{"on a segment", segment, func(x []float64) float64 { return 1 + gauss(x[1], 0.3217, 0.003) }, 1 + root*0.003},
		{"a dip", segment, func(x []float64) float64 { return 1 - gauss(x[1], 0.7071, 0.003) }, 1 - root*0.003},
		{"on a slope", segment, func(x []float64) float64 { return x[1] + 2*gauss(x[1], 0.3217, 0.003) }, 0.5 + 2*root*0.003},
		{"alone", segment, func(x []float64) float64 { return gauss(x[1], 0.3217, 0.003) }, root * 0.003},
		{"on a circle", circle, func(x []float64) float64 { return 1 + gauss(math.Atan2(x[1], x[0]), 1, 0.02) }, 2*math.Pi + root*0.02},
		{"ridge along one parameter", sheet, func(x []float64) float64 { return 1 + gauss(x[1], 0.3217, 0.003) }, 1 + root*0.003},
		{"ridge along the other", sheet, func(x []float64) float64 { return 1 + gauss(x[2], 0.3217, 0.003) }, 1 + root*0.003},
		{"a peak on a sheet", sheet, func(x []float64) float64 {
			return 1 + gauss(x[1], 0.3217, 0.06)*gauss(x[2], 0.6, 0.06)
		}, 1 + math.Pi*0.06*0.06},
	} {
		r, err := Integrate(context.Background(), c.surface, Traces{}, func(x, _, _, _ []float64) float64 { return c.density(x) }, Options{})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
		}
		if d := math.Abs(r.Energy - c.want); !(d <= r.Error) || !(r.Error <= 1e-9*c.want) {
			t.Errorf("%s: %.15g ± %.1e, true %.15g", c.name, r.Energy, r.Error, c.want)
		}
	}
}

// A peak that a further place happens to meet and no node ever does is an error
// on its share of the area.
func TestPeakThatIsNotResolved(t *testing.T) {
	_, at := math.Modf(0.5 + golden)
	n := 0
	r, err := Integrate(context.Background(), Polygon{Vertices: [][]float64{{0, 0}, {0, 1}}}, Traces{}, func(x, _, _, _ []float64) float64 {
		n++
		if math.Abs(x[1]-at) < 1e-12 {
			return 7
		}
		return 1
	}, Options{})
	if !errors.Is(err, ErrAccuracy) || !(r.Error >= 6.0/patrols) || math.Abs(r.Energy-1) > 1e-14 {
		t.Errorf("%v, %v", r, err)
	}
	if n != r.Evaluations+3*patrols {
		t.Errorf("%d calls, %d evaluations", n, r.Evaluations)
	}
}

func TestBeyond(t *testing.T) {
	var s span
	if s.beyond(3) != 0 {
		t.Error("beyond nothing")
	}
	s.add(1)
	for x, want := range map[float64]float64{1: 0, 1 + 1e-7: 0, 2: 1, 0.5: 0.5, -1: 2} {
		if got := s.beyond(x); got != want {
			t.Errorf("%v is beyond by %v", x, got)
		}
	}
	s.add(3)
	for x, want := range map[float64]float64{3.4: 0, 0.6: 0, 4: 1, 0: 1} {
		if got := s.beyond(x); got != want {
			t.Errorf("%v is beyond by %v", x, got)
		}
	}
}
