package store

import (
	"encoding/hex"
	"fmt"

	"spanwright/estimate/money"
)

// amount reads a numeric column that the query casts to text. Not through pgtype's
// NumericScanner: that one loses the places of a zero, and 0.00 would come back
// as 0. Written it is as text, which PostgreSQL reads exactly, places included.
type amount money.Decimal

// Scan reads the text of a numeric, for database/sql.
func (a *amount) Scan(src any) error {
	text, ok := src.(string)
	if !ok {
		return fmt.Errorf("an amount: found %T, want text", src)
	}
	d, err := money.Parse(text)
	*a = amount(d)
	return err
}

// digest reads a SHA-256 column as hexadecimal text.
type digest string

// ScanBytes reads a bytea; the bytes are copied.
func (d *digest) ScanBytes(sum []byte) error {
	*d = digest(hex.EncodeToString(sum))
	return nil
}
