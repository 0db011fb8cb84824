package scenarios

import "strings"

// nearest returns the word closest to what was written, and whether it is
// close enough to be meant: equal but for case, or at most a third of the
// letters away.
func nearest(written string, words []string) (string, bool) {
	if len(written) > 64 {
		return "", false
	}
	best, least := "", len(written)/3+1
	for _, w := range words {
		if strings.EqualFold(w, written) {
			return w, true
		}
		if d := distance(strings.ToLower(written), strings.ToLower(w)); d < least {
			best, least = w, d
		}
	}
	return best, best != ""
}

// distance counts the letters to insert, delete or replace, and the neighbours
// to swap, between a and b: the restricted edit distance (F. J. Damerau,
// Commun. ACM 7, 171 (1964); V. I. Levenshtein, Sov. Phys. Dokl. 10, 707
// (1966)).
func distance(a, b string) int {
	before, last, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			replace := last[j-1]
			if a[i-1] != b[j-1] {
				replace++
			}
			row[j] = min(replace, last[j]+1, row[j-1]+1)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(b)]
}

// suggestion is the sentence about the nearest word, or nothing.
func suggestion(written string, words []string) string {
	word, ok := nearest(written, words)
	if !ok {
		return ""
	}
	return `did you mean "` + word + `"? `
}
