package house

import (
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// Every environment variable of ours is explained to contributors.
func TestVariablesAreExplained(t *testing.T) {
	top := root(t)
	page, err := os.ReadFile(filepath.Join(top, "DEVELOPERS.md"))
	if err != nil {
		t.Fatal(err)
	}
	ours := regexp.MustCompile(`\bISOFACET_[A-Z][A-Z_]*[A-Z]\b`)
	where := map[string]string{}
	for _, p := range packages(t) {
		for _, list := range [][]string{p.GoFiles, p.TestGoFiles, p.XTestGoFiles} {
			for _, name := range list {
				text, err := os.ReadFile(filepath.Join(p.Dir, name))
				if err != nil {
					t.Fatal(err)
				}
				for _, v := range ours.FindAllString(string(text), -1) {
					where[v] = p.ImportPath + "/" + name
				}
			}
		}
	}
	if where["ISOFACET_REFERENCE"] == "" {
		t.Error("the search does not find ISOFACET_REFERENCE")
	}
	for v, file := range where {
		if !strings.Contains(string(page), "`"+v+"`") {
			t.Errorf("%s of %s is not in DEVELOPERS.md", v, file)
		}
	}
}

// The top of the repository holds the rooms of the house and what a
// repository needs, nothing else.
func TestTopLevel(t *testing.T) {
	top := root(t)
	if _, err := os.Stat(filepath.Join(top, ".git")); err != nil {
		t.Skip("not a git clone: what belongs to the repository is not known")
	}
	cmd := exec.Command("git", "ls-files")
	cmd.Dir = top
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	allowed := regexp.MustCompile(`^(README\.md|DEVELOPERS\.md|LICENSE|NOTICE|CHANGELOG\.md|go\.mod|go\.sum|cmd|triangulate|interp|grid|contour|io|samples|\..*)$`)
	seen := map[string]bool{}
	for path := range strings.FieldsSeq(string(out)) {
		name, _, _ := strings.Cut(path, "/")
		if !seen[name] && !allowed.MatchString(name) {
			t.Errorf("%s stands at the top, though in no room of the house", name)
		}
		seen[name] = true
	}
	if !seen["README.md"] {
		t.Error("git lists no README.md")
	}
}
