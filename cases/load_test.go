package cases

import (
	"bytes"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"creaseproof/cases/library"
	"creaseproof/entropy/source"
)

func names(list []*Case) (out []string) {
	for _, c := range list {
		out = append(out, c.Name)
	}
	return out
}

const small = space + "[[claim]]\nname = 'c'\nstates = 'u_x = u_x'\n"

func TestLoad(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(dir, name)
		require.NoError(t, os.MkdirAll(filepath.Dir(path), 0o755))
		require.NoError(t, os.WriteFile(path, []byte(text), 0o644))
		return path
	}
	mine := write("mine.toml", small)
	write("folder/b.toml", small)
	write("folder/a.toml", small)
	write("folder/bad.toml", "colour = 3\n")
	write("folder/notes.txt", "nothing")
	write("folder/sub/c.toml", small)
	write("empty/notes.txt", "nothing")

	list, failed := Load(nil, nil)
	assert.Equal(t, library.Names(), names(list))
	assert.Empty(t, failed)

	list, failed = Load([]string{mine, "-", "bps", filepath.Join(dir, "folder")}, strings.NewReader(small))
	assert.Equal(t, []string{"mine", "-", "bps", "a", "b"}, names(list))
	require.Len(t, failed, 1)
	assert.Contains(t, failed[0].Error(), "colour")

	for arg, want := range map[string]string{
		filepath.Join(dir, "empty"):        "this folder holds no case",
		filepath.Join(dir, "no-such.toml"): "no such file, folder or built-in case",
		"layered":                          `there is a built-in case "layered-plane"`,
		"../bps":                           "no such file",
		"":                                 "no such file",
		"a\x00b":                           "invalid argument",
		strings.Repeat("a", 10000):         "file name too long",
	} {
		list, failed = Load([]string{arg}, nil)
		assert.Empty(t, list)
		require.Len(t, failed, 1, arg)
		assert.Contains(t, failed[0].Error(), want)
		assert.Less(t, len(failed[0].Error()), source.MaxMessage)
		var placed *source.Error
		assert.True(t, errors.As(failed[0], &placed))
	}
}

func TestLoadUnreadable(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.toml")
	require.NoError(t, os.WriteFile(path, bytes.Repeat([]byte("# a\n"), MaxFile/4+1), 0o644))
	_, failed := Load([]string{path}, nil)
	require.Len(t, failed, 1)
	assert.Contains(t, failed[0].Error(), "longer than the 8 MiB")

	_, failed = Load([]string{"-"}, endless{})
	require.Len(t, failed, 1)
	assert.Contains(t, failed[0].Error(), "longer than the 8 MiB")
}

type endless struct{}

func (endless) Read(p []byte) (int, error) { return len(p), nil }

// A named pipe that nobody writes to must not be waited for, neither alone nor
// in a folder.
func TestLoadNoPipe(t *testing.T) {
	dir := t.TempDir()
	pipe := filepath.Join(dir, "pipe.toml")
	if err := syscall.Mkfifo(pipe, 0o600); err != nil {
		t.Skip(err)
	}
	for _, arg := range []string{pipe, dir, os.DevNull} {
		list, failed := Load([]string{arg}, nil)
		assert.Empty(t, list)
		require.Len(t, failed, 1)
		assert.ErrorContains(t, failed[0], "no regular file")
	}
}
