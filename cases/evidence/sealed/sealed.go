// Package sealed writes the JSON documents of evidence, and reads them strictly:
// one document, no unknown name, none twice, and a digest that fits.
//
// The digest is the SHA-256 of the document without it. It guards against
// accidental change: whoever changes a document on purpose can compute it anew,
// so that nothing may rest on it.
package sealed

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
)

// Schema numbers the format of the documents.
const Schema = 1

// MaxSize bounds a document, in bytes.
const MaxSize = 16 << 20

// Document is a pointer to what is written as one JSON object. Seal gives the
// number of its format and the place of its digest.
type Document interface {
	Seal() (schema int, digest *string)
}

func digestOf(d Document) (string, error) {
	_, place := d.Seal()
	kept := *place
	*place = ""
	data, err := json.Marshal(d)
	*place = kept
	if err != nil {
		return "", err
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:]), nil
}

// Encode is the document as JSON. It sets the digest.
func Encode(d Document) ([]byte, error) {
	x, err := digestOf(d)
	if err != nil {
		return nil, err
	}
	_, place := d.Seal()
	*place = x
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", " ")
	if err := enc.Encode(d); err != nil {
		return nil, err
	}
	if b.Len() > MaxSize {
		return nil, fmt.Errorf("the evidence would have more than %d MiB", MaxSize>>20)
	}
	return b.Bytes(), nil
}

// Decode reads a document. Unknown names, a name twice, anything after the
// document, another schema and a digest that does not fit are errors.
func Decode(data []byte, d Document) error {
	if len(data) > MaxSize {
		return fmt.Errorf("the file has more than %d MiB", MaxSize>>20)
	}
	if err := strict(data); err != nil {
		return fmt.Errorf("this is no evidence: %w", err)
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	if err := dec.Decode(d); err != nil {
		return fmt.Errorf("this is no evidence: %w", err)
	}
	if _, err := dec.Token(); !errors.Is(err, io.EOF) {
		return errors.New("there is more after the document")
	}
	schema, place := d.Seal()
	if schema != Schema {
		return fmt.Errorf("schema %d; this program reads schema %d", schema, Schema)
	}
	x, err := digestOf(d)
	if err != nil {
		return err
	}
	if x != *place {
		return errors.New("the digest does not fit: the file was changed")
	}
	return nil
}

// Names are the names at the top of a document, with their values not yet read.
func Names(data []byte) (map[string]json.RawMessage, error) {
	if len(data) > MaxSize {
		return nil, fmt.Errorf("the file has more than %d MiB", MaxSize>>20)
	}
	if err := strict(data); err != nil {
		return nil, fmt.Errorf("this is no evidence: %w", err)
	}
	var names map[string]json.RawMessage
	if err := json.Unmarshal(data, &names); err != nil {
		return nil, fmt.Errorf("this is no evidence: %w", err)
	}
	return names, nil
}
