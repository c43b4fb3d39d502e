package pages

import (
	"unsafe"

	"golang.org/x/sys/unix"
)

// advise asks for large pages. A refusal costs time only, so it is not looked at.
func advise(b []byte) {
	// madvise takes whole pages: leave out the broken ones at both ends.
	page := uintptr(unix.Getpagesize())
	first := -uintptr(unsafe.Pointer(unsafe.SliceData(b))) & (page - 1)
	if n := uintptr(len(b)); first < n {
		_ = unix.Madvise(b[first:first+(n-first)&^(page-1)], unix.MADV_HUGEPAGE)
	}
}
