package demo

import (
	"bytes"
	"io"
	"io/fs"
	"slices"
	"time"
)

// Files is a flat folder in memory: the files of one simulated campaign in the
// order in which they were written, campaign file first. It is an fs.FS.
type Files struct {
	Drawn Drawn // what the laboratory did not know
	list  []file
}

type file struct {
	name string
	data []byte
}

// CampaignFile is the name of the campaign file in Files.
const CampaignFile = "campaign.yaml"

// Names returns the files' names in the order of writing.
func (f Files) Names() []string {
	names := make([]string, len(f.list))
	for i, e := range f.list {
		names[i] = e.name
	}
	return names
}

// Bytes returns a copy of a file's content, nil if there is no such file.
func (f Files) Bytes(name string) []byte {
	for _, e := range f.list {
		if e.name == name {
			return bytes.Clone(e.data)
		}
	}
	return nil
}

// With returns a copy of the folder in which the named file has the given
// content, added at the end if it is new. Tests break a good campaign with it.
func (f Files) With(name string, data []byte) Files {
	g := Files{Drawn: f.Drawn, list: slices.Clone(f.list)}
	for i := range g.list {
		if g.list[i].name == name {
			g.list[i].data = bytes.Clone(data)
			return g
		}
	}
	g.list = append(g.list, file{name, bytes.Clone(data)})
	return g
}

// Open implements fs.FS.
func (f Files) Open(name string) (fs.File, error) {
	if !fs.ValidPath(name) {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrInvalid}
	}
	if name == "." {
		sorted := slices.Clone(f.list)
		slices.SortFunc(sorted, func(a, b file) int { return bytes.Compare([]byte(a.name), []byte(b.name)) })
		return &openFolder{entries: sorted}, nil
	}
	for _, e := range f.list {
		if e.name == name {
			return &openFile{info: info{e}, Reader: bytes.NewReader(e.data)}, nil
		}
	}
	return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
}

// info is a file's fs.FileInfo and fs.DirEntry; the zero file is the folder.
type info struct{ file }

func (i info) Name() string {
	if i.IsDir() {
		return "."
	}
	return i.name
}
func (i info) Size() int64                { return int64(len(i.data)) }
func (i info) ModTime() time.Time         { return time.Time{} }
func (i info) IsDir() bool                { return i.name == "" }
func (i info) Sys() any                   { return nil }
func (i info) Info() (fs.FileInfo, error) { return i, nil }
func (i info) Type() fs.FileMode          { return i.Mode().Type() }
func (i info) String() string             { return fs.FormatDirEntry(i) }
func (i info) Mode() fs.FileMode {
	if i.IsDir() {
		return fs.ModeDir | 0o555
	}
	return 0o444
}

type openFile struct {
	info info
	*bytes.Reader
}

func (o *openFile) Stat() (fs.FileInfo, error) { return o.info, nil }
func (o *openFile) Close() error               { return nil }

type openFolder struct {
	entries []file
	next    int
}

func (o *openFolder) Stat() (fs.FileInfo, error) { return info{}, nil }
func (o *openFolder) Close() error               { return nil }
func (o *openFolder) Read([]byte) (int, error) {
	return 0, &fs.PathError{Op: "read", Path: ".", Err: fs.ErrInvalid}
}

// ReadDir implements fs.ReadDirFile.
func (o *openFolder) ReadDir(n int) ([]fs.DirEntry, error) {
	left := o.entries[o.next:]
	if n > 0 && len(left) == 0 {
		return nil, io.EOF
	}
	if n > 0 && n < len(left) {
		left = left[:n]
	}
	o.next += len(left)
	out := make([]fs.DirEntry, len(left))
	for i, e := range left {
		out[i] = info{e}
	}
	return out, nil
}
