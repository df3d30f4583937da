package hazewright

import "strings"

// Nearest returns the candidate that word abbreviates part by part, else the one closest to it by edit distance, else one that word
// begins or that begins word, or "" if none is close enough to be a slip. The first of
// equals wins.
func Nearest(word string, candidates []string) string {
	const longest = 64 // no key or name that is suggested is longer
	if word == "" || len(word) > longest {
		return ""
	}
	folded := strings.ToLower(strings.ReplaceAll(word, "-", "_"))
	best, bestDistance := "", 1+max(1, len(word)/3)
	for _, c := range candidates {
		if abbreviates(folded, c) {
			return c
		}
		if d := editDistance(folded, strings.ToLower(c)); d < bestDistance {
			best, bestDistance = c, d
		}
	}
	if best == "" && len(folded) >= 4 {
		for _, c := range candidates {
			if strings.HasPrefix(c, folded) || strings.HasPrefix(folded, c) && len(c) >= 4 {
				return c
			}
		}
	}
	return best
}

// abbreviates reports whether every part of word, between underscores, begins the same
// part of full: "prod_rate" for "production_rate".
func abbreviates(word, full string) bool {
	short, long := strings.Split(word, "_"), strings.Split(full, "_")
	if len(short) != len(long) || len(short) < 2 {
		return false
	}
	for i := range short {
		if len(short[i]) < 2 || !strings.HasPrefix(long[i], short[i]) {
			return false
		}
	}
	return true
}

// editDistance counts insertions, deletions, substitutions and swaps of neighbours
// that turn a into b (restricted Damerau-Levenshtein distance).
func editDistance(a, b string) int {
	s, t := []rune(a), []rune(b)
	before, last, row := make([]int, len(t)+1), make([]int, len(t)+1), make([]int, len(t)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(s); i++ {
		row[0] = i
		for j := 1; j <= len(t); j++ {
			cost := 1
			if s[i-1] == t[j-1] {
				cost = 0
			}
			row[j] = min(row[j-1]+1, last[j]+1, last[j-1]+cost)
			if i > 1 && j > 1 && s[i-1] == t[j-2] && s[i-2] == t[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(t)]
}

// listWords joins words for a message: "a, b or c".
func listWords(words []string, last string) string {
	switch n := len(words); n {
	case 0:
		return ""
	case 1:
		return words[0]
	default:
		return strings.Join(words[:n-1], ", ") + " " + last + " " + words[n-1]
	}
}
