package readings

import "unsafe"

// texts are many short texts in one piece of memory: their bytes one behind the
// other, and four bytes each for where they end.
//
// Ends are 32 bits wide, counted from the start of their page of 2^16 texts: a text
// has at most maxText bytes, so a page has less than 2^32. The texts of a block
// need no pages, since a chunk is shorter than that.
type texts struct {
	data  []byte
	ends  []uint32
	pages []int // where the pages start in data; nil in a block
}

const (
	pageBits = 16
	pageMask = 1<<pageBits - 1
	// maxText is the longest id, code and so on, in bytes. Nothing that is written
	// beside a point comes near; a column of long remarks is skipped.
	maxText = 1024
)

func (t *texts) len() int { return len(t.ends) }

// at returns text i without copying it: it keeps all the others in memory.
func (t *texts) at(i int) string {
	from, to := t.bounds(i)
	if from == to {
		return ""
	}
	// The bytes never change once t is in the hands of a caller.
	return unsafe.String(&t.data[from], to-from)
}

func (t *texts) bounds(i int) (from, to int) {
	page := 0
	if t.pages != nil {
		page = t.pages[i>>pageBits]
	}
	from = page
	if i > 0 && (t.pages == nil || i&pageMask != 0) {
		from += int(t.ends[i-1])
	}
	return from, page + int(t.ends[i])
}

// add appends a text to the texts of a block.
func (t *texts) add(text []byte) {
	t.data = append(t.data, text...)
	t.ends = append(t.ends, uint32(len(t.data)))
}

// addFrom appends the text b[from:to]. Most are short: these are copied as the 16
// bytes that they begin, which costs less than asking how many to copy.
func (t *texts) addFrom(b []byte, from, to int) {
	n := len(t.data)
	if to-from <= 16 && from+16 <= len(b) && n+16 <= cap(t.data) {
		*(*[16]byte)(t.data[n : n+16]) = *(*[16]byte)(b[from : from+16])
		t.data = t.data[:n+to-from]
	} else {
		t.data = append(t.data, b[from:to]...)
	}
	t.ends = append(t.ends, uint32(len(t.data)))
}

// remove takes texts out of the texts of a block: those with the numbers gone,
// which rise and count from base.
func (t *texts) remove(gone []int32, base int) {
	if t.len() == 0 {
		return
	}
	n, size, from := 0, 0, 0
	for i, end := range t.ends {
		to := int(end)
		if len(gone) > 0 && int(gone[0]) == base+i {
			gone = gone[1:]
		} else {
			size += copy(t.data[size:], t.data[from:to])
			t.ends[n] = uint32(size)
			n++
		}
		from = to
	}
	t.data, t.ends = t.data[:size], t.ends[:n]
}

// join puts the texts of blocks together: those of blocks[k] become the texts from
// start[k] to start[k+1], empty ones if it has none. each runs a function for every
// k, in any order. The blocks lose theirs.
func (t *texts) join(blocks []*texts, start []int, each func(f func(k int))) {
	data := make([]int, len(blocks)) // where the bytes of each block begin
	n, size := start[len(blocks)], 0
	t.pages = make([]int, (n+pageMask)>>pageBits)
	for k, b := range blocks {
		data[k] = size
		for page := (start[k] + pageMask) >> pageBits; page<<pageBits < start[k+1]; page++ {
			t.pages[page] = size
			if first := page<<pageBits - start[k]; first > 0 && b.len() > 0 {
				t.pages[page] += int(b.ends[first-1])
			}
		}
		size += len(b.data)
	}
	t.data = make([]byte, size)
	t.ends = make([]uint32, n)
	each(func(k int) {
		b := blocks[k]
		copy(t.data[data[k]:], b.data)
		for i := start[k]; i < start[k+1]; i++ {
			end := data[k]
			if b.len() > 0 {
				end += int(b.ends[i-start[k]])
			}
			t.ends[i] = uint32(end - t.pages[i>>pageBits])
		}
		*b = texts{}
	})
}
