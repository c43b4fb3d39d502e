package record

import (
	"crypto/sha256"
	"encoding/hex"
	"hash"
	"io"
)

// Reader returns r hashed into f: when r is read to its end, f has the size and
// the hash. A file that is read again is counted again.
func (f *File) Reader(r io.ReadCloser) io.ReadCloser {
	f.Bytes = 0
	return &hashedReader{r, f, sha256.New()}
}

type hashedReader struct {
	io.ReadCloser
	file *File
	sum  hash.Hash
}

func (h *hashedReader) Read(p []byte) (int, error) {
	n, err := h.ReadCloser.Read(p)
	h.sum.Write(p[:n])
	h.file.Bytes += int64(n)
	if err == io.EOF {
		h.file.SHA256 = hex.EncodeToString(h.sum.Sum(nil))
	}
	return n, err
}

// Writer returns w with everything that is written to it hashed into f; finish
// gives f its hash.
func (f *File) Writer(w io.Writer) (hashed io.Writer, finish func()) {
	h := &hashedWriter{w, f, sha256.New()}
	return h, func() { f.SHA256 = hex.EncodeToString(h.sum.Sum(nil)) }
}

type hashedWriter struct {
	io.Writer
	file *File
	sum  hash.Hash
}

func (h *hashedWriter) Write(p []byte) (int, error) {
	n, err := h.Writer.Write(p)
	h.sum.Write(p[:n])
	h.file.Bytes += int64(n)
	return n, err
}
