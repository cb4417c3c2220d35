package sheet

import (
	"archive/zip"
	"bytes"
	"errors"
	"io"
	"io/fs"
	"maps"
	"slices"
	"time"
)

// contentTypes comes first in the archive, where readers look for it.
const contentTypes = "[Content_Types].xml"

// archiveTime is the time of every part: the first that the ZIP format knows.
var archiveTime = time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC)

// sortedArchive is a ZIP writer whose bytes depend on names and contents alone:
// the library hands sheets over in random order.
type sortedArchive struct {
	out   io.Writer
	parts map[string]*bytes.Buffer
}

// Create takes the contents of one part, the last of that name.
func (a *sortedArchive) Create(name string) (io.Writer, error) {
	a.parts[name] = &bytes.Buffer{}
	return a.parts[name], nil
}

// AddFS belongs to the library's interface, which does not call it here.
func (a *sortedArchive) AddFS(fs.FS) error {
	return errors.New("adding a file system is not supported")
}

// Close writes the archive.
func (a *sortedArchive) Close() error {
	z := zip.NewWriter(a.out)
	names := slices.Sorted(maps.Keys(a.parts))
	if i := slices.Index(names, contentTypes); i > 0 {
		names = slices.Insert(slices.Delete(names, i, i+1), 0, contentTypes)
	}
	for _, name := range names {
		w, err := z.CreateHeader(&zip.FileHeader{Name: name, Method: zip.Deflate, Modified: archiveTime})
		if err != nil {
			return err
		}
		if _, err := w.Write(a.parts[name].Bytes()); err != nil {
			return err
		}
	}
	return z.Close()
}
