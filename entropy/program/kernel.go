package program

import "math"

// The loops of EvalBlock. All slices have the length of d, which may be the
// same slice as an operand. Re-slicing to the length of d removes the bounds
// checks.

func fill(d []float64, k float64) {
	for i := range d {
		d[i] = k
	}
}

func neg(d, a []float64) {
	a = a[:len(d)]
	for i := range d {
		d[i] = -a[i]
	}
}

func add(d, a, b []float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = a[i] + b[i]
	}
}

func sub(d, a, b []float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = a[i] - b[i]
	}
}

func mul(d, a, b []float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = a[i] * b[i]
	}
}

func quo(d, a, b []float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = a[i] / b[i]
	}
}

func addK(d, a []float64, k float64) {
	a = a[:len(d)]
	for i := range d {
		d[i] = a[i] + k
	}
}

func subK(d, a []float64, k float64) {
	a = a[:len(d)]
	for i := range d {
		d[i] = k - a[i]
	}
}

func mulK(d, a []float64, k float64) {
	a = a[:len(d)]
	for i := range d {
		d[i] = k * a[i]
	}
}

func quoK(d, a []float64, k float64) {
	a = a[:len(d)]
	for i := range d {
		d[i] = k / a[i]
	}
}

func mulAdd(d, a, b, c []float64) {
	a, b, c = a[:len(d)], b[:len(d)], c[:len(d)]
	for i := range d {
		d[i] = float64(a[i]*b[i]) + c[i]
	}
}

func mulSub(d, a, b, c []float64) {
	a, b, c = a[:len(d)], b[:len(d)], c[:len(d)]
	for i := range d {
		d[i] = float64(a[i]*b[i]) - c[i]
	}
}

func subMul(d, a, b, c []float64) {
	a, b, c = a[:len(d)], b[:len(d)], c[:len(d)]
	for i := range d {
		d[i] = c[i] - float64(a[i]*b[i])
	}
}

func mulKAdd(d, a, b []float64, k float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = float64(k*a[i]) + b[i]
	}
}

func mulAddMul(d, a, b, c, e []float64) {
	a, b, c, e = a[:len(d)], b[:len(d)], c[:len(d)], e[:len(d)]
	for i := range d {
		d[i] = float64(a[i]*b[i]) + float64(c[i]*e[i])
	}
}

func mulSubMul(d, a, b, c, e []float64) {
	a, b, c, e = a[:len(d)], b[:len(d)], c[:len(d)], e[:len(d)]
	for i := range d {
		d[i] = float64(a[i]*b[i]) - float64(c[i]*e[i])
	}
}

func addAbs(d, a, b []float64) {
	a, b = a[:len(d)], b[:len(d)]
	for i := range d {
		d[i] = b[i] + math.Abs(a[i])
	}
}

func addAbsMul(d, a, b, c []float64) {
	a, b, c = a[:len(d)], b[:len(d)], c[:len(d)]
	for i := range d {
		d[i] = c[i] + math.Abs(float64(a[i]*b[i]))
	}
}

func function(d, a []float64, fn Func) {
	a = a[:len(d)]
	switch fn {
	case Abs:
		for i := range d {
			d[i] = math.Abs(a[i])
		}
	case Sqrt:
		for i := range d {
			d[i] = math.Sqrt(a[i])
		}
	default:
		for i := range d {
			d[i] = fn.eval(a[i])
		}
	}
}
