package configs

import (
	"strings"
	"unicode/utf8"
)

// nearest is the known word that a mistyped one most likely meant; empty
// when none is near. Of equals the first.
func nearest(word string, known []string) string {
	if utf8.RuneCountInString(word) > 64 {
		return ""
	}
	best, bestAway := "", 1+utf8.RuneCountInString(word)/3
	for _, k := range known {
		if away := distance(strings.ToLower(word), strings.ToLower(k)); away <= bestAway && (best == "" || away < bestAway) {
			best, bestAway = k, away
		}
	}
	return best
}

// distance counts the letters to add, drop, change or swap with their
// neighbour to make a into b (optimal string alignment).
func distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	rows := make([][]int, len(x)+1)
	for i := range rows {
		rows[i] = make([]int, len(y)+1)
		rows[i][0] = i
	}
	for j := range rows[0] {
		rows[0][j] = j
	}
	for i := 1; i <= len(x); i++ {
		for j := 1; j <= len(y); j++ {
			change := 1
			if x[i-1] == y[j-1] {
				change = 0
			}
			d := min(rows[i-1][j]+1, rows[i][j-1]+1, rows[i-1][j-1]+change)
			if i > 1 && j > 1 && x[i-1] == y[j-2] && x[i-2] == y[j-1] {
				d = min(d, rows[i-2][j-2]+1)
			}
			rows[i][j] = d
		}
	}
	return rows[len(x)][len(y)]
}

// didYouMean is the remedy for a word that should have been one of known.
func didYouMean(word string, known []string) string {
	if n := nearest(word, known); n != "" {
		return "did you mean " + n + "?"
	}
	return "it should be " + oneOf(known)
}

// oneOf lists words as people do: a, b or c.
func oneOf(words []string) string {
	switch n := len(words); n {
	case 0:
		return ""
	case 1:
		return words[0]
	default:
		return strings.Join(words[:n-1], ", ") + " or " + words[n-1]
	}
}
