package readings

import "unsafe"

// texts are many short texts in one piece of memory: their bytes one behind the
// other, and four bytes each for where they end.
//
// Ends are 32 bits wide, counted from the start of their page of 2^16 texts: a
// text has at most maxText bytes, so a page has less than 2^32. The texts of a
// block need no pages, since a chunk is shorter than that.
type texts struct {
	data  []byte
	ends  []uint32
	pages []int // where the pages start in data; nil in a block
}

const (
	pageBits = 16
	pageMask = 1<<pageBits - 1
	// maxText is the longest id, code and so on, in bytes. Nothing that is
	// written beside a point comes near; a column of long remarks is skipped.
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

// grow makes room for n texts of size bytes together.
func (t *texts) grow(n, size int) {
	t.data = make([]byte, 0, size)
	t.ends = make([]uint32, 0, n)
	t.pages = make([]int, 0, n>>pageBits+1)
}

// push appends a text to texts that grow made room for.
func (t *texts) push(text string) {
	if len(t.ends)&pageMask == 0 {
		t.pages = append(t.pages, len(t.data))
	}
	t.data = append(t.data, text...)
	t.ends = append(t.ends, uint32(len(t.data)-t.pages[len(t.pages)-1]))
}

// pushBlock appends the texts of a block, or n empty ones if it has none.
func (t *texts) pushBlock(o *texts, n int) {
	if o.len() == 0 {
		for range n {
			t.push("")
		}
		return
	}
	from := 0
	for ends := o.ends; len(ends) > 0; {
		if len(t.ends)&pageMask == 0 {
			t.pages = append(t.pages, len(t.data))
		}
		k := min(len(ends), 1<<pageBits-len(t.ends)&pageMask)
		shift := len(t.data) - t.pages[len(t.pages)-1] - from
		for _, end := range ends[:k] {
			t.ends = append(t.ends, uint32(int(end)+shift))
		}
		to := int(ends[k-1])
		t.data = append(t.data, o.data[from:to]...)
		from, ends = to, ends[k:]
	}
}
