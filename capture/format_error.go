package capture

import "fmt"

// A FormatError says why a file cannot be read as a take. It prints as
//
//	before.wav: byte 20: format tag 85 is MP3 in WAV, not PCM
type FormatError struct {
	Name   string // the file, as it was named to Open
	Offset int64  // the byte in question, from 0; negative where no byte is to blame
	Text   string // what was found there
	Hint   string // what to do about it
}

func (e *FormatError) Error() string {
	if e.Offset < 0 {
		return fmt.Sprintf("%s: %s", e.Name, e.Text)
	}
	return fmt.Sprintf("%s: byte %d: %s", e.Name, e.Offset, e.Text)
}

const (
	hintExport = "export the take again as 16- or 24-bit PCM WAV"
	hintAgain  = "copy the file from the recorder again, or record the take again"
)
