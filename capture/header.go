package capture

import (
	"encoding/binary"
	"math"
)

func (f *Format) frameBytes() int { return f.Channels * f.Bits / 8 }

// header returns all that stands before the samples of a take with so many frames. room64 keeps
// place for a ds64 chunk, which big fills. The length depends on neither frames nor big.
func (f *Format) header(frames int64, room64, big bool) []byte {
	le := binary.LittleEndian
	dataBytes := frames * int64(f.frameBytes())
	var body []byte // from the first chunk on
	if room64 && !big {
		body = appendChunk(body, "JUNK", make([]byte, 28))
	}
	body = appendChunk(body, "fmt ", f.fmtPayload())
	if f.Float || f.Extensible {
		body = appendChunk(body, "fact", le.AppendUint32(nil, size32(frames, big)))
	}
	if f.Comment != "" {
		text := appendChunk([]byte("INFO"), "ICMT", append([]byte(f.Comment), 0))
		body = appendChunk(body, "LIST", text)
	}
	body = append(body, "data"...)
	body = le.AppendUint32(body, size32(dataBytes, big))

	id := "RIFF"
	riffBytes := 4 + int64(len(body)) + dataBytes + dataBytes%2
	if big {
		id = "RF64"
		riffBytes += 36
		sizes := le.AppendUint64(nil, uint64(riffBytes))
		sizes = le.AppendUint64(sizes, uint64(dataBytes))
		sizes = le.AppendUint64(sizes, uint64(frames))
		sizes = le.AppendUint32(sizes, 0) // no further chunk is that long
		body = append(appendChunk(nil, "ds64", sizes), body...)
	}
	head := le.AppendUint32([]byte(id), size32(riffBytes, big))
	return append(append(head, "WAVE"...), body...)
}

// size32 is a size as a 32-bit field holds it, with 0xFFFFFFFF where the ds64 chunk has it.
func size32(n int64, big bool) uint32 {
	if big || n > math.MaxUint32 {
		return noSize32
	}
	return uint32(n)
}

// fmtPayload is the payload of the `fmt ` chunk. An extensible one names the usual speakers of one and
// two channels, none for more.
func (f *Format) fmtPayload() []byte {
	le := binary.LittleEndian
	tag := uint16(tagPCM)
	if f.Float {
		tag = tagFloat
	}
	outer := tag
	if f.Extensible {
		outer = tagExtensible
	}
	b := le.AppendUint16(nil, outer)
	b = le.AppendUint16(b, uint16(f.Channels))
	b = le.AppendUint32(b, uint32(f.RateHz))
	b = le.AppendUint32(b, uint32(f.RateHz*f.frameBytes()))
	b = le.AppendUint16(b, uint16(f.frameBytes()))
	b = le.AppendUint16(b, uint16(f.Bits))
	switch {
	case f.Extensible:
		b = le.AppendUint16(b, 22)
		b = le.AppendUint16(b, uint16(f.Bits))
		b = le.AppendUint32(b, speakers(f.Channels))
		b = le.AppendUint16(b, tag)
		b = append(b, subFormatTail...)
	case f.Float:
		b = le.AppendUint16(b, 0)
	}
	return b
}

func speakers(channels int) uint32 {
	switch channels {
	case 1:
		return 4 // front centre
	case 2:
		return 3 // front left and right
	}
	return 0
}

// appendChunk appends a chunk with its pad byte.
func appendChunk(b []byte, id string, payload []byte) []byte {
	b = append(b, id...)
	b = binary.LittleEndian.AppendUint32(b, uint32(len(payload)))
	b = append(b, payload...)
	if len(payload)%2 == 1 {
		b = append(b, 0)
	}
	return b
}
