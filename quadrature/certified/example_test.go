package certified_test

import (
	"context"
	"fmt"
	"math/big"
	"testing"

	"creaseproof/quadrature/certified"
)

// The integral of sqrt(1 + x²) over [0, 1].
func ExampleTape_Integrate() {
	var t certified.Tape
	f := t.Root(t.Add(t.Rat(big.NewRat(1, 1)), t.Pow(t.Param(0), 2)), 2)
	r, err := t.Integrate(context.Background(), f, certified.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	const value = 1.1477935746963190 // (sqrt(2) + log(1 + sqrt(2)))/2
	fmt.Println(r.Value.Contains(value), r.Value.Wid() < 1e-13)
	// Output: true true
}

func BenchmarkSegment(b *testing.B) {
	for range b.N {
		var t certified.Tape
		f := t.Root(t.Add(t.Rat(big.NewRat(1, 1)), t.Pow(t.Param(0), 2)), 2)
		if _, err := t.Integrate(b.Context(), f, certified.Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
