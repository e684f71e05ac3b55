package run

import (
	"context"
	"errors"
	"io"
	"path/filepath"

	"creaseproof/cases/creases"
	"creaseproof/cases/evidence/energies"
)

// mesh copies the mesh of a surface beside the evidence, under the name of its
// digest, once for all surfaces that have it. It is nil where the surface is none.
func (e *Evidence) mesh(ctx context.Context, r *EnergyResult) (*energies.Mesh, error) {
	if r.Surface.Mesh == "" {
		return nil, nil
	}
	key := r.Case.File.Path + "\x00" + r.Surface.Mesh
	if m, ok := e.meshes[key]; ok {
		if m == nil {
			return nil, errors.New("the mesh was not copied")
		}
		return m, nil
	}
	e.meshes[key] = nil
	if r.Surface.Mesh == "/dev/stdin" {
		return nil, errors.New("the mesh came from standard input and cannot be copied; write it to a file")
	}
	in, err := creases.OpenMesh(r.Case.File.Path, r.Surface.Mesh)
	if err != nil {
		return nil, err
	}
	defer in.Close()
	m := &energies.Mesh{}
	err = e.create(func(w io.Writer) (string, error) {
		sum, err := energies.SumOf(ctx, io.TeeReader(in, w))
		m.SHA256, m.File = sum, sum+".mesh"
		return filepath.Join(e.dir, m.File), err
	})
	if err != nil {
		return nil, err
	}
	e.meshes[key] = m
	return m, nil
}
