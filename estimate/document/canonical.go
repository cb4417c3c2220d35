package document

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"strconv"
)

// Number is a float64 printed to 12 significant digits, so that the same job
// prints the same text on machines whose arithmetic differs in the last bits.
type Number float64

// MarshalJSON prints 12 significant digits; NaN and infinity are errors.
func (n Number) MarshalJSON() ([]byte, error) {
	x := float64(n)
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil, fmt.Errorf("a figure of the estimate is %v", x)
	}
	r := n.Rounded()
	if a := math.Abs(r); a != 0 && (a < 1e-6 || a >= 1e21) {
		return strconv.AppendFloat(nil, r, 'e', -1, 64), nil
	}
	return strconv.AppendFloat(nil, r, 'f', -1, 64), nil
}

// Rounded returns the value as it is printed: 12 significant digits, and zero
// without a sign.
func (n Number) Rounded() float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(float64(n), 'g', 12, 64), 64)
	if err != nil || r == 0 {
		return 0
	}
	return r
}

// Measured returns a figure of the structural analysis, rounded to 8 significant
// digits: differences of large effects leave fewer sound digits than sums do, and
// the printed text must not depend on a machine's last bits. It rounds to 12 digits
// first, so that those bits decide no tie either.
func Measured(x float64) Number {
	r, err := strconv.ParseFloat(strconv.FormatFloat(Number(x).Rounded(), 'g', 8, 64), 64)
	if err != nil {
		return Number(x)
	}
	return Number(r)
}

// Canonical returns the document's bytes, as stored and answered, and their
// SHA-256 in hex.
func (d Document) Canonical() ([]byte, string, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(d); err != nil {
		return nil, "", fmt.Errorf("writing the estimate: %w", err)
	}
	sum := sha256.Sum256(b.Bytes())
	return b.Bytes(), hex.EncodeToString(sum[:]), nil
}

// ErrEarlier reports a document of an engine that stated less than a workbook needs.
var ErrEarlier = errors.New("the estimate was made by an earlier engine, which did not state all that a workbook needs; make a new estimate of the scheme")

// Parse reads a document from its canonical bytes.
func Parse(data []byte) (Document, error) {
	var d Document
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&d); err != nil {
		return Document{}, fmt.Errorf("reading an estimate: %w", err)
	}
	if d.EngineVersion < 1 {
		return Document{}, errors.New("reading an estimate: found no engine version; accepted: a document as an estimate gives it")
	}
	return d, nil
}
