package semidefinite

import (
	"context"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"testing"
	"time"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"
)

// findCSDP returns the path of CSDP (Borchers 1999; the Debian package is
// coinor-csdp), which these comparisons need.
func findCSDP(t testing.TB) string {
	t.Helper()
	program, err := exec.LookPath("csdp")
	if err != nil {
		t.Skip("skipped: csdp is not installed (Debian package coinor-csdp)")
	}
	return program
}

func writeFile(t testing.TB, p Problem) string {
	t.Helper()
	name := filepath.Join(t.TempDir(), "problem.dat-s")
	f, err := os.Create(name)
	require.NoError(t, err)
	require.NoError(t, WriteSDPA(f, p))
	require.NoError(t, f.Close())
	return name
}

// runCSDP returns the objective in the sign of this package and the exit code:
// 0 solved, 1 primal infeasible, 2 dual infeasible (the manual of CSDP).
func runCSDP(t testing.TB, program, file string) (objective float64, code int) {
	t.Helper()
	cmd := exec.Command(program, file)
	cmd.Dir = filepath.Dir(file)
	out, err := cmd.CombinedOutput()
	if cmd.ProcessState == nil {
		t.Fatal(err)
	}
	code = cmd.ProcessState.ExitCode()
	if match := regexp.MustCompile(`Primal objective value: (\S+)`).FindSubmatch(out); match != nil {
		objective, err = strconv.ParseFloat(string(match[1]), 64)
		require.NoError(t, err)
	}
	return -objective, code
}

func TestAgainstCSDP(t *testing.T) {
	program := findCSDP(t)
	rng := rand.New(rand.NewPCG(12, 21))
	problems := []Problem{theta(5), theta(11), largeProgram()}
	for range 15 {
		problems = append(problems, randomFeasible(rng, []int{6, -3, 4}, 2+rng.IntN(8), 0, 0.4))
	}
	for i, p := range problems {
		objective, code := runCSDP(t, program, writeFile(t, p))
		require.Zero(t, code, "problem %d", i)
		s := solve(t, p, Options{})
		require.Equal(t, Optimal, s.Status, "problem %d", i)
		assert.InEpsilon(t, objective, s.PrimalObjective, 1e-6, "problem %d", i)
		assert.InEpsilon(t, objective, s.DualObjective, 1e-6, "problem %d", i)
	}

	// The two agree on what is infeasible.
	motzkin := gramProblem(monomials(2, 3), map[string]float64{"[4 2]": 1, "[2 4]": 1, "[0 0]": 1, "[2 2]": -3})
	_, code := runCSDP(t, program, writeFile(t, motzkin))
	assert.Equal(t, 1, code)
	assert.Equal(t, PrimalInfeasible, solve(t, motzkin, Options{}).Status)
	unbounded := Problem{Blocks: []int{2}, C: SparseSym{{0, 1, 1, -1}}, A: []SparseSym{{{0, 0, 0, 1}}}, B: []float64{1}}
	_, code = runCSDP(t, program, writeFile(t, unbounded))
	assert.Equal(t, 2, code)
	assert.Equal(t, DualInfeasible, solve(t, unbounded, Options{}).Status)
}

func benchmarkSolve(b *testing.B, p Problem, opt Options) {
	b.ReportAllocs()
	var s *Solution
	for b.Loop() {
		var err error
		s, err = Solve(context.Background(), p, opt)
		require.NoError(b, err)
	}
	require.Equal(b, Optimal, s.Status)
	b.ReportMetric(float64(s.Iterations), "iterations")
	b.ReportMetric(float64(len(p.A)), "rows")
}

func BenchmarkSOS47(b *testing.B) { benchmarkSolve(b, largeProgram(), Options{}) }

func BenchmarkSOS47Feasibility(b *testing.B) {
	p := largeProgram()
	p.C = nil
	benchmarkSolve(b, p, Options{})
}

func BenchmarkSOS47Centre(b *testing.B) {
	benchmarkSolve(b, largeProgram(), Options{Mode: AnalyticCentre})
}

// BenchmarkAgainstCSDP solves one file with both in turn. Both times contain
// the reading of the file, that of CSDP also the start of its process and the
// writing of its log.
func BenchmarkAgainstCSDP(b *testing.B) {
	program := findCSDP(b)
	for _, c := range []struct {
		name string
		cost bool
	}{{"cost", true}, {"feasibility", false}} {
		b.Run(c.name, func(b *testing.B) {
			p := largeProgram()
			if !c.cost {
				p.C = nil
			}
			file := writeFile(b, p)
			var ours, theirs time.Duration
			for b.Loop() {
				start := time.Now()
				_, code := runCSDP(b, program, file)
				theirs += time.Since(start)
				require.Zero(b, code)

				start = time.Now()
				f, err := os.Open(file)
				require.NoError(b, err)
				p, err := ReadSDPA(f)
				f.Close()
				require.NoError(b, err)
				s, err := Solve(context.Background(), p, Options{})
				ours += time.Since(start)
				require.NoError(b, err)
				require.Equal(b, Optimal, s.Status)
			}
			b.ReportMetric(ours.Seconds()/theirs.Seconds(), "times-csdp")
			b.ReportMetric(ours.Seconds()/float64(b.N), "s/solve")
			b.ReportMetric(theirs.Seconds()/float64(b.N), "s/csdp")
			b.ReportMetric(float64(len(p.A)), "rows")
		})
	}
}
