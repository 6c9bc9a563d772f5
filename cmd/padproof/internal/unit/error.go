package unit

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
)

// Error is what is wrong with a unit's files.
type Error struct {
	Serial string // the unit's; "" where it is not known
	File   string // the file or folder; "" where it is none
	Text   string // what is wrong: lower case, no full stop
	Hint   string // what to do
}

// Error gives file and text, without the hint.
func (e *Error) Error() string {
	if e.File == "" {
		return e.Text
	}
	return e.File + ": " + e.Text
}

// noFolder is the error for a folder that cannot be looked into.
func noFolder(folder string, err error) *Error {
	info, statErr := os.Stat(folder)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return &Error{File: folder, Text: "no such folder", Hint: "look at the spelling of the path"}
	case errors.Is(err, fs.ErrPermission):
		return &Error{File: folder, Text: "may not be read", Hint: "make the folder readable for you, or copy it elsewhere"}
	case statErr == nil && !info.IsDir():
		return &Error{File: folder, Text: "is a file, not a folder",
			Hint: "give the folder that holds it, or name the files by role: --before, --after"}
	}
	var cause *fs.PathError
	if errors.As(err, &cause) {
		err = cause.Err
	}
	return &Error{File: folder, Text: fmt.Sprintf("cannot be read: %v", err), Hint: "is it a folder of this machine?"}
}
