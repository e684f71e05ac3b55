package run

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"sync/atomic"
	"testing"
	"time"

	"creaseproof/cases"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/entropy"
	"creaseproof/entropy/source"
	"creaseproof/identity"
)

// many makes cases of claims that only their names tell apart.
func many(t *testing.T, names ...string) []*cases.Case {
	b := strings.Builder{}
	b.WriteString(space)
	for _, n := range names {
		fmt.Fprintf(&b, "[[claim]]\nname = %q\nstates = \"u_x = u_x\"\n", n)
	}
	return []*cases.Case{parsed(t, b.String())}
}

func record(c *identity.Claim, v identity.Verdict) (*identity.Record, error) {
	return &identity.Record{Claim: c.Name, Verdict: v}, nil
}

func verdicts(o *Outcome) (out []string) {
	for _, r := range o.Results {
		switch {
		case r.Err != nil:
			out = append(out, r.Claim.Name+" error")
		default:
			out = append(out, r.Claim.Name+" "+string(r.Record.Verdict))
		}
	}
	return out
}

func TestResultsAreInOrder(t *testing.T) {
	var names []string
	for i := range 40 {
		names = append(names, fmt.Sprintf("c%02d", i))
	}
	list := many(t, names...)
	for _, jobs := range []int{1, 2, 7, 100} {
		var reported []string
		opt := Options{Report: func(r *Result) { reported = append(reported, r.Claim.Name) }}
		opt.Jobs = jobs
		out := check(t.Context(), list, opt, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
			if c.Name == "c00" || c.Name == "c13" { // late ones hold up the others, and no more
				time.Sleep(20 * time.Millisecond)
			}
			return record(c, identity.Proved)
		})
		assert.Equal(t, names, reported)
		require.Len(t, out.Results, len(names))
		assert.False(t, out.Interrupted)
		assert.True(t, out.Met())
		assert.Equal(t, 40, out.Count(identity.Proved))
	}
}

func TestJobsBoundTheClaimsAtOnce(t *testing.T) {
	var now, most atomic.Int32
	opt := Options{}
	opt.Jobs = 3
	check(t.Context(), many(t, "a", "b", "c", "d", "e", "f", "g", "h"), opt, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		n := now.Add(1)
		defer now.Add(-1)
		for m := most.Load(); n > m && !most.CompareAndSwap(m, n); m = most.Load() {
		}
		time.Sleep(5 * time.Millisecond)
		return record(c, identity.Proved)
	})
	assert.LessOrEqual(t, most.Load(), int32(3))
}

func TestInterruptionKeepsWhatIsDecided(t *testing.T) {
	for name, stubborn := range map[string]bool{"claims that stop": false, "a claim that does not stop": true} {
		t.Run(name, func(t *testing.T) {
			ctx, cancel := context.WithCancel(t.Context())
			release := make(chan struct{})
			defer close(release)
			opt := Options{}
			opt.Jobs = 2
			start := time.Now()
			out := check(ctx, many(t, "long", "b", "c", "stop", "never"), opt, func(ctx context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
				switch {
				case c.Name == "stop":
					cancel()
				case c.Name == "long" && stubborn:
					<-release
				case c.Name != "long":
					return record(c, identity.Proved)
				}
				<-ctx.Done()
				return nil, ctx.Err()
			})
			assert.True(t, out.Interrupted)
			assert.Equal(t, []string{"b proved", "c proved"}, verdicts(out))
			assert.Less(t, time.Since(start), time.Minute, "a hang, not a benchmark")
		})
	}
}

func TestAnInterruptionAfterTheLastClaimIsNone(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	out := check(ctx, many(t, "a"), Options{Report: func(*Result) { cancel() }}, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		return record(c, identity.Proved)
	})
	assert.False(t, out.Interrupted)
}

func TestTimeoutIsOpen(t *testing.T) {
	opt := Options{Timeout: 30 * time.Millisecond}
	opt.Jobs = 2
	var reported int
	opt.Report = func(*Result) { reported++ }
	out := check(t.Context(), many(t, "a", "long", "c", "longer", "never"), opt, func(ctx context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		if strings.HasPrefix(c.Name, "long") {
			<-ctx.Done()
			return nil, ctx.Err()
		}
		return record(c, identity.Proved)
	})
	assert.False(t, out.Interrupted, "a timeout is no interruption")
	assert.Equal(t, []string{"a proved", "long open", "c proved", "longer open", "never open"}, verdicts(out))
	assert.Equal(t, "not decided within the 30ms allowed", out.Results[1].Record.Reason)
	assert.Equal(t, 5, reported)
	assert.False(t, out.Met())
}

func TestAPanicIsOpenAndAlone(t *testing.T) {
	list := many(t, "a", "bad", "c")
	list[0].Claims[1].Expected.Verdict = identity.Open
	out := check(t.Context(), list, Options{}, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		if c.Name == "bad" {
			panic("index out of range")
		}
		return record(c, identity.Proved)
	})
	assert.Equal(t, []string{"a proved", "bad open", "c proved"}, verdicts(out))
	assert.Equal(t, "internal error: index out of range", out.Results[1].Record.Reason)
	assert.False(t, out.Results[1].Met(), "a failure meets no expectation, not even of open")
	assert.False(t, out.Met())
}

func TestAClaimThatMeansNothing(t *testing.T) {
	list := many(t, "a", "b")
	out := check(t.Context(), list, Options{}, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		if c.Name == "a" {
			return nil, fmt.Errorf("left: %w", &entropy.Error{At: source.Pos{Line: 8, Col: 12}, Err: errors.New("division by zero"), Advice: "do not"})
		}
		return nil, errors.New("odd")
	})
	assert.True(t, out.Faulty())
	assert.Equal(t, "case.toml:8:12: division by zero\n    states = \"u_x = u_x\"\n               ^\n    do not", out.Results[0].Err.Error())
	assert.Equal(t, "case.toml:11:11: odd\n    states = \"u_x = u_x\"\n              ^", out.Results[1].Err.Error())
}

func TestOnly(t *testing.T) {
	opt := Options{Only: []string{"Young", "density"}}
	out := check(t.Context(), many(t, "a Young bound", "sharp density", "divergence"), opt, func(_ context.Context, c *identity.Claim, _ identity.Options) (*identity.Record, error) {
		return record(c, identity.Proved)
	})
	assert.Equal(t, []string{"a Young bound proved", "sharp density proved"}, verdicts(out))
}

func TestNoClaims(t *testing.T) {
	out := Check(t.Context(), nil, Options{})
	assert.Empty(t, out.Results)
	assert.True(t, out.Met())
}

// The verdicts, witnesses and counts of real claims do not depend on the
// number of jobs.
func TestJobsDoNotMatter(t *testing.T) {
	one := func(jobs int) string {
		list, failed := cases.Load([]string{"bps", "false-claims", "layered-plane"}, nil)
		require.Empty(t, failed)
		opt := Options{Options: identity.DefaultOptions()}
		opt.Jobs = jobs
		out := Check(t.Context(), list, opt)
		for _, r := range out.Results {
			require.NoError(t, r.Err)
			require.True(t, r.Met(), r.Claim.Name)
			r.Elapsed = 0
		}
		data, err := json.MarshalIndent(out.Document(list), "", " ")
		require.NoError(t, err)
		return string(data)
	}
	require.Equal(t, one(1), one(4))
}

// A best constant is not a claim for every value of it.
func TestBestConstant(t *testing.T) {
	out := Check(t.Context(), []*cases.Case{parsed(t, space+"[[claim]]\nname = 'b'\nstates = 'u_x u_y <= C (u_x^2 + u_y^2)'\nbest = 'C'\nexpect = 'C >= 1/2'\n")}, Options{Options: identity.DefaultOptions()})
	assert.Equal(t, []string{"b proved"}, verdicts(out))
	assert.Equal(t, "C >= 1/2", out.Results[0].Record.Solution)
	assert.True(t, out.Results[0].Met())
}

// A mistake in a named formula is shown there, and says which claim meets it.
func TestMistakeInsideALet(t *testing.T) {
	c := parsed(t, space+`[let]
B = "1/(u_x - u_x)"
[model]
residual = "u_x^2 + u_y^2 + u_z^2 - 1"
[[claim]]
name = "at the jump"
at = "jump"
states = "[B] = 0"
[[claim]]
name = "not there"
states = "1/(u_y - u_y) = 0"
`)
	out := Check(t.Context(), []*cases.Case{c}, Options{Options: identity.DefaultOptions()})
	require.Len(t, out.Results, 2)
	var e *source.Error
	require.ErrorAs(t, out.Results[0].Err, &e)
	assert.Equal(t, 7, e.Line)
	assert.Contains(t, e.Error(), `(in the claim "at the jump")`)
	require.ErrorAs(t, out.Results[1].Err, &e)
	assert.NotContains(t, e.Error(), "in the claim", "the line itself says so")
}
