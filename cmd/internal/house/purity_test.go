package house

import (
	"go/ast"
	"go/parser"
	"go/token"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// worldly are packages whose very import below io is a mistake: they open
// files, read the environment, print, exit or ask the network.
var worldly = []string{
	"os", "os/exec", "os/signal", "os/user", "log", "log/slog", "flag", "net", "net/http",
	"syscall", "plugin", "io/ioutil", "path/filepath", "testing",
	"github.com/spf13/cobra", "github.com/spf13/pflag", "github.com/vbauerster/mpb/v8", "golang.org/x/term", "golang.org/x/sys/unix",
}

// sameBits are the functions of package math that are exact, or correctly
// rounded, on every processor. Any other (Atan2, Sin, Exp, Log, Hypot, Pow...)
// is written in assembly on some and fused on others.
var sameBits = []string{
	"Abs", "Ceil", "Copysign", "Dim", "FMA", "Float32bits", "Float32frombits", "Float64bits", "Float64frombits",
	"Floor", "Frexp", "Ilogb", "Inf", "IsInf", "IsNaN", "Ldexp", "Logb", "Max", "Min", "Mod", "Modf", "NaN",
	"Nextafter", "Nextafter32", "Remainder", "Round", "RoundToEven", "Signbit", "Sqrt", "Trunc",
}

func TestPureBelowIO(t *testing.T) {
	seen := 0
	for _, p := range packages(t) {
		if r, ok := rank(p.ImportPath); !ok || r < 0 || r >= ioRank {
			continue
		}
		for _, name := range p.GoFiles {
			seen++
			for _, wrong := range impurities(t, filepath.Join(p.Dir, name), nil) {
				t.Error(wrong)
			}
		}
	}
	if seen == 0 {
		t.Error("no file below io was read")
	}
}

// impurities lists what a file below io must not do. src is nil to read the
// file itself.
func impurities(t *testing.T, path string, src any) []string {
	t.Helper()
	fset := token.NewFileSet()
	file, err := parser.ParseFile(fset, path, src, parser.SkipObjectResolution)
	if err != nil {
		t.Fatal(err)
	}
	var wrong []string
	say := func(n ast.Node, what string) { wrong = append(wrong, fset.Position(n.Pos()).String()+": "+what) }
	for _, im := range file.Imports {
		path, _ := strconv.Unquote(im.Path.Value)
		if slices.Contains(worldly, path) {
			say(im, "imports "+path+" below io")
		}
		if path == "math" && im.Name != nil {
			say(im, "renames package math, which hides what is called")
		}
	}
	ast.Inspect(file, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.CallExpr:
			if id, ok := n.Fun.(*ast.Ident); ok && (id.Name == "print" || id.Name == "println") {
				say(n, "prints below io")
			}
		case *ast.SelectorExpr:
			pkg, ok := n.X.(*ast.Ident)
			if !ok {
				return true
			}
			if pkg.Name == "fmt" && strings.HasPrefix(n.Sel.Name, "Print") {
				say(n, "prints below io")
			}
			if pkg.Name == "math" && !constant(n.Sel.Name) && !slices.Contains(sameBits, n.Sel.Name) {
				say(n, "calls math."+n.Sel.Name+", whose last bits depend on the processor")
			}
		}
		return true
	})
	return wrong
}

// constant reports whether a name of package math is a constant's.
func constant(name string) bool {
	switch name {
	case "E", "Pi", "Phi", "Sqrt2", "SqrtE", "SqrtPi", "SqrtPhi", "Ln2", "Log2E", "Ln10", "Log10E",
		"SmallestNonzeroFloat32", "SmallestNonzeroFloat64":
		return true
	}
	for _, kind := range []string{"Int", "Int8", "Int16", "Int32", "Int64", "Uint", "Uint8", "Uint16", "Uint32", "Uint64", "Float32", "Float64"} {
		if name == "Max"+kind || name == "Min"+kind {
			return true
		}
	}
	return false
}

func TestPurityRule(t *testing.T) {
	for _, c := range []struct {
		src   string
		count int
	}{
		{"import \"math\"\nvar x = math.Sqrt(2) + math.MaxInt32 + math.Pi", 0},
		{"import \"math\"\nvar x = math.Hypot(3, 4)", 1},
		{"import m \"math\"\nvar x = m.Sqrt(2)", 1},
		{"import \"fmt\"\nvar err = fmt.Errorf(\"x\")", 0},
		{"import \"fmt\"\nfunc f() { fmt.Println() }", 1},
		{"func f() { println() }", 1},
		{"import \"os\"\nvar x = os.Args", 1},
	} {
		if got := impurities(t, "a.go", "package a\n"+c.src); len(got) != c.count {
			t.Errorf("%q: %q, want %d", c.src, got, c.count)
		}
	}
}

func TestFilesAreShaped(t *testing.T) {
	top := root(t)
	for _, p := range packages(t) {
		rel, err := filepath.Rel(top, p.Dir)
		if err != nil {
			t.Fatal(err)
		}
		if rel == "io" {
			t.Error("io itself must have no Go file")
		}
		if !slices.Contains(p.GoFiles, "doc.go") {
			t.Errorf("%s has no doc.go", p.ImportPath)
		}
		for _, name := range p.GoFiles {
			text, err := os.ReadFile(filepath.Join(p.Dir, name))
			if err != nil {
				t.Fatal(err)
			}
			if lines := strings.Count(string(text), "\n"); lines > 700 {
				t.Errorf("%s/%s has %d lines, want at most 700", rel, name, lines)
			}
		}
	}
}
