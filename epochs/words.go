package epochs

import (
	"errors"
	"fmt"
	"strings"
)

// ErrWord is what the error about a word of a plan that is not one of those
// accepted unwraps to.
var ErrWord = errors.New("epochs: unknown word")

// wordOf returns the word of a value.
func wordOf(i int, words []string) string {
	if i < 0 || i >= len(words) {
		return fmt.Sprintf("unknown (%d)", i)
	}
	return words[i]
}

// findWord returns the value of a word; the error wraps ErrWord and lists the
// words. Case and surrounding blanks do not matter.
func findWord(what, word string, words []string) (int, error) {
	for i, w := range words {
		if strings.EqualFold(strings.TrimSpace(word), w) {
			return i, nil
		}
	}
	return 0, fmt.Errorf("%w: %s %q, accepted: %s", ErrWord, what, word, strings.Join(words, ", "))
}
