package source

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// Limits bound what is read. A zero limit stands for the default.
type Limits struct {
	FileBytes int64 // size of one file; 64 MiB
}

func (l Limits) fileBytes() int64 {
	if l.FileBytes > 0 {
		return l.FileBytes
	}
	return 64 << 20
}

// Read reads one file. It refuses folders, devices, files over the limit and
// binary data; the error names the path.
func Read(path string, limits Limits) (*File, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, plain(path, err)
	}
	data, err := readChecked(path, info, limits)
	if err != nil {
		return nil, err
	}
	text, err := Decode(data)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", Visible(path), err)
	}
	return New(path, text), nil
}

// plain words a file system error.
func plain(path string, err error) error {
	switch {
	case errors.Is(err, os.ErrNotExist):
		return fmt.Errorf("%s does not exist", Visible(path))
	case errors.Is(err, os.ErrPermission):
		return fmt.Errorf("%s may not be read", Visible(path))
	}
	return fmt.Errorf("%s cannot be read", Visible(path))
}

func readChecked(path string, info os.FileInfo, limits Limits) ([]byte, error) {
	switch {
	case info.IsDir():
		return nil, fmt.Errorf("%s is a folder", Visible(path))
	case !info.Mode().IsRegular():
		return nil, fmt.Errorf("%s is no regular file", Visible(path))
	case info.Size() > limits.fileBytes():
		return nil, fmt.Errorf("%s has %d bytes; at most %d are read", Visible(path), info.Size(), limits.fileBytes())
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, plain(path, err)
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, limits.fileBytes()+1))
	if err != nil {
		return nil, plain(path, err)
	}
	return data, nil
}

// Decode turns bytes into text: UTF-8 with or without a byte-order mark, UTF-16
// with one. A byte that is no UTF-8 stands for the Latin-1 character of its
// value. Data with NUL bytes is no text.
func Decode(data []byte) (string, error) {
	switch {
	case bytes.HasPrefix(data, []byte{0xff, 0xfe}):
		return decode16(data[2:], 1), nil
	case bytes.HasPrefix(data, []byte{0xfe, 0xff}):
		return decode16(data[2:], 0), nil
	}
	data = bytes.TrimPrefix(data, []byte{0xef, 0xbb, 0xbf})
	if bytes.IndexByte(data, 0) >= 0 {
		return "", errors.New("this is binary data, not a netlist")
	}
	if utf8.Valid(data) {
		return string(data), nil
	}
	var b strings.Builder
	for len(data) > 0 {
		r, size := utf8.DecodeRune(data)
		if r == utf8.RuneError && size == 1 {
			r = rune(data[0])
		}
		b.WriteRune(r)
		data = data[size:]
	}
	return b.String(), nil
}

// decode16 decodes UTF-16; high is where in a pair the high byte stands.
func decode16(data []byte, high int) string {
	units := make([]uint16, len(data)/2)
	for i := range units {
		units[i] = uint16(data[2*i+high])<<8 | uint16(data[2*i+1-high])
	}
	return string(utf16.Decode(units))
}

// Loader fetches included files. It reads nothing outside the folder of the top
// file and the folders it was allowed.
type Loader struct {
	roots  []string // resolved folders
	limits Limits
	files  map[string]*File // by resolved path
}

// NewLoader returns a loader for the includes of a top file; top is empty for
// text that has no folder.
func NewLoader(top string, allowed []string, limits Limits) *Loader {
	l := &Loader{limits: limits, files: map[string]*File{}}
	if top != "" {
		l.allow(filepath.Dir(top))
	}
	for _, dir := range allowed {
		l.allow(dir)
	}
	return l
}

func (l *Loader) allow(dir string) {
	real, err := filepath.EvalSymlinks(dir)
	if err != nil {
		return
	}
	if abs, err := filepath.Abs(real); err == nil {
		l.roots = append(l.roots, abs)
	}
}

// Load reads an included file, once: the same file gives the same *File. Relative paths are looked for beside the
// including file, then in the allowed folders.
func (l *Loader) Load(from *File, path string) (*File, error) {
	path = strings.ReplaceAll(path, `\`, "/")
	candidates := []string{path}
	if !filepath.IsAbs(path) {
		candidates = candidates[:0]
		if from != nil && from.Path != "" && from.Path != "-" {
			candidates = append(candidates, filepath.Join(filepath.Dir(from.Path), path))
		}
		for _, root := range l.roots {
			candidates = append(candidates, filepath.Join(root, path))
		}
	}
	outside := false
	for _, c := range candidates {
		real, err := filepath.EvalSymlinks(c)
		if err != nil {
			continue
		}
		abs, err := filepath.Abs(real)
		if err != nil {
			continue
		}
		if !l.inside(abs) {
			outside = true
			continue
		}
		return l.read(c, abs)
	}
	if outside || filepath.IsAbs(path) && !l.inside(filepath.Clean(path)) {
		return nil, fmt.Errorf("%s lies outside the netlist's folder and is not read (--include allows a folder)", Visible(path))
	}
	return nil, fmt.Errorf("the included file %s is not there; the work goes on without it", Visible(path))
}

func (l *Loader) inside(abs string) bool {
	for _, root := range l.roots {
		if rel, err := filepath.Rel(root, abs); err == nil && rel != ".." && !strings.HasPrefix(rel, ".."+string(filepath.Separator)) {
			return true
		}
	}
	return false
}

func (l *Loader) read(shown, abs string) (*File, error) {
	if known := l.files[abs]; known != nil {
		return known, nil
	}
	info, err := os.Stat(abs)
	if err != nil {
		return nil, plain(shown, err)
	}
	data, err := readChecked(abs, info, l.limits)
	if err != nil {
		return nil, errors.New(strings.Replace(err.Error(), Visible(abs), Visible(shown), 1))
	}
	text, err := Decode(data)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", Visible(shown), err)
	}
	l.files[abs] = New(shown, text)
	return l.files[abs], nil
}
