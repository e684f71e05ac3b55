package quadrature

import (
	"context"
	"errors"
	"math"
	"testing"
)

// layeredLine is |q_perp|^3/12.
func layeredLine(_, plus, minus []float64) float64 {
	var s float64
	for k := range len(plus) - 1 {
		q := plus[k] - minus[k]
		s += q * q
	}
	return s * math.Sqrt(s) / 12
}

func TestSlicesOfClosedForms(t *testing.T) {
	ctx := context.Background()
	for _, base := range layeredCreases() {
		for _, c := range []crease{base, base.swapped(), base.rotated(0.7), base.galilean(0.3, -1.2)} {
			r, err := Slice(ctx, c.surface, Traces{Plus: c.plus, Minus: c.minus}, layeredLine, Options{})
			if err != nil {
				t.Errorf("%s: %v", c.name, err)
				continue
			}
			honest(t, c.name, r.Value, r.Error, c.want)
		}
	}
}

func TestSliceOfPolygonIsItsArea(t *testing.T) {
	// With g = 1 a vertical polygon gives its area, one tilted by the angle b
	// from the vertical its area times cos b, a horizontal one nothing.
	one := func(_, _, _ []float64) float64 { return 1 }
	for _, c := range []struct {
		name string
		v    [][]float64
		want float64
	}{
		{"vertical", [][]float64{{0, 0, 0}, {3, 4, 0}, {3, 4, 2}, {0, 0, 1}}, 7.5},
		{"tilted", [][]float64{{0, 0, 0}, {2, 0, 0}, {2, 3, 4}, {0, 3, 4}}, 8},
		{"horizontal", [][]float64{{0, 0, 1}, {2, 0, 1}, {2, 3, 1}}, 0},
	} {
		r, err := Slice(context.Background(), Polygon{c.v}, Traces{}, one, Options{})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		honest(t, c.name, r.Value, r.Error, c.want)
	}
}

func TestSliceInThePlaneCountsPoints(t *testing.T) {
	// Every height of the unit circle is taken twice.
	circle := Patch{Dim: 2, Params: []Range{{0, 2 * math.Pi}}, Map: circleMap}
	r, err := Slice(context.Background(), circle, Traces{}, func(_, _, _ []float64) float64 { return 1 }, Options{})
	if err != nil {
		t.Fatal(err)
	}
	honest(t, "circle", r.Value, r.Error, 4)
}

func TestNoSlices(t *testing.T) {
	g := Graph{Over: Rectangle{Range{0, 1}, Range{0, 1}}, F: func(x, grad []float64) float64 {
		grad[0], grad[1] = x[1], x[0]
		return x[0] * x[1]
	}}
	_, err := Slice(context.Background(), g, Traces{}, func(_, _, _ []float64) float64 { return 1 }, Options{})
	if !errors.Is(err, ErrNoSlicing) {
		t.Errorf("got %v", err)
	}
}

func circleMap(s, x []float64, jac [][]float64) {
	sin, cos := math.Sincos(s[0])
	x[0], x[1] = cos, sin
	jac[0][0], jac[0][1] = -sin, cos
}
