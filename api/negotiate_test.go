package api

import "testing"

// The rules of RFC 9110, 12.5.1: the most specific range counts, quality 0 is no,
// and of equal qualities ours is the first.
func TestNegotiate(t *testing.T) {
	offers := []string{mediaJSON, mediaXLSX, mediaCSV}
	for _, c := range []struct {
		accept string
		want   int
	}{
		{"", 0}, {"*/*", 0}, {"application/*", 0}, {mediaJSON, 0}, {mediaXLSX, 1}, {"text/csv", 2}, {"TEXT/CSV", 2}, {"text/*", 2},
		{"text/csv, application/json", 0}, {"text/csv, application/json;q=0.9", 2}, {"application/json;q=0, */*", 1}, {"*/*;q=0.1, text/csv;q=0.2", 2},
		{"application/*;q=0.5, application/json;q=0.1, text/csv;q=0.4", 1}, {mediaXLSX + "; q=1.0 , */*;q=0.8", 1},
		{"image/png", -1}, {"application/json;q=0", -1}, {"text/html, image/*", -1}, {"application/json;q=x", -1}, {"application/json;q=2", -1}, {"application/json;q=NaN", -1},
		{"application/json;charset=utf-8", 0}, {"*", -1},
		{"audio/*; q=0.2, audio/basic", -1}, // the RFC's own example
	} {
		if got := negotiate(c.accept, offers); got != c.want {
			t.Errorf("Accept %q: offer %d, want %d", c.accept, got, c.want)
		}
	}
}
