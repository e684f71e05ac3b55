package sample

import (
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/entropy/program"
)

// layeredColumns are the jets of the layered model with a frame.
func layeredColumns() []Column {
	return []Column{
		{Name: "u_x", Unknown: "u", Order: 1, Index: []int{1, 0, 0}},
		{Name: "u_y", Unknown: "u", Order: 1, Index: []int{0, 1, 0}},
		{Name: "u_z", Unknown: "u", Order: 1, Index: []int{0, 0, 1}},
		{Name: "u_xx", Unknown: "u", Order: 2, Index: []int{2, 0, 0}},
		{Name: "u_xy", Unknown: "u", Order: 2, Index: []int{1, 1, 0}},
		{Name: "u_yy", Unknown: "u", Order: 2, Index: []int{0, 2, 0}},
		{Name: "eps", Kind: Positive},
		{Name: "cos", Kind: Cosine},
		{Name: "sin", Kind: Sine},
	}
}

func layeredLayout(tb testing.TB) *Layout {
	l, err := NewLayout(layeredColumns())
	require.NoError(tb, err)
	return l
}

// layered compiles e - lambda eps K - div Sigma, with div Sigma = R (u_xixi -
// u_etaeta), and the sum of the absolute values of its monomials:
//
//	e     = (u_z^2 - u_z |p|^2 + |p|^4/4)/(2 eps) + eps (u_xx + u_yy)^2/2
//	K     = u_xx u_yy - u_xy^2
//	div S = (u_z - |p|^2/2) ((c^2 - s^2)(u_xx - u_yy) + 4 c s u_xy).
func layered(tb testing.TB, lambda float64) *program.Program {
	b := program.NewBuilder()
	in := make([]program.Ref, 9)
	for i := range in {
		in[i] = b.Input(i)
	}
	ux, uy, uz, uxx, uxy, uyy, eps, c, s := in[0], in[1], in[2], in[3], in[4], in[5], in[6], in[7], in[8]
	k := b.Const
	sq := func(x program.Ref) program.Ref { return b.Mul(x, x) }

	r := b.Sub(uz, b.Mul(k(0.5), b.Add(sq(ux), sq(uy))))
	l := b.Add(uxx, uyy)
	det := b.Sub(b.Mul(uxx, uyy), sq(uxy))
	e := b.Add(b.Quo(sq(r), b.Mul(k(2), eps)), b.Mul(b.Mul(k(0.5), eps), sq(l)))
	shear := b.Add(b.Mul(b.Sub(sq(c), sq(s)), b.Sub(uxx, uyy)), b.Mul(k(4), b.Product(c, s, uxy)))
	gap := b.Sub(b.Sub(e, b.Mul(k(lambda), b.Mul(eps, det))), b.Mul(r, shear))

	var terms []program.Ref
	add := func(coef float64, f ...program.Ref) {
		terms = append(terms, b.Func(program.Abs, b.Mul(k(coef), b.Product(f...))))
	}
	inv := b.Quo(k(1), eps)
	add(0.5, uz, uz, inv)
	add(0.5, uz, ux, ux, inv)
	add(0.5, uz, uy, uy, inv)
	add(0.125, ux, ux, ux, ux, inv)
	add(0.25, ux, ux, uy, uy, inv)
	add(0.125, uy, uy, uy, uy, inv)
	add(0.5, eps, uxx, uxx)
	add(0.5, eps, uyy, uyy)
	add(1-lambda, eps, uxx, uyy)
	add(lambda, eps, uxy, uxy)
	for _, f := range [][]program.Ref{{uz}, {ux, ux}, {uy, uy}} {
		h := 1 / float64(len(f))
		for _, u := range []program.Ref{uxx, uyy} {
			add(h, append([]program.Ref{c, c, u}, f...)...)
			add(h, append([]program.Ref{s, s, u}, f...)...)
		}
		add(4*h, append([]program.Ref{c, s, uxy}, f...)...)
	}
	p, err := b.Compile(gap, b.Sum(terms...))
	require.NoError(tb, err)
	return p
}
