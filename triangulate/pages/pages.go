package pages

import "unsafe"

// least is the size in bytes from which asking pays: a few large pages of 2 MiB.
const least = 8 << 20

// Make returns a zeroed slice of n values of a type without pointers.
func Make[T any](n int) []T {
	s := make([]T, n)
	if size := uintptr(n) * unsafe.Sizeof(*new(T)); size >= least {
		advise(unsafe.Slice((*byte)(unsafe.Pointer(unsafe.SliceData(s))), size))
	}
	return s
}
