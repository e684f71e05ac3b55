package mesh

// readText reads STL in text: one solid or several.
func readText(l *lexer, b *builder) error {
	solids := 0
	for {
		t, err := l.word1()
		switch {
		case err != nil:
			return err
		case t == endToken && solids > 0:
			return nil
		case t == endToken || !l.is("solid"):
			return l.fault("%s where \"solid\" is expected", l.got(t))
		}
		solids++
		if _, err = l.skip(); err != nil { // its name
			return err
		}
		if err = readSolid(l, b); err != nil {
			return err
		}
	}
}

// readSolid reads the facets of a solid, to the end of the line of endsolid.
func readSolid(l *lexer, b *builder) error {
	for {
		t, err := l.word1()
		switch {
		case err != nil:
			return err
		case t == endToken:
			return l.fault("the file is truncated: it ends within a solid, after %d triangles, without \"endsolid\"", b.seen)
		case l.is("endsolid"):
			_, err = l.skip()
			return err
		case !l.is("facet"):
			return l.fault("%s where \"facet\" or \"endsolid\" is expected", l.got(t))
		case b.full():
			return l.limit(b.tooMany())
		}
		var normal [3]float64
		if err = l.expect(b, "normal"); err != nil {
			return err
		}
		for k := range normal {
			if err = l.need(b, "a component of the normal"); err != nil {
				return err
			}
			if normal[k], err = l.number(); err != nil {
				return err
			}
		}
		if err = l.expect(b, "outer", "loop"); err != nil {
			return err
		}
		var tri [3]int32
		for v := range tri {
			if err = l.expect(b, "vertex"); err != nil {
				return err
			}
			var p [3]float64
			for k := range p {
				if err = l.need(b, "a coordinate"); err != nil {
					return err
				}
				if p[k], err = l.coordinate(); err != nil {
					return err
				}
			}
			tri[v] = b.vertex(p)
		}
		if err = l.expect(b, "endloop", "endfacet"); err != nil {
			return err
		}
		b.add(tri, normal)
	}
}

// word1 is the next word, on whichever line.
func (l *lexer) word1() (token, error) {
	for {
		t, err := l.next()
		if err != nil || t != lineToken {
			return t, err
		}
	}
}

// got describes a token for a message.
func (l *lexer) got(t token) string {
	if t == endToken {
		return "the file ends"
	}
	return l.shown() + " stands"
}

// need reads a word that must be there.
func (l *lexer) need(b *builder, what string) error {
	t, err := l.word1()
	if err == nil && t == endToken {
		return l.fault("the file is truncated: it ends within triangle %d, where %s is expected", b.seen+1, what)
	}
	return err
}

// expect reads keywords.
func (l *lexer) expect(b *builder, keywords ...string) error {
	for _, k := range keywords {
		if err := l.need(b, `"`+k+`"`); err != nil {
			return err
		}
		if !l.is(k) {
			return l.fault("%s stands where %q is expected", l.shown(), k)
		}
	}
	return nil
}
