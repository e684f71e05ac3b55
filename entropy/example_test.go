package entropy_test

import (
	"context"
	"fmt"
	"math"

	"creaseproof/entropy"
	"creaseproof/entropy/algebra"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// must parses a formula of an example.
func must(s *formula.Scope, text string) formula.Node {
	n, err := s.ParseExpr(source.Text{S: text})
	if err != nil {
		panic(err)
	}
	return n
}

// The planar Jin–Kohn fields: a setting is made of declared names and parsed
// formulas.
func jinKohn() *entropy.Setting {
	set := &entropy.Setting{
		Coordinates: []string{"x", "y"},
		Unknowns:    []string{"u"},
		Frame:       &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
		Fields:      map[string]*entropy.Field{"Sigma": nil},
	}
	scope, err := set.Scope(false)
	if err != nil {
		panic(err)
	}
	set.Fields["Sigma"] = &entropy.Field{Name: "Sigma", Components: map[string]formula.Node{
		"xi":  must(scope, "u_xi (1 - u_eta^2) - u_xi^3/3"),
		"eta": must(scope, "-u_eta (1 - u_xi^2) + u_eta^3/3"),
	}}
	return set
}

func ExampleSetting_CompileField() {
	sigma, err := jinKohn().CompileField("Sigma", nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	dst := make([]float64, 2)
	sigma.At(dst, []float64{0.6, 0.8}, 0)
	fmt.Printf("%.4f\n", dst)
	sigma.At(dst, []float64{0.6, 0.8}, math.Pi/4)
	fmt.Printf("%.4f\n", dst)
	// Output:
	// [0.1440 -0.3413]
	// [0.4587 0.4560]
}

func ExampleFieldProgram_Batch() {
	sigma, err := jinKohn().CompileField("Sigma", nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	grads := [][]float64{{1, 0}, {0, 1}, {0.6, 0.8}}
	dst := [][]float64{make([]float64, 2), make([]float64, 2), make([]float64, 2)}
	if err := sigma.Batch(context.Background(), dst, grads, 0); err != nil {
		fmt.Println(err)
		return
	}
	for _, d := range dst {
		fmt.Printf("%.4f\n", d)
	}
	// Output:
	// [0.6667 0.0000]
	// [0.0000 -0.6667]
	// [0.1440 -0.3413]
}

func ExampleFieldProgram_Along() {
	sigma, err := jinKohn().CompileField("Sigma", nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	// The gradient of the distance to the origin.
	field := sigma.Along(func(x, grad []float64) {
		r := math.Hypot(x[0], x[1])
		grad[0], grad[1] = x[0]/r, x[1]/r
	}, 0)
	dst := make([]float64, 2)
	field([]float64{3, 4}, dst)
	fmt.Printf("%.4f\n", dst)
	// Output: [0.1440 -0.3413]
}

func ExampleSetting_CompileFieldOf() {
	set := jinKohn()
	scope, err := set.Scope(false)
	if err != nil {
		fmt.Println(err)
		return
	}
	u := must(scope, "sqrt(x^2 + y^2)")
	sigma, err := set.CompileFieldOf("Sigma", map[string]formula.Node{"u": u}, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	dst := make([]float64, 2)
	sigma.At(dst, []float64{3, 4}, 0)
	fmt.Printf("%.4f\n", dst)
	// Output: [0.1440 -0.3413]
}

func ExampleSetting_FieldOfGradient() {
	set := jinKohn()
	scope, err := set.Scope(false)
	if err != nil {
		fmt.Println(err)
		return
	}
	gradient := []formula.Node{must(scope, "cos(x)"), must(scope, "sin(x)")}
	sigma, err := set.FieldOfGradient("Sigma", gradient, formula.NewInt(0))
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, f := range sigma {
		fmt.Println(formula.Text(f))
	}
	// Output:
	// cos(x)*(1 - sin(x)^2) - cos(x)^3/3
	// -sin(x)*(1 - cos(x)^2) + sin(x)^3/3
}

func ExampleSetting_SpanningPair() {
	pair, err := jinKohn().SpanningPair(context.Background(), "Sigma")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(pair)
	// Output: Sigma = cos(2 theta) Sigma(0) + sin(2 theta) Sigma(pi/4)
}

func ExampleProfile_Exact() {
	// The planar eikonal model: the cost of a jump q is |q|^3/12.
	set := &entropy.Setting{Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Constants: []string{"eps"},
		Lets: map[string]formula.Node{"R": nil, "L": nil}}
	scope, err := set.Scope(false)
	if err != nil {
		fmt.Println(err)
		return
	}
	set.Lets["R"], set.Lets["L"] = must(scope, "(1 - u_x^2 - u_y^2)/2"), must(scope, "u_xx + u_yy")
	set.Model = entropy.Model{Residual: must(scope, "R"), Bending: must(scope, "L"), Energy: must(scope, "R^2/(2 eps) + eps L^2/2")}
	p, err := set.NewProfile(context.Background())
	if err != nil {
		fmt.Println(err)
		return
	}
	plus := []algebra.Rat{algebra.Frac64(3, 5), algebra.Frac64(4, 5)}
	minus := []algebra.Rat{algebra.Frac64(-3, 5), algebra.Frac64(4, 5)}
	c, err := p.Exact(plus, minus, nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("(%v)/sqrt(%v)\n", c.Numerator, c.SquaredJump)
	// Output: (108/625)/sqrt(36/25)
}
