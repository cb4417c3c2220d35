package sheet

import (
	"bufio"
	"fmt"
	"io"
	"strings"
	"time"
)

// WriteCSV writes rows as RFC 4180 text in UTF-8: commas, CRLF, quotes where
// needed. Texts are neutralised, numbers are plain decimal text with a point,
// dates are ISO 8601, a formula is its cached result.
func WriteCSV(w io.Writer, rows [][]Value) error {
	out := bufio.NewWriter(w)
	for i, row := range rows {
		for j, v := range row {
			text, err := v.csv()
			if err != nil {
				return fmt.Errorf("writing CSV cell %v: %w", Address{Row: i + 1, Column: j + 1}, err)
			}
			if j > 0 {
				text = "," + text
			}
			if _, err := out.WriteString(text); err != nil {
				return fmt.Errorf("writing CSV: %w", err)
			}
		}
		if _, err := out.WriteString("\r\n"); err != nil {
			return fmt.Errorf("writing CSV: %w", err)
		}
	}
	if err := out.Flush(); err != nil {
		return fmt.Errorf("writing CSV: %w", err)
	}
	return nil
}

func (v Value) csv() (string, error) {
	if err := v.check(); err != nil {
		return "", err
	}
	switch v.kind {
	case numberValue:
		return v.text, nil
	case dateValue:
		return v.day.Format(time.DateOnly), nil
	case formulaValue:
		if _, err := exactFloat(v.text); err == nil {
			return v.text, nil
		}
	}
	return quoteField(Neutralise(v.text)), nil
}

func quoteField(text string) string {
	if strings.ContainsAny(text, "\",;\t\r\n") || strings.TrimSpace(text) != text {
		return `"` + strings.ReplaceAll(text, `"`, `""`) + `"`
	}
	return text
}
