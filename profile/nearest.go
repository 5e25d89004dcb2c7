package profile

import "strings"

// Nearest returns the word of words that is most like word, for hints, or ""
// if none is within a third of its length: of two equally near, the first.
// Likeness is the Levenshtein (1966) distance, case aside.
func Nearest(word string, words []string) string {
	best, least := "", len([]rune(word))/3+2
	for _, w := range words {
		if d := distance(strings.ToLower(word), strings.ToLower(w)); d < least {
			best, least = w, d
		}
	}
	return best
}

// distance is the least number of inserted, deleted and changed characters
// that turns a into b.
func distance(a, b string) int {
	from, to := []rune(a), []rune(b)
	row := make([]int, len(to)+1)
	for j := range row {
		row[j] = j
	}
	for i, r := range from {
		diagonal := row[0]
		row[0] = i + 1
		for j, s := range to {
			change := diagonal
			if r != s {
				change++
			}
			diagonal = row[j+1]
			row[j+1] = min(change, row[j+1]+1, row[j]+1)
		}
	}
	return row[len(to)]
}
