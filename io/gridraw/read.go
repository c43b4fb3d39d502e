package gridraw

import (
	"encoding/binary"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"sync"

	"isofacet/grid"
)

// ReadOptions bounds what a reader takes. The zero value will do.
type ReadOptions struct {
	// LimitBytes bounds the values in memory, 8 bytes a node; 0 means 2 GiB.
	LimitBytes int64
	// Workers is how many goroutines convert; 0 means one per CPU.
	Workers int
}

const defaultLimit = 2 << 30

// PairError says that data and description do not belong together.
type PairError struct {
	Data     string // path of the data file
	Seen     string
	Expected string
}

func (e *PairError) Error() string {
	return fmt.Sprintf("%s: %s: expected %s", e.Data, e.Seen, e.Expected)
}

// Read reads the data file path and its description path.json.
//
// It returns a *PairError if one of the two is missing, or if size or checksum of the data are not the described ones; a *DescriptionError or one
// that wraps grid.ErrSpec for a description that is wrong by itself; one that wraps grid.ErrTooBig beyond the limit; or one of the system.
func Read(path string, opt ReadOptions) (*grid.Grid, error) {
	side := path + ".json"
	text, err := readSmall(side)
	_, dataErr := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist) && dataErr == nil:
		return nil, &PairError{Data: path, Seen: "no " + filepath.Base(side) + " beside it", Expected: "data and description"}
	case err == nil && errors.Is(dataErr, fs.ErrNotExist):
		return nil, &PairError{Data: path, Seen: "missing, with " + filepath.Base(side) + " there", Expected: "data and description"}
	case err != nil:
		return nil, err
	}
	h, err := readDescription(side, text)
	if err != nil {
		return nil, err
	}
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	info, err := file.Stat()
	if err != nil {
		return nil, err
	}
	if info.Size() != h.bytes {
		return nil, &PairError{Data: path, Seen: fmt.Sprintf("%d bytes", info.Size()), Expected: fmt.Sprintf("the %d that %s describes", h.bytes, filepath.Base(side))}
	}
	g, err := decode(file, h, opt, int(h.bytes)/h.typ.Bytes())
	if err != nil {
		var pe *PairError
		if errors.As(err, &pe) {
			pe.Data = path
			return nil, err
		}
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return g, nil
}

// Decode reads data from r as a description says; name stands for the description in errors. It is for data that come through a pipe.
func Decode(r io.Reader, name string, text []byte, opt ReadOptions) (*grid.Grid, error) {
	h, err := readDescription(name, text)
	if err != nil {
		return nil, err
	}
	// A pipe may hold less than its description says: memory grows with what has come.
	g, err := decode(r, h, opt, 1<<20)
	if err != nil {
		return nil, err
	}
	if n, _ := io.ReadFull(r, make([]byte, 1)); n > 0 {
		return nil, &PairError{Data: h.data, Seen: "more data", Expected: fmt.Sprintf("the %d bytes that %s describes", h.bytes, name)}
	}
	return g, nil
}

// readSmall reads a description; 1 MiB is a thousand times what one takes.
func readSmall(path string) ([]byte, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	const most = 1 << 20
	text, err := io.ReadAll(io.LimitReader(file, most+1))
	if err == nil && len(text) > most {
		return nil, &DescriptionError{Name: path, Seen: "more than 1 MiB", Expected: "the description of a raw raster"}
	}
	return text, err
}

// decode reads batches of blocks, one a worker, and converts them side by side. It begins with memory for so many nodes.
func decode(r io.Reader, h *header, opt ReadOptions, nodes int) (*grid.Grid, error) {
	if opt.LimitBytes <= 0 {
		opt.LimitBytes = defaultLimit
	}
	if err := h.spec.Check(opt.LimitBytes); err != nil {
		return nil, err
	}
	workers := opt.Workers
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	size := h.typ.Bytes()
	n := h.spec.NumNodes()
	values := make([]float64, 0, min(n, nodes))
	blocks := min(workers, (n-1)/blockNodes+1)
	buf := make([]byte, blocks*blockNodes*size)
	infinite := make([]int, blocks) // in each block, the first infinite value, or -1
	crc := uint32(0)
	for len(values) < n {
		now := min(blocks*blockNodes, n-len(values))
		part := buf[:now*size]
		if _, err := io.ReadFull(r, part); err != nil {
			if err == io.EOF || err == io.ErrUnexpectedEOF {
				return nil, &PairError{Data: h.data, Seen: "cut short", Expected: fmt.Sprintf("%d bytes", h.bytes)}
			}
			return nil, err
		}
		crc = crc32.Update(crc, castagnoli, part)
		first := len(values)
		values = grow(values, now, n)
		var wg sync.WaitGroup
		for b := 0; b*blockNodes < now; b++ {
			from, to := b*blockNodes, min((b+1)*blockNodes, now)
			convert := func() { infinite[b] = h.convert(values[first+from:first+to], part[from*size:to*size]) }
			if blocks == 1 {
				convert()
			} else {
				wg.Go(convert)
			}
		}
		wg.Wait()
		for b := 0; b*blockNodes < now; b++ {
			if infinite[b] >= 0 {
				i := first + b*blockNodes + infinite[b]
				return nil, &ValueError{Row: i / h.spec.Cols, Col: i % h.spec.Cols, Seen: fmt.Sprint(values[i]), Expected: "a finite value"}
			}
		}
	}
	if crc != h.crc {
		return nil, &PairError{Data: h.data, Seen: fmt.Sprintf("CRC-32C %08x", crc), Expected: fmt.Sprintf("the described %08x: data and description of one run", h.crc)}
	}
	return &grid.Grid{Spec: h.spec, Labels: h.labels, Values: values}, nil
}

// grow lengthens values by k, never beyond a capacity of n.
func grow(values []float64, k, n int) []float64 {
	if len(values)+k <= cap(values) {
		return values[:len(values)+k]
	}
	larger := make([]float64, len(values)+k, min(n, 4*(len(values)+k)))
	copy(larger, values)
	return larger
}

// convert fills values from bytes. It returns which value is the first that is infinite, or -1.
func (h *header) convert(values []float64, b []byte) (infinite int) {
	noData := h.noData
	nan := math.NaN()
	infinite = -1
	for i := range values {
		var v float64
		if h.typ == Float32 {
			v = float64(math.Float32frombits(binary.LittleEndian.Uint32(b[4*i:])))
		} else {
			v = math.Float64frombits(binary.LittleEndian.Uint64(b[8*i:]))
		}
		if v-v != 0 { // NaN or infinite
			if v == v && infinite < 0 {
				infinite = i
			} else if v != v {
				v = nan
			}
		} else if v == noData {
			v = nan
		}
		values[i] = v
	}
	return infinite
}
