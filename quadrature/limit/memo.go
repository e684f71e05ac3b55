package limit

import "slices"

// remembering is a copy of the problem that keeps the jets of the last place,
// which shares and smoothings both ask for.
func (p *Problem) remembering() *Problem {
	c := *p
	n := len(p.Domain.Lo)
	at := make([]float64, n)
	last := make([]Jet, p.Branches)
	for i := range last {
		last[i] = NewJet(n)
	}
	known := false
	c.Jets = func(x []float64, jets []Jet) {
		if !known || !slices.Equal(at, x) {
			p.Jets(x, last)
			copy(at, x)
			known = true
		}
		for i := range last {
			jets[i].set(&last[i])
		}
	}
	return &c
}

// perBlock is what it takes to begin with a block of places.
const perBlock = 6

// counting is a copy of the problem that counts its work.
func (p *Problem) counting() *Problem {
	c := *p
	c.work = new(int)
	c.Values = func(x, v []float64) {
		*c.work += p.Branches
		p.Values(x, v)
	}
	c.Jets = func(x []float64, jets []Jet) {
		*c.work += 3 * p.Branches
		p.Jets(x, jets)
	}
	if p.Gradients != nil {
		c.Gradients = func(i int, x [][]float64, u []float64, g [][]float64) {
			*c.work += perBlock + len(u)
			p.Gradients(i, x, u, g)
		}
	}
	return &c
}

// add counts n evaluations.
func (p *Problem) add(n int) {
	if p.work != nil {
		*p.work += n
	}
}
