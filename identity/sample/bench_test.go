package sample

import (
	"context"
	"testing"

	"github.com/stretchr/testify/require"

	"creaseproof/entropy/program"
)

// BenchmarkLayeredGap samples the layered gap on one core: drawing alone,
// drawing and the gap, with the margin of every lane, and a whole run that
// computes margins only where they matter.
func BenchmarkLayeredGap(b *testing.B) {
	l := layeredLayout(b)
	both := layered(b, 2)
	gap, err := both.Select(0)
	require.NoError(b, err)

	blocks := func(b *testing.B, p *program.Program) {
		laws := DefaultLaws()
		s := NewStream(1, 0)
		cols, out := matrix(l.Len(), program.BlockSize), matrix(2, program.BlockSize)
		var ws *program.Workspace
		if p != nil {
			ws = p.NewWorkspace()
		}
		var k uint64
		for b.Loop() {
			s.seed(1, k)
			l.fill(laws[k%uint64(len(laws))], s, cols, program.BlockSize)
			if p != nil {
				p.EvalBlock(ws, cols, out, program.BlockSize)
			}
			k++
		}
		b.ReportMetric(float64(b.N)*program.BlockSize/b.Elapsed().Seconds(), "jets/s")
	}
	b.Run("Draw", func(b *testing.B) { blocks(b, nil) })
	b.Run("DrawGap", func(b *testing.B) { blocks(b, gap) })
	b.Run("DrawGapAndMargin", func(b *testing.B) { blocks(b, both) })

	run := func(b *testing.B, p *program.Program) {
		const samples = 1 << 20
		for b.Loop() {
			_, err := Run(context.Background(), Options{Seed: 1, Samples: samples, Jobs: 1}, l, p, 16)
			require.NoError(b, err)
		}
		b.ReportMetric(float64(b.N)*samples/b.Elapsed().Seconds(), "jets/s")
	}
	b.Run("RunTrue", func(b *testing.B) { run(b, both) })
	b.Run("RunFalse", func(b *testing.B) { run(b, layered(b, 0)) })
}

func BenchmarkLaw(b *testing.B) {
	l := layeredLayout(b)
	cols := matrix(l.Len(), program.BlockSize)
	for _, c := range []struct {
		name string
		law  Law
	}{
		{"Gaussian", Gaussian{}}, {"HeavyTailed", HeavyTailed{}}, {"Lattice", Lattice{}},
		{"Degenerate", Degenerate{HeavyTailed{}}},
	} {
		b.Run(c.name, func(b *testing.B) {
			s := NewStream(1, 0)
			for b.Loop() {
				l.fill(c.law, s, cols, program.BlockSize)
			}
			b.ReportMetric(float64(b.N)*program.BlockSize/b.Elapsed().Seconds(), "jets/s")
		})
	}
}
