package program

import (
	"math/rand/v2"
	"testing"
)

// benchProgram evaluates a dense polynomial of degree 3 in four inputs.
func benchProgram(b *testing.B) *Program {
	bd := NewBuilder()
	s := refZero
	for i := range 4 {
		for j := i; j < 4; j++ {
			for k := j; k < 4; k++ {
				s = bd.Add(s, bd.Product(bd.Const(float64(i+j+k)+0.3), bd.Input(i), bd.Input(j), bd.Input(k)))
			}
		}
	}
	p, err := bd.Compile(s)
	if err != nil {
		b.Fatal(err)
	}
	return p
}

func BenchmarkEvalBlock(b *testing.B) {
	p := benchProgram(b)
	ws := p.NewWorkspace()
	in, out := block(4, BlockSize), block(1, BlockSize)
	r := rand.New(rand.NewPCG(1, 1))
	for i := range in {
		for j := range in[i] {
			in[i][j] = r.NormFloat64()
		}
	}
	b.ReportAllocs()
	for b.Loop() {
		p.EvalBlock(ws, in, out, BlockSize)
	}
	b.ReportMetric(float64(b.N)*BlockSize*float64(p.NumOps())/b.Elapsed().Seconds()/1e6, "Mops/s")
}

func BenchmarkEval(b *testing.B) {
	p := benchProgram(b)
	ws := p.NewWorkspace()
	in, out := []float64{1, 2, 3, 4}, []float64{0}
	for b.Loop() {
		p.Eval(ws, in, out)
	}
	b.ReportMetric(float64(b.N)*float64(p.NumOps())/b.Elapsed().Seconds()/1e6, "Mops/s")
}

func BenchmarkCompile(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 1))
	for b.Loop() {
		bd := NewBuilder()
		pool := randomPool(bd, r, 4, 1000, true)
		if _, err := bd.Compile(pool[len(pool)-1].ref, bd.Gradient(pool[len(pool)-1].ref, []int{0, 1, 2, 3})[0]); err != nil {
			b.Fatal(err)
		}
	}
}
