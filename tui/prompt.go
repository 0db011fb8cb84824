package tui

import (
	"unicode"

	"fluxtoll/tui/canvas"
)

// prompt asks for one line of text, or, where yesNo is set, for y or n.
type prompt struct {
	label string
	text  []rune
	yesNo bool
	then  func(*Model, string)
}

// add types what prints.
func (p *prompt) add(runes []rune) {
	const longest = 200
	for _, r := range runes {
		if unicode.IsPrint(r) && len(p.text) < longest {
			p.text = append(p.text, r)
		}
	}
}

func (p *prompt) erase() {
	if len(p.text) > 0 {
		p.text = p.text[:len(p.text)-1]
	}
}

func (p *prompt) draw(b canvas.Box) {
	for x := range b.Wide {
		b.Put(x, 0, canvas.Plain, ' ')
	}
	x := b.Text(0, 0, canvas.Strong, cut(p.label+" ", b.Wide))
	if p.yesNo {
		return
	}
	text := p.text
	if room := b.Wide - x - 1; len(text) > room && room > 0 {
		text = text[len(text)-room:]
	}
	x = b.Text(x, 0, canvas.Plain, string(text))
	b.Put(x, 0, canvas.Picked, ' ')
}
