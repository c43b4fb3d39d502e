// Package memory finds out how much memory a run may use and refuses work that
// would not fit.
//
//	limit := memory.Limit(0)                       // three quarters of what is free
//	err := limit.Check("grid of 4000 x 4000 nodes", 128e6)
//
// # Conventions
//
// Sizes are bytes. What is free is the smaller of what the system calls
// available and what the control group that the program runs in (a container, a
// batch queue) leaves.
package memory
