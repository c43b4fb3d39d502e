// Package pages makes large slices that the system may back with large memory
// pages.
//
// A slice of a hundred megabytes is touched for the first time page by page. On
// ordinary pages of 4 KiB that can cost more than what is done with it: some 2 to
// 4 µs a page inside a virtual machine. Where the system gives large pages on
// request (Linux with transparent_hugepage = madvise), Make asks for them;
// elsewhere it is make. The contents never differ.
//
//	rec := pages.Make[record](n)
package pages
