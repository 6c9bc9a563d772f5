// Package capture reads and writes WAV files: a take, its channels, its facts. It knows nothing of
// tones or levels.
//
// The usual order of calls:
//
//  1. [Open] finds the samples of a file and says in a [FormatError] why it cannot, where it cannot.
//  2. [Take.Facts] gives rate, channels, bits, length, comments, and the problems that the file
//     itself shows: a recorder that died, a file cut short.
//  3. [Take.Channel] gives one channel; [Channel.ReadAt] reads any stretch of it, as often as liked.
//  4. [Take.SHA256] gives the hash of the whole file.
//  5. [Take.Close] lets the file go.
//
// [Create] writes a take: [Writer.Write] as often as needed, then [Writer.Close]; [Writer.Abort]
// leaves nothing behind.
//
// # Units and signs
//
// Samples are float64. Integer samples of b bits are divided by 2^(b-1), b being the width of the
// container, so they lie in [-1, 1): the most negative code is -1, the most positive just under 1.
// Eight-bit samples are unsigned in the file, with 128 as zero. Float samples pass as they are, NaN,
// infinities and values beyond 1 included; whoever measures has to look for them. A frame is one
// sample of every channel; frames count from 0, channels from 1. Nothing is dithered or resampled.
//
// # What is read
//
// RIFF, RF64 and BW64 files of form WAVE, with 1 to 64 channels at 8000 to 384000 Hz: integers of 8,
// 16, 24 and 32 bits, floats of 32 and 64 bits, with plain and with extensible headers. Odd widths
// (12, 18, 20 bits) fill their container from the top, as the extensible header asks; an extensible
// header may also name fewer valid bits than the container has. Chunks may come in any order, be of
// any kind, and lack their pad byte where the next chunk's name makes that plain. Of several `fmt `
// or `data` chunks the first counts. The size in the RIFF header is not relied on.
//
// A plain header that says 24 bits in 4 bytes is refused: some old programs mean floats by it.
//
// The layouts are those of the RIFF WAVE format, its extensible header, the broadcast extension
// (EBU Tech 3285) and the 64-bit sizes of EBU Tech 3306 and ITU-R BS.2088-1; testdata/wav_format.csv
// lists them. Tags, sub-format tail and ds64 agree with the test vectors of two open WAV readers; the
// `bext` fields are from memory, and so are the names of foreign codings and files in messages.
//
// # Limits
//
// A take is never loaded whole: each Channel holds one buffer of 64 KiB, whatever the length of the
// file, and files over 4 GiB are read like any other. Opening looks at 1024 chunks at most and keeps
// 64 comments of 4096 bytes at most.
//
// # Concurrency
//
// A Take may be used from several goroutines, a Channel from one at a time. Two channels of one take
// may be read at once.
package capture
