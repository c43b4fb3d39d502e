package readings

import "strings"

// A Role is what a column holds.
type Role uint8

// The roles. X, Y and Z are numbers and make the reading; the roles for which Kept
// is true are text that stays with it; the others belong to work that Read does not
// do, and declaring one of them is an error.
const (
	NoRole Role = iota // a column that is skipped
	ID
	X
	Y
	Z
	Code
	Line
	Depth
	MeasuringPoint
	Product
	ProductDepth
	SpecificGravity
	Ground
	ScreenTop
	ScreenBottom
	Zone
	Status
	Time
	Round
	ValidFrom
	Sigma
	Class
	Qualifier
	Limit
	roleCount
)

var roleNames = [roleCount]string{
	NoRole: "-", ID: "id", X: "x", Y: "y", Z: "z", Code: "code", Line: "line", Depth: "depth",
	MeasuringPoint: "measuring-point", Product: "product", ProductDepth: "product-depth",
	SpecificGravity: "specific-gravity", Ground: "ground", ScreenTop: "screen-top",
	ScreenBottom: "screen-bottom", Zone: "zone", Status: "status", Time: "time", Round: "round",
	ValidFrom: "valid-from", Sigma: "sigma", Class: "class", Qualifier: "qualifier", Limit: "limit",
}

// otherWords are the further words for a role in a list of columns.
var otherWords = map[string]Role{
	"easting": X, "northing": Y, "height": Z, "elevation": Z, "head": Z, "top-of-casing": MeasuringPoint,
}

// String returns the word of the role as a list of columns writes it.
func (r Role) String() string {
	if r < roleCount {
		return roleNames[r]
	}
	return "unknown role"
}

// Kept reports whether the text of the role stays with every reading, for selection
// and for output.
func (r Role) Kept() bool { return r < roleCount && textSlot[r] >= 0 }

// keptRoles are the text roles in the order of their slots.
var keptRoles = [...]Role{ID, Code, Line, Zone, Status, Time, Round, Class, Qualifier, Sigma}

const textSlots = len(keptRoles)

// textSlot is the place of a role among keptRoles, -1 for one that is not kept.
var textSlot = func() (slot [roleCount]int8) {
	for r := range slot {
		slot[r] = -1
	}
	for i, r := range keptRoles {
		slot[r] = int8(i)
	}
	return slot
}()

// Roles returns every role in the order of the documentation, NoRole left out.
func Roles() []Role {
	all := make([]Role, 0, roleCount-1)
	for r := ID; r < roleCount; r++ {
		all = append(all, r)
	}
	return all
}

// ParseRole returns the role that a word of a list of columns stands for: its own
// name or one of easting, northing, height, elevation, head, top-of-casing. Case
// does not matter.
func ParseRole(word string) (Role, bool) {
	w := strings.ToLower(strings.TrimSpace(word))
	for r := ID; r < roleCount; r++ {
		if roleNames[r] == w {
			return r, true
		}
	}
	r, ok := otherWords[w]
	return r, ok
}
