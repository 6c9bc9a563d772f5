package analysis

import (
	"errors"
	"fmt"
)

var (
	// ErrNoTone says that no steady tone was found. An [OtherToneError] is one too.
	ErrNoTone = errors.New("no steady tone")

	// ErrTooShort says that the tone does not stand still for a second; a [TooShortError] says how
	// long it does.
	ErrTooShort = errors.New("steady tone too short")

	// ErrSilent says that the recording holds digital silence only.
	ErrSilent = errors.New("nothing but digital silence")
)

// A TooShortError says how long the longest steady tone was. FreqHz is 0 where the whole recording
// is shorter than the second that is needed.
type TooShortError struct {
	FreqHz float64
	Sec    float64
}

func (e *TooShortError) Error() string {
	if e.FreqHz == 0 {
		return fmt.Sprintf("the recording is %.2f s long, need at least %.1f s of steady tone", e.Sec, leastToneSec)
	}
	return fmt.Sprintf("the tone of %.4g Hz is steady for %.2f s, need at least %.1f s", e.FreqHz, e.Sec, leastToneSec)
}

// Unwrap makes errors.Is(err, ErrTooShort) true.
func (e *TooShortError) Unwrap() error { return ErrTooShort }

// An OtherToneError says that none of the frequencies looked for was found, but that another
// steady tone stands in the recording: one from another generator setting, or, at 50 or 60 Hz or a
// multiple and weak, mains hum.
type OtherToneError struct {
	WantHz    []float64 // the frequencies looked for
	FreqHz    float64   // the strongest steady tone there is
	LevelDBFS float64   // its level
}

func (e *OtherToneError) Error() string {
	return fmt.Sprintf("no steady tone at %.6g Hz, but one at %.6g Hz, %.1f dBFS", e.WantHz, e.FreqHz, e.LevelDBFS)
}

// Unwrap makes errors.Is(err, ErrNoTone) true.
func (e *OtherToneError) Unwrap() error { return ErrNoTone }
