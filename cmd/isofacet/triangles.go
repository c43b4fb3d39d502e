package main

import (
	"slices"

	"github.com/spf13/cobra"

	"isofacet/cmd/internal/advice"
	"isofacet/cmd/internal/manual"
	"isofacet/interp"
	"isofacet/triangulate"
)

const trianglesLong = `Writes the triangulated surface itself: what every other product is read off.

Triangles come in the order of their corners, each with its smallest corner in x,
then y, first and the others counter-clockwise. The order does not depend on that
of the readings.

Formats by extension: .geojson and .csv. In GeoJSON a triangle is a polygon whose
positions carry the heights, with the properties triangle (its number from 1),
id_1, id_2 and id_3 (its corners' readings), slope and downhill_azimuth. In CSV
there are two tables: --out vertices=FILE has the number of each vertex, its
reading, x, y and z, and --out triangles=FILE the numbers of three vertices, slope
and azimuth. The vertices can be written as GeoJSON points too.

Slope is rise over run. The downhill azimuth is where water would run, in degrees
clockwise from grid north; a flat has none.`

const trianglesExample = `isofacet triangles sample:gravel-pit/shots.csv --out pit.geojson
isofacet triangles sample:landfill/heads-2024-q1.csv --out vertices=v.csv
isofacet triangles sample:landfill/heads-2024-q1.csv --format csv`

// newTriangles is "isofacet triangles".
func newTriangles(p *program) *cobra.Command {
	c := &trianglesCommand{program: p}
	cmd := &cobra.Command{
		Use:     "triangles [options] [FILE...]",
		Short:   "the triangulated surface itself",
		Long:    trianglesLong,
		Example: trianglesExample,
		RunE:    c.run,
	}
	fs := cmd.Flags()
	manual.Add(fs, c.reading.readingOptions()...)
	manual.Add(fs, c.writing.writingOptions([]string{partTriangles, partVertices}, []string{formatGeoJSON, formatCSV})...)
	manual.Add(fs, p.runningOptions()...)
	return cmd
}

// The parts of a triangulated surface.
const (
	partTriangles = "triangles"
	partVertices  = "vertices"
)

type trianglesCommand struct {
	*program
	reading
	writing
}

func (c *trianglesCommand) run(cmd *cobra.Command, files []string) error {
	c.begin(cmd, &c.writing)
	list, err := c.inputs(files)
	if err != nil {
		return err
	}
	named := byExtensions(map[string]string{".geojson": formatGeoJSON, ".csv": formatCSV})
	dests, err := c.destinations(partTriangles, files, named, formatGeoJSON)
	if err != nil {
		return err
	}
	out, err := c.open(cmd.Context(), &c.writing, dests, c.paths())
	if err != nil {
		return err
	}
	defer out.abort()
	l, err := c.load(cmd.Context(), &c.reading, list)
	if err != nil {
		return err
	}
	if err := l.needsTriangles(); err != nil {
		return err
	}
	c.tellSurface(l)
	c.warnOfLongOutline(l, advice.MaxEdge(advice.Spacing(l.surface.Mesh(), c.workers())))
	return c.make(list, l, out)
}

// trianglesResult is what the run record says of the surface.
type trianglesResult struct {
	Extent  extents       `json:"extent"`
	Surface surfaceCounts `json:"surface"`
}

// What ordering triangles takes in memory for each of them,
// and what vertices take beside what they have.
const (
	bytesTriangleOrder = 8
	bytesVertexOrder   = 24
)

// make orders the surface and writes it.
func (c *trianglesCommand) make(list []*input, l *loaded, out *outputs) error {
	m := l.shown().Mesh()
	need := uint64(m.NumVertices())*bytesVertex + uint64(m.NumTriangles())*bytesTriangleOrder + uint64(m.NumVertices())*bytesVertexOrder
	if err := c.announce("ordering "+counted(m.NumTriangles(), "triangle"), need); err != nil {
		return err
	}
	if err := c.settleWarnings(); err != nil {
		return err
	}
	s := c.ordered(l, out)
	slices.SortStableFunc(out.list, func(a, b *destination) int { return boolCompare(a.path == "-", b.path == "-") })
	for _, d := range out.list {
		if err := out.write(d, func(d *destination) error { return s.write(d) }); err != nil {
			return err
		}
	}
	if err := c.settleWarnings(); err != nil {
		return err
	}
	if c.rec != nil {
		c.recordReadings(list, l)
		c.rec.Stable.Result = &trianglesResult{l.extents(c.decimals), l.surfaceCounts(c.decimals)}
	}
	return out.commit()
}

// ordered is a surface in the order in which it is written.
type ordered struct {
	*trianglesCommand
	l         *loaded
	surface   *interp.Surface // what boundary and voids leave
	mesh      *triangulate.Mesh
	rank      []int32                // of every vertex, its place in (x, y) order
	vertices  []triangulate.Vertex   // in order: those that some triangle has
	numbers   []int32                // of every vertex, its row in the table of vertices, from 1
	triangles []triangulate.Triangle // in order
	readings  []int32                // of every vertex, the input that it came from; -1 for none
	xy, z     int                    // digits after the point
	slope     int
	azimuth   int
}

func (c *trianglesCommand) ordered(l *loaded, out *outputs) *ordered {
	s := &ordered{trianglesCommand: c, l: l, surface: l.shown(), mesh: l.shown().Mesh()}
	s.xy, s.z = l.digits(c.decimals)
	s.slope, s.azimuth = c.decimals.Resolve(slopeDigits), c.decimals.Resolve(azimuthDigits)
	s.number()
	s.readings = s.mesh.Inputs()
	if l.drawn.cut != nil {
		// The inputs of a surface that was cut are the vertices of the whole one, and new ones.
		whole := l.surface.Mesh().Inputs()
		for v, i := range s.readings {
			s.readings[v] = -1
			if int(i) < len(whole) {
				s.readings[v] = whole[i]
			}
		}
	}
	if slices.ContainsFunc(out.list, func(d *destination) bool { return d.part == partTriangles }) {
		s.triangles = make([]triangulate.Triangle, 0, s.mesh.NumTriangles())
		for t := range s.mesh.CanonicalTriangles(s.rank) {
			s.triangles = append(s.triangles, t)
		}
	}
	return s
}

// number orders the vertices and numbers those that some triangle has: limits may
// leave others.
func (s *ordered) number() {
	s.rank, s.numbers = make([]int32, s.mesh.NumVertices()), make([]int32, s.mesh.NumVertices())
	for t := range s.mesh.Triangles() {
		for _, v := range s.mesh.Corners(t) {
			s.numbers[v] = 1
		}
	}
	for i, v := range s.mesh.Ordered() {
		s.rank[v] = int32(i)
		if s.numbers[v] > 0 {
			s.vertices = append(s.vertices, v)
			s.numbers[v] = int32(len(s.vertices))
		}
	}
}

// write writes one output.
func (s *ordered) write(d *destination) error {
	switch {
	case d.format == formatCSV && d.part == partVertices:
		return s.vertexTable(d.w)
	case d.format == formatCSV:
		return s.triangleTable(d.w)
	case d.part == partVertices:
		return s.writeFeatures(d, s.featureOptions(s.labels(""), s.xy, s.z), s.vertexFeatures)
	}
	return s.writeFeatures(d, s.featureOptions(s.labels(""), s.xy, s.z), s.triangleFeatures)
}
