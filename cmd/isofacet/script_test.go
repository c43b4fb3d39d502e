package main

import (
	"encoding/json"
	"errors"
	"os"
	"os/exec"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"isofacet/cmd/internal/record"
)

// TestMain lets the test binary stand in for the program: scripts and tests start
// it under the program's name.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"isofacet": main})
}

// TestScripts runs the scripts of testdata/script, one a behaviour. Beside the
// usual commands they have
//
//	code N isofacet ...    run the program, which must end with status N
//	rerun FILE             run the command line of a run record, through a shell
//	stable FILE            print the stable part of a run record
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		UpdateScripts:       os.Getenv("UPDATE_SCRIPTS") != "",
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){
			"code":   code,
			"rerun":  rerun,
			"stable": stable,
		},
	})
}

func code(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: code N program [args...]")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	if err := ts.Exec(args[1], args[2:]...); err != nil {
		exit, ok := errors.AsType[*exec.ExitError](err)
		if !ok {
			ts.Fatalf("%v", err)
		}
		got = exit.ExitCode()
	}
	if got != want {
		ts.Fatalf("exit status %d, want %d", got, want)
	}
}

func rerun(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 1 {
		ts.Fatalf("usage: rerun FILE")
	}
	var rec record.Record
	ts.Check(json.Unmarshal([]byte(ts.ReadFile(args[0])), &rec))
	ts.Check(ts.Exec("sh", "-e", "-c", rec.Stable.Rerun))
}

func stable(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 1 {
		ts.Fatalf("usage: stable FILE")
	}
	var rec struct{ Stable json.RawMessage }
	ts.Check(json.Unmarshal([]byte(ts.ReadFile(args[0])), &rec))
	_, err := ts.Stdout().Write(rec.Stable)
	ts.Check(err)
}
