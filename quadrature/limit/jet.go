package limit

// Jet is a function with its first and second derivatives at a point of Dim
// coordinates.
type Jet struct {
	U float64
	P []float64 // gradient
	H []float64 // Hessian, row by row, symmetric
}

// NewJet is a zero jet in dim coordinates.
func NewJet(dim int) Jet {
	return Jet{P: make([]float64, dim), H: make([]float64, dim*dim)}
}

func (j *Jet) clear() {
	j.U = 0
	clear(j.P)
	clear(j.H)
}

func (j *Jet) set(k *Jet) {
	j.U = k.U
	copy(j.P, k.P)
	copy(j.H, k.H)
}

// Smoothing makes an approximation of scale eps of the combined branches of a
// problem: the jet at x.
type Smoothing interface {
	Smooth(p *Problem, x []float64, eps float64, out *Jet)
}

// An inexact smoothing has jets with an error of their own, and differs from the
// sharp function within a distance of the creases only. Its energy is finite
// wherever its jets are.
type inexact interface {
	// begin forgets what earlier integrals found.
	begin()
	// reach is that distance.
	reach(eps float64) float64
	// accuracy is the relative tolerance below which integrals would follow
	// the errors of the jets.
	accuracy(p *Problem) float64
	// finer is the jet at the place of the last one by finer rules; false where
	// that was exact.
	finer(p *Problem, x []float64, eps float64, out *Jet) bool
}

// jetsOf are the jets of the branches of p at x, in list, which grows as needed.
func jetsOf(p *Problem, x []float64, list *[]Jet) []Jet {
	for len(*list) < p.Branches {
		*list = append(*list, NewJet(len(x)))
	}
	p.Jets(x, (*list)[:p.Branches])
	return (*list)[:p.Branches]
}
