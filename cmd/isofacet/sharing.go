package main

import (
	"context"
	"slices"
	"strings"
	"sync"

	"github.com/paulmach/orb"
	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"isofacet/cmd/internal/record"
	"isofacet/cmd/internal/report"
	"isofacet/interp"
	"isofacet/io/readings"
	"isofacet/triangulate"
)

// sharedWork is what the steps of one run have in common: inputs that are read once
// for all rounds, surfaces that several steps ask for, and meshes of equal places.
type sharedWork struct {
	mu       sync.Mutex
	surfaces map[string]*sharedSurface
	parts    map[string]*sharedParts
	meshes   []*sharedMesh
	// left counts the steps that will still ask for a surface, by its key, and for
	// parts.
	left map[string]int
}

func newSharedWork() *sharedWork {
	return &sharedWork{surfaces: map[string]*sharedSurface{}, parts: map[string]*sharedParts{}, left: map[string]int{}}
}

// said is what a step said and opened while it made something for all.
type said struct {
	events []report.Event
	files  []*input      // opened beside the command's own
	own    []record.File // the command's own, with their hashes: copies, as it goes on writing to them
}

// listen notes what p says and opens from now on.
func (p *program) listen(list []*input) func() said {
	opened, stop := len(p.opened), p.report.Keep()
	return func() said {
		s := said{stop(), slices.Clone(p.opened[opened:]), make([]record.File, len(list))}
		for i, in := range list {
			s.own[i] = *in.file
		}
		return s
	}
}

// repeat has p say what another step said.
func (p *program) repeat(s *said, list []*input) {
	p.report.Replay(s.events)
	for i := range list {
		*list[i].file = s.own[i]
	}
	for _, in := range s.files {
		p.opened = append(p.opened, in)
		p.recordInput(in)
	}
}

type sharedSurface struct {
	once sync.Once
	l    *loaded
	err  error
	said said
	by   *program
}

// surface returns the surface that a step asks for, made by the first who does.
func (w *sharedWork) surface(ctx context.Context, p *program, r *reading, list []*input) (*loaded, error) {
	key := inputNames(list) + p.step.options
	w.mu.Lock()
	if w.left[key] == 0 {
		// Nobody else will ask for it, nor is it known when it may be let go: a
		// command that makes several surfaces.
		w.mu.Unlock()
		return p.loadAlone(ctx, r, list)
	}
	s := w.surfaces[key]
	if s == nil {
		s = &sharedSurface{}
		w.surfaces[key] = s
	}
	w.mu.Unlock()
	s.once.Do(func() {
		done := p.listen(list)
		s.by = p
		s.l, s.err = p.loadAlone(ctx, r, list)
		s.said = done()
	})
	if s.by != p {
		p.repeat(&s.said, list)
	}
	if s.err != nil {
		return nil, s.err
	}
	mine := *s.l // digits may be widened by one step
	return &mine, nil
}

// expect counts what will be asked for.
func (w *sharedWork) expect(s *step) {
	w.left[s.surface]++
	w.left[partsKey(s.surface)]++
}

// done lets go of what no step will ask for any more.
func (w *sharedWork) done(s *step) {
	w.mu.Lock()
	defer w.mu.Unlock()
	for _, key := range []string{s.surface, partsKey(s.surface)} {
		if w.left[key]--; w.left[key] <= 0 {
			delete(w.surfaces, key)
			delete(w.parts, key)
		}
	}
}

type sharedParts struct {
	once   sync.Once
	parts  []readings.Part
	err    error
	said   said
	edges  edges  // with the table of codes
	depths depths // with that of the wells
	by     *program
}

// rounds returns the readings of all rounds of the inputs, read by the first who
// asks.
func (w *sharedWork) rounds(ctx context.Context, p *program, r *reading, list []*input) ([]readings.Part, error) {
	key := partsKey(inputNames(list) + p.step.options)
	w.mu.Lock()
	s := w.parts[key]
	if s == nil {
		s = &sharedParts{}
		w.parts[key] = s
	}
	w.mu.Unlock()
	s.once.Do(func() {
		done := p.listen(list)
		s.by = p
		r.apart, r.alone = true, true
		s.parts, s.err = p.readParts(ctx, r, list, readings.ByRole(readings.Round))
		r.apart, r.alone = false, false
		s.said, s.edges, s.depths = done(), r.edges, r.depths
	})
	if s.by != p {
		p.repeat(&s.said, list)
		r.edges.table, r.edges.codes, r.depths.table = s.edges.table, s.edges.codes, s.depths.table
	}
	return s.parts, s.err
}

// sharedMesh is a mesh of places that several sets of values stand at.
type sharedMesh struct {
	once    sync.Once
	points  []orb.Point
	byPlace []int32 // of points, made when other points are compared
	mesh    *triangulate.Mesh
	err     error
}

// meshesKept is how many meshes are kept for others with the same places: rounds of
// one network come one after the other.
const meshesKept = 8

// mesh returns the mesh of places, made by the first who asks. Another who has the
// same places in another order gets the same triangles with inputs of its own.
func (w *sharedWork) mesh(ctx context.Context, points []orb.Point, opt triangulate.Options) (*triangulate.Mesh, error) {
	m, byPlace := w.meshAt(points)
	m.once.Do(func() { m.mesh, m.err = triangulate.Delaunay(ctx, m.points, opt) })
	if m.err != nil || byPlace == nil {
		return m.mesh, m.err
	}
	if mesh, ok := m.mesh.Reordered(points, byPlace); ok {
		return mesh, nil
	}
	return triangulate.Delaunay(ctx, points, opt)
}

// meshAt finds or begins the mesh of places. byPlace is not nil if its inputs come in
// another order than points.
func (w *sharedWork) meshAt(points []orb.Point) (m *sharedMesh, byPlace []int32) {
	w.mu.Lock()
	defer w.mu.Unlock()
	for _, known := range w.meshes {
		if slices.Equal(known.points, points) {
			return known, nil
		}
	}
	for _, known := range w.meshes {
		if len(known.points) != len(points) {
			continue
		}
		if byPlace == nil {
			byPlace = triangulate.ByPlace(points)
		}
		if known.byPlace == nil {
			known.byPlace = triangulate.ByPlace(known.points)
		}
		same := func(a, b int32) bool { return known.points[a] == points[b] }
		if slices.EqualFunc(known.byPlace, byPlace, same) {
			return known, byPlace
		}
	}
	m = &sharedMesh{points: points, byPlace: byPlace}
	w.meshes = append(w.meshes, m)
	if len(w.meshes) > meshesKept {
		w.meshes = w.meshes[1:]
	}
	return m, nil
}

// surfaceOf returns the surface of readings without lines, over a mesh that may be
// shared.
func (p *program) surfaceOf(ctx context.Context, set *readings.Set, opt triangulate.Options) (*interp.Surface, error) {
	mesh, err := p.step.shared.mesh(ctx, set.Points, opt)
	if err != nil {
		return nil, err
	}
	return interp.FromInputs(mesh, set.Z)
}

// inputNames are the files of a surface, as they begin its key.
func inputNames(list []*input) string {
	var b strings.Builder
	for _, in := range list {
		b.WriteString(in.file.Name + "\x00")
	}
	return b.String()
}

// readingKey is every option of a command line that says how readings are read.
func readingKey(cmd *cobra.Command) string {
	var b strings.Builder
	for _, name := range readingNames() {
		if f := cmd.Flags().Lookup(name); f != nil && f.Changed && name != "each" {
			b.WriteString("\x01" + name + "\x00" + f.Value.String())
		}
	}
	if stating(cmd) {
		b.WriteString("\x01stating\x00") // with the arithmetic
	}
	return b.String()
}

// partsKey is the key without the round.
func partsKey(surface string) string {
	const mark = "\x01round\x00"
	before, after, ok := strings.Cut(surface, mark)
	if !ok {
		return "all\x02" + surface
	}
	_, behind, more := strings.Cut(after, "\x01")
	if more {
		before += "\x01" + behind
	}
	return "all\x02" + before
}

// readingNames are the options that say how readings are read, each once.
var readingNames = sync.OnceValue(func() []string {
	var names []string
	var r reading
	for _, o := range r.readingOptions() {
		names = append(names, o.Name)
	}
	return names
})

// changedFlag reports whether a flag was given.
func changedFlag(cmd *cobra.Command, name string) (*pflag.Flag, bool) {
	f := cmd.Flags().Lookup(name)
	return f, f != nil && f.Changed
}
