package creases

import (
	"testing"

	"creaseproof/cases/casefile"
	"creaseproof/entropy"
	"creaseproof/entropy/formula"

	"github.com/stretchr/testify/require"
)

// The jump of u on a surface, by exact arithmetic.
func TestSewn(t *testing.T) {
	const head = "[space]\ncoordinates = ['x', 'y', 'z']\nunknowns = ['u']\n[[surface]]\nname = 's'\nvalues = { k = '3' }\n"
	for _, c := range []struct {
		surface string
		torn    bool
		exact   bool
	}{
		{"plus = '-(x^2 + y^2)/(2 z)'\nminus = '-k'\npatch = { map = ['sqrt(2 k t) cos(a)', 'sqrt(2 k t) sin(a)', 't'], over = { t = ['1/2', '3'], a = ['0', '2 pi'] } }", false, true},
		{"plus = '-(x^2 + y^2)/(2 z)'\nminus = '-k + 10^(-30)'\npatch = { map = ['sqrt(2 k t) cos(a)', 'sqrt(2 k t) sin(a)', 't'], over = { t = ['1/2', '3'], a = ['0', '2 pi'] } }", true, false},
		{"plus = 'z + x y'\nminus = 'x^2 + y^2 + x y'\ngraph = { of = 'x^2 + y^2', over = { x = ['0', '1'], y = ['0', '1'] } }", false, true},
		{"plus = 'x + z'\nminus = '-x + z'\npolygon = [['0', '0', '0'], ['0', '1', '0'], ['0', '1', '1']]", false, false},
	} {
		file, err := casefile.Decode("t.toml", []byte(head+c.surface+"\n"))
		require.NoError(t, err)
		set := &entropy.Setting{Coordinates: []string{"x", "y", "z"}, Unknowns: []string{"u"}, Lets: map[string]formula.Node{}}
		s, err := New(set, "t.toml").Read(&file.Surfaces[0])
		require.NoError(t, err)
		at, err := s.combine(t.Context(), []int{0}, Options{})
		require.NoError(t, err)
		reason, exact := at.torn()
		require.Equal(t, c.torn, reason != "", "%s: %s", c.surface, reason)
		require.Equal(t, c.exact, exact, c.surface)
	}
}
