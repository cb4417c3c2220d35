package sheet

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"unicode/utf16"
	"unicode/utf8"
)

// decodeText turns CSV bytes into UTF-8 without a byte order mark. UTF-16 is
// told by its mark or by zero bytes on one side of most pairs. What is neither
// is refused: in an 8-bit code page every byte is some character, so that a
// wrong guess would go unseen.
func decodeText(data []byte) ([]byte, error) {
	switch {
	case bytes.HasPrefix(data, []byte("\xef\xbb\xbf")):
		data = data[3:]
	case bytes.HasPrefix(data, []byte("\xff\xfe")):
		return decodeUTF16(data[2:], binary.LittleEndian)
	case bytes.HasPrefix(data, []byte("\xfe\xff")):
		return decodeUTF16(data[2:], binary.BigEndian)
	default:
		if order := guessUTF16(data); order != nil {
			return decodeUTF16(data, order)
		}
	}
	if !utf8.Valid(data) {
		return nil, notUTF8(data)
	}
	if bytes.ContainsAny(data, "\x00\x01\x02\x03\x04\x05\x06\x07\x08") {
		return nil, unsupported("holds control characters and is no text", wanted)
	}
	return data, nil
}

// notUTF8 names the line of the first byte that is not UTF-8.
func notUTF8(data []byte) error {
	at := 0
	for at < len(data) {
		r, n := utf8.DecodeRune(data[at:])
		if r == utf8.RuneError && n <= 1 {
			break
		}
		at += n
	}
	line := 1 + bytes.Count(data[:at], []byte("\n"))
	return unsupported(fmt.Sprintf("is not in UTF-8: byte 0x%02X in line %d", data[at], line),
		"save it as “CSV UTF-8” (many programs offer it beside plain CSV), or as .xlsx")
}

func guessUTF16(data []byte) binary.ByteOrder {
	head := data[:min(len(data), 4096)&^1]
	if len(head) < 4 || len(data)%2 != 0 {
		return nil
	}
	var zeros [2]int
	for i, b := range head {
		if b == 0 {
			zeros[i%2]++
		}
	}
	half := len(head) / 4 // half of the pairs
	switch {
	case zeros[1] > half && zeros[0] == 0:
		return binary.LittleEndian
	case zeros[0] > half && zeros[1] == 0:
		return binary.BigEndian
	}
	return nil
}

func decodeUTF16(data []byte, order binary.ByteOrder) ([]byte, error) {
	damaged := malformed("is in UTF-16 but damaged", "save it as CSV in UTF-8, or as .xlsx")
	if len(data)%2 != 0 {
		return nil, damaged
	}
	out := make([]byte, 0, len(data)/2+len(data)/8)
	for i := 0; i < len(data); i += 2 {
		r := rune(order.Uint16(data[i:]))
		if utf16.IsSurrogate(r) {
			if i+4 > len(data) {
				return nil, damaged
			}
			i += 2
			if r = utf16.DecodeRune(r, rune(order.Uint16(data[i:]))); r == utf8.RuneError {
				return nil, damaged
			}
		}
		if r < ' ' && r != '\t' && r != '\n' && r != '\r' && r != '\f' {
			return nil, damaged
		}
		out = utf8.AppendRune(out, r)
	}
	return out, nil
}
