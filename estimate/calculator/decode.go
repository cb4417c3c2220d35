package calculator

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode/utf8"
)

// maxDepth is how deeply JSON may be nested.
const maxDepth = 32

// Decode reads one JSON value into a request: unknown fields, keys given twice,
// text that is not UTF-8 and anything after the value are Faults.
func Decode(data []byte, into any) error {
	var f Faults
	if !utf8.Valid(data) {
		f.add("", "the text", "not UTF-8", "JSON in UTF-8")
		return f
	}
	keys := json.NewDecoder(bytes.NewReader(data))
	if err := walk(keys, "", 0); err != nil {
		return err
	}
	if _, err := keys.Token(); !errors.Is(err, io.EOF) {
		f.add("", "text after the JSON value", "not one value", "one JSON value and nothing after it")
		return f
	}
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(into); err != nil {
		return unreadable(err)
	}
	return nil
}

// unreadable words an error of the decoder.
func unreadable(err error) Faults {
	var f Faults
	var t *json.UnmarshalTypeError
	switch {
	case errors.As(err, &t):
		at := ""
		if t.Field != "" {
			at = "/" + strings.ReplaceAll(t.Field, ".", "/")
		}
		f.add(at, "a "+t.Value, "of another type", "a value of type "+t.Type.Kind().String())
	case strings.Contains(err.Error(), "unknown field"):
		_, name, _ := strings.Cut(err.Error(), "unknown field ")
		f.add("", name, "unknown field", "the fields that the documentation of the calculator lists")
	default:
		f.add("", "the text", "not JSON as it is read here: "+err.Error(), "JSON (RFC 8259)")
	}
	return f
}

// walk refuses a key given twice.
func walk(d *json.Decoder, at string, depth int) error {
	t, err := d.Token()
	if err != nil {
		return unreadable(err)
	}
	open, nested := t.(json.Delim)
	if !nested {
		return nil
	}
	if depth > maxDepth {
		return Faults{{at, "a value at this depth", "nested too deeply", fmt.Sprintf("at most %d levels", maxDepth)}}
	}
	seen := map[string]bool{}
	for i := 0; d.More(); i++ {
		here := item(at, i)
		if open == '{' {
			k, err := d.Token()
			if err != nil {
				return unreadable(err)
			}
			key, _ := k.(string)
			here = at + "/" + strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
			if seen[key] {
				return Faults{{here, strconv.Quote(key), "the key is given twice", "each key once"}}
			}
			seen[key] = true
		}
		if err := walk(d, here, depth+1); err != nil {
			return err
		}
	}
	if _, err := d.Token(); err != nil {
		return unreadable(err)
	}
	return nil
}
