package auth

import (
	"crypto/rand"
	"crypto/sha256"
	"crypto/subtle"
	"encoding/base64"
	"encoding/hex"
	"errors"
	"strings"
)

// Prefix begins every token, so that secret scanners find a leaked one.
const Prefix = "swt_"

// ErrToken reports text that has not the form of a token.
var ErrToken = errors.New("not a token: it begins with " + Prefix + ", then a public id and a secret")

// Secret is a token or session just made: its text is shown once and not kept.
type Secret struct {
	PublicID string // found by
	Text     string // the whole text that the bearer sends
	SHA256   []byte // what is stored
}

// NewToken makes a token: a public id of 80 bits and 256 random bits.
func NewToken() Secret {
	id := make([]byte, 10)
	secret := make([]byte, 32)
	rand.Read(id)
	rand.Read(secret)
	s := Secret{PublicID: hex.EncodeToString(id)}
	s.Text = Prefix + s.PublicID + "_" + base64.RawURLEncoding.EncodeToString(secret)
	s.SHA256 = Hash(secret)
	return s
}

// NewSession makes the secret of a server-side session.
func NewSession() Secret {
	secret := make([]byte, 32)
	rand.Read(secret)
	return Secret{Text: base64.RawURLEncoding.EncodeToString(secret), SHA256: Hash(secret)}
}

// ParseToken splits a token's text into the public id and the hash of its secret.
func ParseToken(text string) (publicID string, sha256 []byte, err error) {
	rest, ok := strings.CutPrefix(text, Prefix)
	if !ok {
		return "", nil, ErrToken
	}
	id, encoded, ok := strings.Cut(rest, "_")
	if !ok || len(id) != 20 {
		return "", nil, ErrToken
	}
	secret, ok := decode(encoded)
	if !ok {
		return "", nil, ErrToken
	}
	return id, Hash(secret), nil
}

// ParseSession returns the hash of a session's secret.
func ParseSession(text string) ([]byte, error) {
	secret, ok := decode(text)
	if !ok {
		return nil, errors.New("not a session")
	}
	return Hash(secret), nil
}

// decode reads 256 bits; the length is checked first because the decoder passes
// over line breaks.
func decode(text string) ([]byte, bool) {
	if len(text) != base64.RawURLEncoding.EncodedLen(32) {
		return nil, false
	}
	secret, err := base64.RawURLEncoding.Strict().DecodeString(text)
	return secret, err == nil && len(secret) == 32
}

// Hash is SHA-256: a secret of 256 random bits needs no slower one.
func Hash(secret []byte) []byte {
	sum := sha256.Sum256(secret)
	return sum[:]
}

// Matches compares two hashes in constant time.
func Matches(a, b []byte) bool { return len(a) > 0 && subtle.ConstantTimeCompare(a, b) == 1 }
