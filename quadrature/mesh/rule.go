package mesh

import "fmt"

// An orbit rule is a rule on the triangle that is invariant under permutation
// of its vertices: a weight at the centre, weights at the three points with
// barycentric coordinates (a, a, 1-2a), and at the six with (a, b, 1-a-b). The
// weights of all points add up to 1.
type orbitRule struct {
	degree int
	center float64
	three  [][2]float64 // weight, a
	six    [][3]float64 // weight, a, b
}

// rules are the rules by degree: the midpoint rule, the rules of degree 2 and 4
// (Strang and Fix, An analysis of the finite element method, 1973), 5 (Radon,
// 1948), and 6, 8, 10 and 12 with 12, 16, 25 and 33 points (Dunavant, High degree
// efficient symmetrical Gaussian quadrature rules for the triangle, Int. J.
// Numer. Methods Eng. 21 (1985) 1129-1148). The coefficients are the published
// ones improved by Newton's method for the moment equations with 40 digits. All
// weights are positive and all points inside.
var rules = []orbitRule{
	{degree: 1, center: 1.0},
	{degree: 2, three: [][2]float64{{0.33333333333333333333, 0.16666666666666666667}}},
	{degree: 4, three: [][2]float64{{0.2233815896780114657, 0.44594849091596488632}, {0.10995174365532186764, 0.09157621350977074346}}},
	{degree: 5, center: 0.225, three: [][2]float64{{0.13239415278850618074, 0.47014206410511508977}, {0.1259391805448271526, 0.1012865073234563388}}},
	{degree: 6, three: [][2]float64{{0.11678627572637936603, 0.24928674517091042129}, {0.050844906370206816921, 0.06308901449150222834}}, six: [][3]float64{{0.082851075618373575194, 0.31035245103378440542, 0.053145049844816947353}}},
	{degree: 8, center: 0.14431560767778716825, three: [][2]float64{{0.095091634267284624794, 0.45929258829272315603}, {0.10321737053471825028, 0.17056930775176020662}, {0.032458497623198080311, 0.050547228317030975458}}, six: [][3]float64{{0.027230314174434994265, 0.26311282963463811342, 0.0083947774099576053372}}},
	{degree: 10, center: 0.090817990382753580095, three: [][2]float64{{0.036725957756466704717, 0.48557763338365737737}, {0.045321059435527934783, 0.1094815754850370548}}, six: [][3]float64{{0.072757916845420108604, 0.30793983876412095017, 0.55035294182099909508}, {0.028327242531057484837, 0.24667256063990269392, 0.72832390459741092001}, {0.0094216669637328234599, 0.066803251012200265774, 0.92365593358750027665}}},
	{degree: 12, three: [][2]float64{{0.025731066440455335418, 0.48821738977380488256}, {0.043692544538038402135, 0.43972439229446027298}, {0.062858224217885100354, 0.27121038501211592235}, {0.034796112930708942989, 0.12757614554158592467}, {0.0061662610515590172339, 0.021317350453210370247}}, six: [][3]float64{{0.040371557766380929518, 0.27571326968551419397, 0.60894323577978780686}, {0.022356773202303445712, 0.28132558098993954825, 0.69583608678780342214}, {0.017316231108658892372, 0.11625191590759714124, 0.85801403354407263059}}},
}

// A node is a point in barycentric coordinates with its weight.
type node struct {
	at     [3]float64
	weight float64
}

func (r orbitRule) nodes() []node {
	var out []node
	if r.center != 0 {
		out = append(out, node{[3]float64{1. / 3, 1. / 3, 1. / 3}, r.center})
	}
	for _, o := range r.three {
		a, b := o[1], 1-2*o[1]
		out = append(out, node{[3]float64{a, a, b}, o[0]}, node{[3]float64{a, b, a}, o[0]}, node{[3]float64{b, a, a}, o[0]})
	}
	for _, o := range r.six {
		a, b := o[1], o[2]
		c := 1 - a - b
		for _, p := range [][3]float64{{a, b, c}, {a, c, b}, {b, a, c}, {b, c, a}, {c, a, b}, {c, b, a}} {
			out = append(out, node{p, o[0]})
		}
	}
	return out
}

// Degrees are the degrees that Options.Degree may be.
func Degrees() []int {
	var out []int
	for _, r := range rules[1:] {
		out = append(out, r.degree)
	}
	return out
}

// pair returns the nodes of the rule of a degree and of the next lower one.
func pair(degree int) (main, lower []node, err error) {
	for i, r := range rules {
		if i > 0 && r.degree == degree {
			return r.nodes(), rules[i-1].nodes(), nil
		}
	}
	return nil, nil, fmt.Errorf("mesh: no rule of degree %d; there are %v", degree, Degrees())
}
