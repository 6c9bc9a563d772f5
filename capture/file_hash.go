package capture

import (
	"crypto/sha256"
	"encoding/hex"
	"hash"
	"sync"
	"sync/atomic"
)

// A fileHash is the SHA-256 of a file, made along the way: whatever read begins at or before the
// frontier, the end of what was hashed so far, and goes past it moves the frontier on. Reads beyond
// the frontier are of no use to it and cost nothing. So one pass over a channel hashes the file, and
// a sparse look leaves the rest for later.
type fileHash struct {
	src      *source
	dataAt   int64
	frontier atomic.Int64 // changed only under mu

	mu  sync.Mutex
	sum hash.Hash
	buf []byte
}

func (h *fileHash) init(s *source, dataAt int64) {
	h.src, h.dataAt, h.sum = s, dataAt, sha256.New()
}

// feed offers the bytes b of the file from off on.
func (h *fileHash) feed(b []byte, off int64) {
	end := off + int64(len(b))
	if f := h.frontier.Load(); end <= f || off > f && off != h.dataAt {
		return
	}
	h.mu.Lock()
	defer h.mu.Unlock()
	if off == h.dataAt {
		// The header goes first. Should it fail to read, the sum is left to finish.
		if h.advance(off) != nil {
			return
		}
	}
	// The frontier only moves on, so off is still at or before it.
	if f := h.frontier.Load(); end > f {
		h.take(b[f-off:])
	}
}

// take hashes the bytes that follow the frontier.
func (h *fileHash) take(b []byte) {
	h.sum.Write(b)
	h.frontier.Add(int64(len(b)))
}

// advance reads the file from the frontier up to end.
func (h *fileHash) advance(end int64) error {
	for h.frontier.Load() < end {
		if err := h.step(end); err != nil {
			return err
		}
	}
	return nil
}

// step reads one block from the frontier on.
func (h *fileHash) step(end int64) error {
	f := h.frontier.Load()
	if f >= end {
		return nil
	}
	if h.buf == nil {
		h.buf = make([]byte, readBytes)
	}
	b := h.buf[:min(readBytes, end-f)]
	if err := h.src.fill(b, f); err != nil {
		return err
	}
	h.take(b)
	return nil
}

// finish hashes what is left and returns the sum in hexadecimal. Between blocks it lets other readers
// go on.
func (h *fileHash) finish() (string, error) {
	for h.frontier.Load() < h.src.sizeBytes {
		h.mu.Lock()
		err := h.step(h.src.sizeBytes)
		h.mu.Unlock()
		if err != nil {
			return "", err
		}
	}
	h.mu.Lock()
	defer h.mu.Unlock()
	h.buf = nil
	return hex.EncodeToString(h.sum.Sum(nil)), nil
}

// SHA256 returns the SHA-256 of the whole file in hexadecimal. Bytes that reads of any channel passed
// over in order, from the start of the samples on, are hashed already and not read again: after a
// pass over one channel only what lies behind the samples is left. A pass that begins further in than
// anything read before does not count, and the file is then read once more here.
func (t *Take) SHA256() (string, error) { return t.hash.finish() }
