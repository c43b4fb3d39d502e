package status

import "errors"

// A Code is an exit status.
type Code int

const (
	Done        Code = 0
	NotFinished Code = 1   // a missing file, the disk, an internal fault
	WrongUsage  Code = 2   // the command line is wrong
	WrongData   Code = 3   // the data are wrong, or a warning counts as an error
	TooBig      Code = 4   // too big for the limits given
	Interrupted Code = 130 // by the user (SIGINT)
	Terminated  Code = 143 // by the system (SIGTERM)
)

// An Error is an error with an exit status and ways out.
type Error struct {
	Code  Code
	Err   error
	Hints []string
}

func (e *Error) Error() string { return e.Err.Error() }

// Unwrap returns the error that was given its status.
func (e *Error) Unwrap() error { return e.Err }

// With returns err with its status and hints.
func With(code Code, err error, hints ...string) error {
	return &Error{code, err, hints}
}

// Usage returns err as a fault of the command line.
func Usage(err error, hints ...string) error {
	return With(WrongUsage, err, hints...)
}

// Of returns the exit status of err and the hints that were given with it.
func Of(err error) (Code, []string) {
	if err == nil {
		return Done, nil
	}
	if e, ok := errors.AsType[*Error](err); ok {
		return e.Code, e.Hints
	}
	return NotFinished, nil
}
