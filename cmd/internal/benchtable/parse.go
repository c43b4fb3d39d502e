package main

import (
	"bufio"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
)

// raw is one file of raw output.
type raw struct {
	facts   map[string]string // machine, go, commit, command, date, load
	results []*result         // in order of appearance
}

// result is all runs of one benchmark.
type result struct {
	pkg  string // folder below the module
	op   string // Delaunay
	set  string // uniform; what stands between op and size
	size string // n=1e6, or nothing
	runs int
	// values of each run by unit: ns/op, points/s, B/op ...
	values map[string][]float64
}

// median returns the middle value of a unit and half the range of the runs in
// percent of it, or false if it was not measured.
func (r *result) median(unit string) (value, spread float64, ok bool) {
	v := slices.Sorted(slices.Values(r.values[unit]))
	if len(v) == 0 {
		return 0, 0, false
	}
	m := v[len(v)/2]
	if len(v)%2 == 0 {
		m = (v[len(v)/2-1] + m) / 2
	}
	if m != 0 {
		spread = 50 * (v[len(v)-1] - v[0]) / m
	}
	return m, spread, true
}

// rate returns the unit of the first rate that the benchmark reports, such as
// points/s.
func (r *result) rate() string {
	var units []string
	for u := range r.values {
		if strings.HasSuffix(u, "/s") {
			units = append(units, u)
		}
	}
	if len(units) == 0 {
		return ""
	}
	return slices.Min(units)
}

// parse reads raw output. A line that begins with Benchmark and is not a
// result is an error: it would be a figure lost in silence.
func parse(r io.Reader) (*raw, error) {
	out := &raw{facts: map[string]string{}}
	byName := map[string]*result{}
	pkg := ""
	s := bufio.NewScanner(r)
	for line := 1; s.Scan(); line++ {
		text := strings.TrimSpace(s.Text())
		if fact, ok := strings.CutPrefix(text, "# "); ok {
			if key, value, ok := strings.Cut(fact, ": "); ok {
				out.facts[key] = value
			}
			continue
		}
		if p, ok := strings.CutPrefix(text, "pkg: "); ok {
			_, pkg, _ = strings.Cut(p, "/")
			continue
		}
		if !strings.HasPrefix(text, "Benchmark") {
			continue
		}
		fields := strings.Fields(text)
		if len(fields) < 4 || len(fields)%2 != 0 {
			return nil, fmt.Errorf("line %d: %q: expected name, count, then pairs of number and unit", line, text)
		}
		key := pkg + " " + fields[0]
		res := byName[key]
		if res == nil {
			res = named(pkg, fields[0])
			byName[key] = res
			out.results = append(out.results, res)
		}
		res.runs++
		for i := 2; i < len(fields); i += 2 {
			x, err := strconv.ParseFloat(fields[i], 64)
			if err != nil {
				return nil, fmt.Errorf("line %d: %q: expected a number", line, fields[i])
			}
			res.values[fields[i+1]] = append(res.values[fields[i+1]], x)
		}
	}
	return out, s.Err()
}

// named takes a benchmark's name apart: BenchmarkDelaunay/uniform/n=1e6-2 is
// Delaunay on uniform at n=1e6, on two processors.
func named(pkg, name string) *result {
	r := &result{pkg: pkg, values: map[string][]float64{}}
	if i := strings.LastIndexByte(name, '-'); i > 0 {
		if _, err := strconv.Atoi(name[i+1:]); err == nil && !strings.HasSuffix(name[:i], "e") {
			name = name[:i]
		}
	}
	parts := strings.Split(strings.TrimPrefix(name, "Benchmark"), "/")
	r.op = parts[0]
	var set []string
	for _, p := range parts[1:] {
		if r.size == "" && strings.HasPrefix(p, "n=") {
			r.size = p
		} else {
			set = append(set, p)
		}
	}
	r.set = strings.Join(set, ", ")
	return r
}
