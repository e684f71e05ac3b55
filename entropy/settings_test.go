package entropy_test

import (
	"fmt"

	"creaseproof/entropy"
	"creaseproof/entropy/formula"
	"creaseproof/entropy/source"
)

// setting parses named formulas, the components of one field Sigma, and a
// model that names them.
func setting(s *entropy.Setting, lets, sigma map[string]string) *entropy.Setting {
	s.Lets, s.Fields = map[string]formula.Node{}, map[string]*entropy.Field{}
	for l := range lets {
		s.Lets[l] = nil
	}
	f := &entropy.Field{Name: "Sigma", Components: map[string]formula.Node{}}
	if sigma != nil {
		s.Fields["Sigma"] = f
	}
	for l, text := range lets {
		s.Lets[l] = parse(s, text)
	}
	for c, text := range sigma {
		f.Components[c] = parse(s, text)
	}
	if _, ok := lets["R"]; ok {
		s.Model = entropy.Model{Residual: parse(s, "R"), Bending: parse(s, "L"), Energy: parse(s, "e")}
	}
	return s
}

// parse reads a formula in the setting.
func parse(s *entropy.Setting, text string) formula.Node {
	scope, err := s.Scope(false)
	if err != nil {
		panic(err)
	}
	n, err := scope.ParseExpr(source.Text{S: text})
	if err != nil {
		panic(fmt.Errorf("%s: %w", text, err))
	}
	return n
}

// layered is the layered model with its rotated fields.
func layered() *entropy.Setting {
	return setting(&entropy.Setting{
		Coordinates: []string{"x", "y", "z"}, Unknowns: []string{"u"}, Constants: []string{"eps"},
		Frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	}, map[string]string{
		"R": "u_z - (u_x^2 + u_y^2)/2", "L": "u_xx + u_yy", "e": "R^2/(2 eps) + eps L^2/2",
	}, map[string]string{
		"xi":  "u_z u_xi - u_xi u_eta^2/2 - u_xi^3/6",
		"eta": "-(u_z u_eta - u_eta u_xi^2/2 - u_eta^3/6)",
		"z":   "(u_eta^2 - u_xi^2)/2",
	})
}

// plane is a model in two dimensions with the Laplacian as its bending.
func plane(residual string, constants ...string) *entropy.Setting {
	return setting(&entropy.Setting{
		Coordinates: []string{"x", "y"}, Unknowns: []string{"u"}, Constants: append([]string{"eps"}, constants...),
		Frame: &entropy.Frame{Plane: [2]int{0, 1}, Axes: [2]string{"xi", "eta"}, Angle: "theta"},
	}, map[string]string{"R": residual, "L": "u_xx + u_yy", "e": "R^2/(2 eps) + eps L^2/2"}, nil)
}
