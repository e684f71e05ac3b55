package sample

import (
	"fmt"
	"math"
	"sync"

	"creaseproof/entropy/program"
)

// Newton returns a corrector for [Near]: steps of Newton's method in one
// column, towards a zero of output 0 of the program, whose derivative by that
// column is output 1. A residual that is linear in the column needs one step. A
// lane is left as it was where a step would not be finite.
func Newton(prog *program.Program, column, steps int) (func(cols [][]float64, n int), error) {
	if prog.NumOutputs() != 2 {
		return nil, fmt.Errorf("sample: the program of a Newton step needs 2 outputs, not %d", prog.NumOutputs())
	}
	if column < 0 || column >= prog.NumInputs() {
		return nil, fmt.Errorf("sample: no column %d among %d", column, prog.NumInputs())
	}
	type buffers struct {
		ws  *program.Workspace
		out [][]float64
	}
	pool := sync.Pool{New: func() any {
		return &buffers{prog.NewWorkspace(), matrix(2, program.BlockSize)}
	}}
	return func(cols [][]float64, n int) {
		b := pool.Get().(*buffers)
		defer pool.Put(b)
		x := cols[column][:n]
		for range steps {
			prog.EvalBlock(b.ws, cols, b.out, n)
			value, slope := b.out[0][:n], b.out[1][:n]
			for j, v := range x {
				if v -= value[j] / slope[j]; isFinite(v) {
					x[j] = v
				}
			}
		}
	}, nil
}

// matrix returns rows slices of n numbers in one piece of memory.
func matrix(rows, n int) [][]float64 {
	m := make([][]float64, rows)
	all := make([]float64, rows*n)
	for i := range m {
		m[i] = all[i*n : (i+1)*n : (i+1)*n]
	}
	return m
}

func isFinite(v float64) bool { return !math.IsInf(v, 0) && !math.IsNaN(v) }
