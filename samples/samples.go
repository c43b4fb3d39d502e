package samples

import "embed"

//go:generate go run ./internal/write

// FS holds every file listed in Files, read-only.
//
//go:embed gravel-pit landfill
var FS embed.FS

// Names of the files in FS.
const (
	// GravelPitShots is the field book: point, northing, easting, elevation, code.
	GravelPitShots = "gravel-pit/shots.csv"
	// GravelPitDecisions says which shots to leave out and why: id, decision, reason.
	GravelPitDecisions = "gravel-pit/decisions.csv"
	// GravelPitChecks lists places with their true elevation and the kind of
	// ground there: check, northing, easting, elevation, where.
	GravelPitChecks = "gravel-pit/checks.csv"
	// GravelPitAnswers holds true volumes, areas and planes, the blunders and
	// the shots stored twice, as JSON.
	GravelPitAnswers = "gravel-pit/answers.json"
	// GravelPitBreaklines are toes, crests and road edges, whose vertices are
	// shots of the field book: line, x, y, z.
	GravelPitBreaklines = "gravel-pit/lines/breaklines.csv"
	// GravelPitBoundary is the closed, not convex limit of the job, without
	// heights: line, x, y, z.
	GravelPitBoundary = "gravel-pit/lines/boundary.csv"
	// GravelPitPond is the closed edge of the water: line, x, y, z.
	GravelPitPond = "gravel-pit/lines/pond.csv"
	// GravelPitStockpileToe is the closed toe of the stockpile: line, x, y, z.
	GravelPitStockpileToe = "gravel-pit/lines/stockpile-toe.csv"

	// LandfillWells is the well table: well, easting, northing, elevations of
	// measuring point, ground, screen top and bottom, zone, and the specific
	// gravity of the product where some floats.
	LandfillWells = "landfill/wells.csv"
	// LandfillGauging is the gauging table: round, time, well, depths to
	// product and water below the measuring point, status.
	LandfillGauging = "landfill/gauging.csv"
	// LandfillHeads are the reduced heads of the first round in the shallow
	// zone, ready to map: id, easting, northing, head.
	LandfillHeads = "landfill/heads-2024-q1.csv"
	// LandfillTrueHeads are the heads behind all rounds: round, well, zone, head.
	LandfillTrueHeads = "landfill/true-heads.csv"
	// LandfillAnswers holds the planes and mounds that make the true heads, as JSON.
	LandfillAnswers = "landfill/answers.json"
	// LandfillJob makes head maps of all rounds: a job file.
	LandfillJob = "landfill/heads.toml"
)

// A File is one sample file.
type File struct {
	Name  string // its path in FS
	About string // one line for a list
}

// Files lists all files, first those to try a command on.
var Files = []File{
	{GravelPitShots, "gravel pit: 1552 shots, northing before easting, with codes"},
	{GravelPitDecisions, "gravel pit: the two shots to leave out, and why"},
	{GravelPitChecks, "gravel pit: 38 places with their true elevation"},
	{LandfillHeads, "landfill: heads of the shallow wells in the first round"},
	{LandfillWells, "landfill: the well table"},
	{LandfillGauging, "landfill: five rounds of depths to water"},
	{GravelPitBreaklines, "gravel pit: toes, crests and road edges"},
	{GravelPitBoundary, "gravel pit: the limit of the job"},
	{GravelPitPond, "gravel pit: the edge of the water"},
	{GravelPitStockpileToe, "gravel pit: the toe of the stockpile"},
	{GravelPitAnswers, "gravel pit: what is true"},
	{LandfillTrueHeads, "landfill: the true heads"},
	{LandfillAnswers, "landfill: what is true"},
	{LandfillJob, "landfill: a job that maps all rounds"},
}
