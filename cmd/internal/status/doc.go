// Package status names the exit statuses of our programs, which scripts rely on.
//
// An error carries its status in its type: Of finds the outermost *Error in a
// chain and takes any other error as "could not finish". Commands wrap the
// errors of the packages below them where they know better.
//
//	if len(args) == 0 {
//		return status.Usage(errors.New("no file named"), "name one, or - for standard input")
//	}
package status
