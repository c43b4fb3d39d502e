package main

import "strings"

// nearest returns the word of list that is most like word, or "" if none is near:
// one that word begins, or one within a third of its letters in edit distance.
func nearest(word string, list []string) string {
	best, bestDistance := "", len(word)/3+1
	for _, w := range list {
		d := editDistance(word, w)
		if len(word) >= 3 && strings.HasPrefix(w, word) {
			d = 1
		}
		if d < bestDistance {
			best, bestDistance = w, d
		}
	}
	return best
}

// editDistance returns how many letters must be put in, taken out, exchanged, or
// swapped with their neighbour to get from a to b (Wagner and Fischer 1974, with the
// swaps of Lowrance and Wagner 1975).
func editDistance(a, b string) int {
	rows := make([][]int, len(a)+1)
	for i := range rows {
		rows[i] = make([]int, len(b)+1)
		rows[i][0] = i
	}
	for j := range rows[0] {
		rows[0][j] = j
	}
	for i := 1; i <= len(a); i++ {
		for j := 1; j <= len(b); j++ {
			change := rows[i-1][j-1]
			if a[i-1] != b[j-1] {
				change++
			}
			d := min(change, rows[i-1][j]+1, rows[i][j-1]+1)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				d = min(d, rows[i-2][j-2]+1)
			}
			rows[i][j] = d
		}
	}
	return rows[len(a)][len(b)]
}
