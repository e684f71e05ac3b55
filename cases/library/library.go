package library

import (
	"embed"
	"path"
	"strings"
)

//go:embed *.toml
var files embed.FS

//go:embed template/case.toml
var template []byte

// Names returns the names of the built-in cases in alphabetical order.
func Names() []string {
	entries, err := files.ReadDir(".")
	if err != nil {
		return nil // not reached: an embedded root can be read
	}
	var names []string
	for _, e := range entries {
		names = append(names, strings.TrimSuffix(e.Name(), path.Ext(e.Name())))
	}
	return names
}

// Source returns the TOML text of a built-in case, false where there is none of
// that name.
func Source(name string) ([]byte, bool) {
	if name == "" || strings.ContainsAny(name, `/\.`) {
		return nil, false
	}
	b, err := files.ReadFile(name + ".toml")
	return b, err == nil
}

// Template returns a small commented case to start a new one from. It is
// complete: all its claims and its surface are as it expects.
func Template() []byte {
	return append([]byte(nil), template...)
}
