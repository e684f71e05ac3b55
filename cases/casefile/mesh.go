package casefile

import (
	"fmt"
	"math/big"
	"strconv"
)

// meshKeys are the keys of a surface beside mesh that say how it is integrated.
func (d *decoder) meshKeys(s *Surface) []key {
	return []key{
		{"order", func(e *entry) {
			n, err := strconv.Atoi(e.value.text)
			if e.value.kind != integerKind || err != nil || n < 1 {
				d.add(e.value.off, `"order" must be a positive integer`, "write the degree of the rule on each triangle: order = 6")
				return
			}
			s.Order = n
		}},
		{"tolerance", func(e *entry) {
			r, ok := d.rational(e.value, "tolerance")
			if ok && (r.Sign() <= 0 || r.Cmp(big.NewRat(1, 1)) >= 0) {
				d.add(e.value.off, `"tolerance" must be positive and less than 1`, "write the defect allowed between mesh and traces: tolerance = 1e-3")
				return
			}
			if ok {
				s.Tolerance = r
			}
		}},
		{"orientation", func(e *entry) {
			switch w := d.line(e.value, "orientation"); w {
			case "ignored":
				s.Unoriented = true
			case "required", "":
			default:
				d.add(e.value.off, fmt.Sprintf(`"orientation" is %s`, quote(w)), `write orientation = "required" or "ignored"`)
			}
		}},
	}
}

// onlyMesh refuses the keys of a mesh on another shape.
func (d *decoder) onlyMesh(v *value, what, shape string) {
	for _, k := range d.meshKeys(&Surface{}) {
		if e := v.get(k.name); e != nil {
			d.add(e.off, fmt.Sprintf("%s is a %s and has %q", what, shape, k.name), "remove the key: it is for a mesh")
		}
	}
}
