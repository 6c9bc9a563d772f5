package arrival

import (
	"io"
	"io/fs"
	"os"
)

// FS is what is asked of a file system. Paths are the machine's own.
type FS interface {
	Stat(path string) (fs.FileInfo, error)
	ReadDir(path string) ([]fs.DirEntry, error)
	Open(path string) (File, error)
}

// A File is open for reading.
type File interface {
	io.ReaderAt
	io.Closer
}

// machine is the machine's own file system. Sizes are asked of the file itself:
// what a folder's list says of an open file is out of date on some systems.
type machine struct{}

func (machine) Stat(path string) (fs.FileInfo, error)      { return os.Stat(path) }
func (machine) ReadDir(path string) ([]fs.DirEntry, error) { return os.ReadDir(path) }
func (machine) Open(path string) (File, error)             { return os.Open(path) }
