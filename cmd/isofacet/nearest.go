package main

import (
	"strings"

	"isofacet/io/nearword"
)

// nearest returns the word of list that is most like word, or "" if none is near:
// one that word begins, or one within a third of its letters in edit distance.
func nearest(word string, list []string) string {
	best, bestDistance := "", len(word)/3+1
	for _, w := range list {
		d := nearword.Distance(word, w)
		if len(word) >= 3 && strings.HasPrefix(w, word) {
			d = 1
		}
		if d < bestDistance {
			best, bestDistance = w, d
		}
	}
	return best
}
