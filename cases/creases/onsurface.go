package creases

import (
	"errors"
	"fmt"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/jet"
)

// onSurface is exact arithmetic on a piece of a surface: coordinates are the
// positions as functions of the parameters, jets the traces there.
type onSurface struct {
	*entropy.Exact
	params map[string]algebra.Fraction // of a patch, by name
	pos    []algebra.Fraction
	nu     []algebra.Fraction
	grads  map[jet.Side][]algebra.Fraction
	second func(i, j int) (algebra.Fraction, error)
	value  *algebra.Fraction // of u
}

// Coordinate is the position.
func (a *onSurface) Coordinate(i int) algebra.Fraction { return a.pos[i] }

// Constant is a constant, or a parameter.
func (a *onSurface) Constant(name string) algebra.Fraction {
	if x, ok := a.params[name]; ok {
		return x
	}
	return a.Exact.Constant(name)
}

// Jet is a trace.
func (a *onSurface) Jet(unknown int, j jet.Index, side jet.Side) (algebra.Fraction, error) {
	var at []int
	for i, k := range j {
		for range k {
			at = append(at, i)
		}
	}
	switch g := a.grads[side]; {
	case len(at) == 0 && a.value != nil:
		return *a.value, nil
	case len(at) == 1 && g != nil:
		return g[at[0]], nil
	case len(at) == 2 && a.second != nil:
		return a.second(at[0], at[1])
	}
	return algebra.Fraction{}, fmt.Errorf("%w: a derivative that is not known on the surface", jet.ErrOutside)
}

// Normal is component i of the unit normal.
func (a *onSurface) Normal(i int) (algebra.Fraction, error) {
	if a.nu == nil {
		return algebra.Fraction{}, fmt.Errorf("%w: the normal is not known", jet.ErrOutside)
	}
	return a.nu[i], nil
}

// Total is refused.
func (a *onSurface) Total(algebra.Fraction, int) (algebra.Fraction, error) {
	return algebra.Fraction{}, fmt.Errorf("%w: a total derivative in a formula of a surface", jet.ErrOutside)
}

// Euler is refused: it acts on jets, and these are replaced by the traces.
func (a *onSurface) Euler(algebra.Fraction, int) (algebra.Fraction, error) {
	return algebra.Fraction{}, fmt.Errorf("%w: the Euler operator in a formula of a surface", jet.ErrOutside)
}

// dot is the scalar product.
func (a *onSurface) dot(x, y []algebra.Fraction) (sum algebra.Fraction, err error) {
	for i := range x {
		p, err := a.Ring.Mul(x[i], y[i])
		if err != nil {
			return p, err
		}
		if sum, err = a.Ring.Add(sum, p); err != nil {
			return sum, err
		}
	}
	return sum, nil
}

// cross is the vector product.
func (a *onSurface) cross(x, y []algebra.Fraction) ([]algebra.Fraction, error) {
	out := make([]algebra.Fraction, 3)
	for i := range out {
		j, k := (i+1)%3, (i+2)%3
		l, err := a.Ring.Mul(x[j], y[k])
		if err != nil {
			return nil, err
		}
		r, err := a.Ring.Mul(x[k], y[j])
		if err != nil {
			return nil, err
		}
		if out[i], err = a.Ring.Sub(l, r); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// errNoEnclosure says why there is no enclosure.
var errNoEnclosure = errors.New("no enclosure")

func noEnclosure(format string, args ...any) error {
	return fmt.Errorf("%w: %s", errNoEnclosure, fmt.Sprintf(format, args...))
}
