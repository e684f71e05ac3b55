package cases

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"sort"
	"strings"

	"creaseproof/cases/library"
	"creaseproof/entropy/source"
)

// MaxFile bounds the size of a case file in bytes.
const MaxFile = 8 << 20

// Load reads the cases that the arguments name, in their order. An argument is
// a regular file; a folder, for all files *.toml in it in alphabetical order, without
// its sub-folders; the name of a built-in case; or "-" for stdin. No argument
// at all means every built-in case. What can be read is returned beside the
// errors of what cannot, one for each bad argument or file.
func Load(args []string, stdin io.Reader) (list []*Case, failed []error) {
	add := func(c *Case, err error) {
		if err != nil {
			failed = append(failed, err)
			return
		}
		list = append(list, c)
	}
	if len(args) == 0 {
		for _, name := range library.Names() {
			add(BuiltIn(name))
		}
		return list, failed
	}
	for _, arg := range args {
		if arg == "-" {
			add(read("-", stdin))
			continue
		}
		info, err := os.Stat(arg)
		switch {
		case err == nil && info.IsDir():
			files, err := folder(arg)
			if err != nil {
				failed = append(failed, err)
			}
			for _, f := range files {
				add(open(f))
			}
		case err == nil:
			add(open(arg))
		case errors.Is(err, fs.ErrNotExist):
			if _, ok := library.Source(arg); ok {
				add(BuiltIn(arg))
			} else {
				failed = append(failed, missing(arg))
			}
		default:
			failed = append(failed, whole(arg, reason(err), ""))
		}
	}
	return list, failed
}

// BuiltIn is a case of the library.
func BuiltIn(name string) (*Case, error) {
	data, ok := library.Source(name)
	if !ok {
		return nil, missing(name)
	}
	return Parse(name, data)
}

// open reads a file. Only a regular one is opened: to wait for a pipe that
// nobody writes to would never end.
func open(path string) (*Case, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, whole(path, reason(err), "")
	}
	if !info.Mode().IsRegular() {
		return nil, whole(path, "this is no regular file", `write "-" for standard input`)
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, whole(path, reason(err), "")
	}
	defer f.Close()
	return read(path, f)
}

func read(name string, r io.Reader) (*Case, error) {
	data, err := io.ReadAll(io.LimitReader(r, MaxFile+1))
	if err != nil {
		return nil, whole(name, reason(err), "")
	}
	if len(data) > MaxFile {
		return nil, whole(name, fmt.Sprintf("this file is longer than the %d MiB a case may have", MaxFile>>20), "a case is a page or two of text; is this the right file?")
	}
	return Parse(name, data)
}

func folder(path string) ([]string, error) {
	entries, err := os.ReadDir(path)
	if err != nil {
		return nil, whole(path, reason(err), "")
	}
	var files []string
	for _, e := range entries {
		if !e.IsDir() && strings.HasSuffix(e.Name(), ".toml") {
			files = append(files, filepath.Join(path, e.Name()))
		}
	}
	if len(files) == 0 {
		return nil, whole(path, "this folder holds no case", "a case is a file whose name ends in .toml; sub-folders are not searched")
	}
	sort.Strings(files)
	return files, nil
}

// whole is an error about a file as a whole.
func whole(file, problem, advice string) error {
	return &source.Error{File: file, Problem: problem, Advice: advice}
}

// reason is what a system call complains about, without the path.
func reason(err error) string {
	var p *fs.PathError
	if errors.As(err, &p) {
		return p.Err.Error()
	}
	return err.Error()
}

func missing(name string) error {
	advice := "`creaseproof cases list` lists the built-in cases"
	for _, known := range library.Names() {
		if len(name) >= 4 && len(name) < 60 && (strings.Contains(known, name) || strings.HasPrefix(name, known)) {
			advice = fmt.Sprintf("there is a built-in case %q", known)
			break
		}
	}
	return whole(name, "there is no such file, folder or built-in case", advice)
}
