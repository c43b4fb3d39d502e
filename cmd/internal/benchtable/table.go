package main

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// full writes one table a package: a row for each operation and distribution,
// a column for each size, with spread and rate.
func full(files []*raw) string {
	var b strings.Builder
	for _, f := range files {
		for _, pkg := range distinct(f.results, func(r *result) string { return r.pkg }) {
			rows := pick(f.results, func(r *result) bool { return r.pkg == pkg })
			sizes := distinct(rows, func(r *result) string { return r.size })
			fmt.Fprintf(&b, "**%s** (%s)\n\n", pkg, f.origin())
			b.WriteString("| operation | on |")
			for _, s := range sizes {
				fmt.Fprintf(&b, " %s |", heading(s))
			}
			b.WriteString("\n|---|---|" + strings.Repeat("--:|", len(sizes)) + "\n")
			for _, key := range distinct(rows, func(r *result) string { return r.op + "|" + r.set }) {
				op, set, _ := strings.Cut(key, "|")
				fmt.Fprintf(&b, "| %s | %s |", op, set)
				for _, s := range sizes {
					fmt.Fprintf(&b, " %s |", cell(find(rows, op, set, s)))
				}
				b.WriteByte('\n')
			}
			b.WriteByte('\n')
		}
	}
	return b.String()
}

// briefSets is on how many distributions an operation must have been measured
// to stand in the brief table.
const briefSets = 3

// distributions are the columns of the table for all.
var distributions = []string{"uniform", "clustered", "scanlines", "survey", "unit-lattice", "lattice-0.1m", "circles"}

// column is the distribution that a result was measured on, on two cores if that is
// said; "" for other sets.
func column(r *result) string {
	set := strings.TrimSuffix(r.set, ", workers=2")
	if slices.Contains(distributions, set) {
		return set
	}
	return ""
}

// brief writes one table for all: the operations that were measured at the
// size on several distributions, and a column for each distribution.
func brief(files []*raw, size string) string {
	room := func(r *result) string { return r.op + " (`" + r.pkg + "`)" }
	var all []*result
	for _, f := range files {
		all = append(all, pick(f.results, func(r *result) bool { return r.size == size && column(r) != "" })...)
	}
	all = pick(all, func(r *result) bool {
		return len(pick(all, func(o *result) bool { return room(o) == room(r) })) >= briefSets
	})
	if len(all) == 0 {
		return ""
	}
	ops, sets := distinct(all, room), distinct(all, column)
	var b strings.Builder
	b.WriteString("| " + heading(size) + " |")
	for _, s := range sets {
		fmt.Fprintf(&b, " %s |", s)
	}
	b.WriteString("\n|---|" + strings.Repeat("--:|", len(sets)) + "\n")
	widest := 0.0
	for _, op := range ops {
		fmt.Fprintf(&b, "| %s |", op)
		for _, s := range sets {
			text := ""
			for _, r := range all {
				if room(r) == op && column(r) == s {
					m, spread, _ := r.median("ns/op")
					text, widest = duration(m), max(widest, spread)
				}
			}
			fmt.Fprintf(&b, " %s |", text)
		}
		b.WriteByte('\n')
	}
	fmt.Fprintf(&b, "\nMedians; half of the range of the runs is at most %.0f %% of the median. ", math.Ceil(widest))
	var origins []string
	for _, f := range files {
		if o := f.origin(); !slices.Contains(origins, o) {
			origins = append(origins, o)
		}
	}
	b.WriteString("Measured on " + strings.Join(origins, "; ") + ".\n")
	return b.String()
}

// origin says on what a file was measured.
func (f *raw) origin() string {
	var parts []string
	for _, key := range []string{"machine", "go", "commit", "runs"} {
		if v := f.facts[key]; v != "" {
			if key == "commit" || key == "runs" {
				v = key + " " + v
			}
			parts = append(parts, v)
		}
	}
	return strings.Join(parts, ", ")
}

func heading(size string) string {
	if n, ok := strings.CutPrefix(size, "n="); ok {
		return "n = " + n
	}
	return "time"
}

// cell is a figure with spread and rate: 271 ms ±3 %, 3.7 M points/s.
func cell(r *result) string {
	if r == nil {
		return ""
	}
	m, spread, ok := r.median("ns/op")
	var parts []string
	if ok && m > 0 {
		parts = append(parts, fmt.Sprintf("%s ±%.0f %%", duration(m), spread))
	}
	if unit := r.rate(); unit != "" {
		v, _, _ := r.median(unit)
		parts = append(parts, quantity(v)+" "+unit)
	}
	return strings.Join(parts, ", ")
}

// duration writes nanoseconds with three digits.
func duration(ns float64) string {
	switch {
	case ns < 1e3:
		return digits(ns) + " ns"
	case ns < 1e6:
		return digits(ns/1e3) + " µs"
	case ns < 1e9:
		return digits(ns/1e6) + " ms"
	}
	return digits(ns/1e9) + " s"
}

// quantity writes a rate with three digits and k, M or G.
func quantity(v float64) string {
	switch {
	case v < 1e3:
		return digits(v)
	case v < 1e6:
		return digits(v/1e3) + " k"
	case v < 1e9:
		return digits(v/1e6) + " M"
	}
	return digits(v/1e9) + " G"
}

// digits writes three significant digits without an exponent.
func digits(v float64) string {
	places := 0
	switch {
	case v < 9.995:
		places = 2
	case v < 99.95:
		places = 1
	}
	return strconv.FormatFloat(v, 'f', places, 64)
}

func pick(rs []*result, keep func(*result) bool) []*result {
	var out []*result
	for _, r := range rs {
		if keep(r) {
			out = append(out, r)
		}
	}
	return out
}

func find(rs []*result, op, set, size string) *result {
	for _, r := range rs {
		if r.op == op && r.set == set && r.size == size {
			return r
		}
	}
	return nil
}

// distinct returns the different keys in order of appearance.
func distinct(rs []*result, key func(*result) string) []string {
	var out []string
	for _, r := range rs {
		if k := key(r); !slices.Contains(out, k) {
			out = append(out, k)
		}
	}
	return out
}
