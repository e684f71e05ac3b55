package interval_test

import (
	"fmt"

	"creaseproof/entropy/interval"
)

func Example() {
	x, err := interval.New(-1, 2)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(x.Sqr(), x.Mul(x))
	fmt.Println(interval.Point(1).Div(interval.Point(3)))
	fmt.Println(x.Sqrt(), x.Recip(), x.Neg().Sub(interval.Point(5)).Log())
	// Output:
	// [0, 4] [-2, 4]
	// [0.3333333333333333, 0.33333333333333337]
	// [0, 1.4142135623730951] [entire] [empty]
}
