package option

import (
	"path"
	"strings"
)

// A RolePattern keeps or leaves out readings by the text in one of their
// columns: a shell pattern with *, ? and [ ].
type RolePattern struct {
	Role    string
	Pattern string
}

// RolePatterns collects ROLE=PATTERN arguments.
type RolePatterns struct {
	// Roles are the columns that a pattern may look at.
	Roles []string
	List  []RolePattern
}

// Set reads ROLE=PATTERN.
func (r *RolePatterns) Set(text string) error {
	role, pattern, ok := strings.Cut(text, "=")
	if !ok || pattern == "" || !contains(r.Roles, role) {
		return &BadValue{text, "ROLE=PATTERN such as code=GRD*, with one of the roles " + strings.Join(r.Roles, ", ")}
	}
	if _, err := path.Match(pattern, ""); err != nil {
		return &BadValue{text, "a shell pattern behind the equals sign, with every [ closed by a ]"}
	}
	r.List = append(r.List, RolePattern{role, pattern})
	return nil
}

// String writes the patterns as they are typed, separated by blanks.
func (r *RolePatterns) String() string {
	var words []string
	for _, p := range r.List {
		words = append(words, p.Role+"="+p.Pattern)
	}
	return strings.Join(words, " ")
}

// Type names the form in help pages.
func (r *RolePatterns) Type() string { return "ROLE=PATTERN" }
