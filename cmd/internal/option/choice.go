package option

import "strings"

// Choice is one word out of a fixed list.
type Choice struct {
	words []string
	word  string
}

// NewChoice returns a choice among words that stands at the first of them.
func NewChoice(words ...string) Choice {
	return Choice{words: words, word: words[0]}
}

// Word returns the chosen word.
func (c *Choice) Word() string { return c.word }

// Words returns the words to choose from.
func (c *Choice) Words() []string { return c.words }

// Set chooses text, which must be one of the words.
func (c *Choice) Set(text string) error {
	for _, w := range c.words {
		if w == text {
			c.word = w
			return nil
		}
	}
	return &BadValue{text, "one of " + strings.Join(c.words, ", ")}
}

// String returns the chosen word.
func (c *Choice) String() string { return c.word }

// Type lists the words for help pages.
func (c *Choice) Type() string { return strings.Join(c.words, "|") }
