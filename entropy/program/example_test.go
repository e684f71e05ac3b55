package program_test

import (
	"fmt"
	"math/big"

	"creaseproof/entropy/interval"
	"creaseproof/entropy/program"
)

func Example() {
	// R = u_z - (u_x^2 + u_y^2)/2 and its derivatives by u_x and u_z.
	b := program.NewBuilder()
	ux, uy, uz := b.Input(0), b.Input(1), b.Input(2)
	r := b.Sub(uz, b.Quo(b.Add(b.PowInt(ux, 2), b.PowInt(uy, 2)), b.Const(2)))
	grad := b.Gradient(r, []int{0, 2})
	p, err := b.Compile(r, grad[0], grad[1])
	if err != nil {
		fmt.Println(err)
		return
	}
	out := make([]float64, p.NumOutputs())
	p.Eval(p.NewWorkspace(), []float64{3, 4, 10}, out)
	fmt.Println(out)
	// Output: [-2.5 -3 1]
}

func ExampleBuilder_Diff() {
	// d/dt of sin(x) along dx/dt = y.
	b := program.NewBuilder()
	x, y := b.Input(0), b.Input(1)
	d := b.Diff(b.Func(program.Sin, x), func(i int) program.Ref {
		if i == 0 {
			return y
		}
		return b.Const(0)
	})
	fmt.Println(d == b.Mul(b.Func(program.Cos, x), y))
	// Output: true
}

func ExampleProgram_EvalBlock() {
	b := program.NewBuilder()
	p, err := b.Compile(b.Add(b.Mul(b.Input(0), b.Input(1)), b.Const(1)))
	if err != nil {
		fmt.Println(err)
		return
	}
	in := [][]float64{{1, 2, 3}, {10, 20, 30}}
	out := [][]float64{make([]float64, 3)}
	p.EvalBlock(p.NewWorkspace(), in, out, 3)
	fmt.Println(out[0])
	// Output: [11 41 91]
}

// A formula over a box: the constant 1/10 is enclosed, not rounded.
func ExampleProgram_EvalInterval() {
	b := program.NewBuilder()
	b.Exact = true
	x := b.Input(0)
	f := b.Sub(b.PowInt(x, 4), b.Mul(b.ConstRat(big.NewRat(1, 10)), x))
	p, err := b.Compile(append(b.Gradient(f, []int{0}), f)...)
	if err != nil {
		fmt.Println(err)
		return
	}
	ws, err := p.NewIntervalWorkspace()
	if err != nil {
		fmt.Println(err)
		return
	}
	box, err := interval.New(-1, 2)
	if err != nil {
		fmt.Println(err)
		return
	}
	out := make([]interval.Interval, 2)
	p.EvalInterval(ws, []interval.Interval{box}, out)
	fmt.Println(out[1])
	fmt.Println(out[0])
	// Output:
	// [-0.2, 16.1]
	// [-4.1000000000000005, 31.900000000000002]
}
