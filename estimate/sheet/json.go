package sheet

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
)

// EachKey calls fn at every key of the JSON object that comes next; fn must read
// the value. Keys that come twice are handed over twice, which a decoder into a map
// would hide.
func EachKey(d *json.Decoder, fn func(key string) error) error {
	if err := opens(d, '{', "an object in braces"); err != nil {
		return err
	}
	for d.More() {
		token, err := d.Token()
		if err != nil {
			return err
		}
		key, ok := token.(string)
		if !ok {
			return fmt.Errorf("found %v where a key is wanted", token)
		}
		if err := fn(key); err != nil {
			return err
		}
	}
	_, err := d.Token()
	return err
}

// EachItem calls fn at every item of the JSON array that comes next; fn must read
// it.
func EachItem(d *json.Decoder, fn func(i int) error) error {
	if err := opens(d, '[', "an array in square brackets"); err != nil {
		return err
	}
	for i := 0; d.More(); i++ {
		if err := fn(i); err != nil {
			return err
		}
	}
	_, err := d.Token()
	return err
}

func opens(d *json.Decoder, want json.Delim, words string) error {
	token, err := d.Token()
	if errors.Is(err, io.EOF) {
		return errors.New("the text ends early")
	}
	if err != nil {
		return err
	}
	if token != want {
		text := []rune(fmt.Sprint(token))
		if len(text) > 40 {
			text = append(text[:40], '…')
		}
		return fmt.Errorf("found %s where %s is wanted", string(text), words)
	}
	return nil
}
