package dashboard

import (
	"bytes"
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"fmt"
	"net/http"
	"strconv"
	"strings"

	"spanwright/estimate/chart"
	"spanwright/estimate/document"
)

//go:embed static
var staticFiles embed.FS

// asset is one file under /static, named with its digest.
type asset struct {
	contentType string
	data        []byte
}

// assets are the static files by name, with the URLs that pages link.
type assets struct {
	files       map[string]asset
	style, icon string
}

func newAssets() (assets, error) {
	a := assets{files: map[string]asset{}}
	style, err := staticFiles.ReadFile("static/style.css")
	if err != nil {
		return a, fmt.Errorf("dashboard: %w", err)
	}
	icon, err := staticFiles.ReadFile("static/icon.svg")
	if err != nil {
		return a, fmt.Errorf("dashboard: %w", err)
	}
	a.style = a.add("style", "css", "text/css; charset=utf-8", styleSheet(style))
	a.icon = a.add("icon", "svg", "image/svg+xml", icon)
	return a, nil
}

// styleSheet puts the palettes of the drawings, which are also the page's, and
// the caution at the foot of printed pages before the rules.
func styleSheet(rules []byte) []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, ":root{%s}\n", chart.Light.Variables())
	fmt.Fprintf(&b, "@media screen and (prefers-color-scheme:dark){:root{%s}}\n", chart.Dark.Variables())
	fmt.Fprintf(&b, "@page{@bottom-center{font:7.5pt sans-serif;content:%s}}\n", strconv.Quote(document.Caution))
	b.Write(rules)
	return b.Bytes()
}

// add keeps a file and returns its URL.
func (a assets) add(name, extension, contentType string, data []byte) string {
	sum := sha256.Sum256(data)
	file := name + "." + hex.EncodeToString(sum[:6]) + "." + extension
	a.files[file] = asset{contentType, data}
	return "/static/" + file
}

// static serves a file for a year: another content has another name.
func (d *dashboard) static(w http.ResponseWriter, r *http.Request) error {
	f, ok := d.assets.files[strings.TrimPrefix(r.URL.Path, "/static/")]
	if !ok {
		return errNoPage
	}
	w.Header().Set("Content-Type", f.contentType)
	w.Header().Set("Content-Length", strconv.Itoa(len(f.data)))
	w.Header().Set("Cache-Control", "public, max-age=31536000, immutable")
	_, _ = w.Write(f.data)
	return nil
}
