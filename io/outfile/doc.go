// Package outfile writes outputs that appear whole or not at all.
//
// In: a path, and bytes. Out: the file under that path, after Commit and not before; until then, and for ever if the
// program ends first, whatever was there stays as it was.
//
//	f, err := outfile.Create("surface.csv", outfile.Options{Hash: true})
//	if err != nil {
//		return err
//	}
//	defer f.Abort() // does nothing after Commit
//	if err := write(f); err != nil {
//		return err
//	}
//	return f.Commit()
//
// # How
//
// Bytes go to a temporary file beside the target, in the same folder because only within one file system is a
// rename atomic:
//
//	surface.csv  ->  .surface.csv.HOST-PID-N.part
//
// HOST is a checksum of the machine's name, PID the process and N a counter. Commit writes what is buffered, asks the system to
// put the file on the disk, gives it the permissions of the file that it replaces (0666 less the umask if there is
// none), renames it over the target and asks for the folder to be put on the disk too. A full disk therefore shows before the old
// file is touched. A symbolic link is followed: the file that it names is replaced, the link stays.
//
// Several files that belong together make a Set. All are written and on the disk before the first is renamed; those with
// Options.RenameLast (the data files) come last, so that data never stand beside a description that is missing
// because the run ended early. The renames of a set are several steps for the system: a power cut between two
// leaves the first ones new and the others old, which readers must recognise (see package gridraw).
//
// # Leftovers
//
// RemoveTemporaries removes every temporary file of the process; a program calls it when a signal ends it. After a kill -9 or
// a power cut the temporary file stays. The next run that writes the same target removes it if its HOST is this machine and
// no process PID lives; a temporary file of another machine on a shared disk, or of a live process, is never touched.
//
// # Standard output
//
// The path "-" is standard output: bytes are buffered and passed through, and Abort cannot take back what has gone.
// When the reader of a pipe has left, writing gives an error for which IsClosedPipe is true: the quiet end of the run. A program
// must ignore SIGPIPE for that (signal.Ignore(syscall.SIGPIPE)); otherwise Go ends it on the first such write.
//
// # Guarantees
//
// Refused with a *TargetError: a folder, a device, a socket, a named pipe, an empty path, a target that is already being
// written. Not checked: that the output is no input; use SameFile, which looks through links.
//
// # Cost
//
// A buffer of 1 MiB a file; larger writes go past it. The SHA-256 of Options.Hash is computed while writing.
package outfile
