package sample_test

import (
	"context"
	"fmt"

	"creaseproof/entropy/program"
	"creaseproof/identity/sample"
)

func ExampleRun() {
	// Is 2 a b <= a^2 + b^2/2 for all a, b?
	b := program.NewBuilder()
	x, y := b.Input(0), b.Input(1)
	x2, half, xy := b.PowInt(x, 2), b.Quo(b.PowInt(y, 2), b.Const(2)), b.Mul(b.Const(2), b.Mul(x, y))
	gap := b.Sub(b.Add(x2, half), xy)
	sum := b.Sum(x2, half, b.Func(program.Abs, xy))
	prog, err := b.Compile(gap, sum)
	if err != nil {
		fmt.Println(err)
		return
	}
	layout, err := sample.NewLayout([]sample.Column{{Name: "a"}, {Name: "b"}})
	if err != nil {
		fmt.Println(err)
		return
	}
	opts := sample.Options{Seed: 1, Samples: 10000, Laws: []sample.Law{sample.Lattice{}}}
	res, err := sample.Run(context.Background(), opts, layout, prog, 1)
	if err != nil {
		fmt.Println(err)
		return
	}
	p := res.Best[0]
	fmt.Printf("margin %.3f, gap %.3g at a/b = %.2f\n", res.MinMargin, p.Gap, p.Values[0]/p.Values[1])
	// Output: margin -0.171, gap -3.5 at a/b = 0.67
}
