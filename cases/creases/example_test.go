package creases_test

import (
	"context"
	"fmt"

	"creaseproof/cases"
	"creaseproof/cases/creases"
)

func ExampleEvaluator_Evaluate() {
	const text = `
[space]
coordinates = ["x", "y"]
unknowns    = ["u"]
constants   = ["eps"]
[let]
R = "(1 - u_x^2 - u_y^2)/2"
L = "u_xx + u_yy"
[model]
residual = "R"
bending  = "L"
energy   = "R^2/(2 eps) + eps L^2/2"
[[surface]]
name    = "half-diagonal of a square"
values  = { s = ["1", "4"] }
plus    = "s/2 - y"
minus   = "s/2 - x"
polygon = [["0", "0"], ["s/2", "s/2"]]
energy  = "s/6"
`
	c, err := cases.Parse("square.toml", []byte(text))
	if err != nil {
		fmt.Println(err)
		return
	}
	ev := creases.New(c.Setting, "square.toml")
	results, err := ev.Evaluate(context.Background(), &c.File.Surfaces[0], creases.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, r := range results {
		fmt.Printf("s = %s: %.12f, claimed %.12f, %s\n", r.Values["s"], *r.Energy, *r.Claimed, r.Verdict)
	}
	// Output:
	// s = 1: 0.166666666667, claimed 0.166666666667, supported
	// s = 4: 0.666666666667, claimed 0.666666666667, supported
}
