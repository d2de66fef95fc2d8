package desk

import "weighhouse/model"

// A draft is what stands in a box and is no answer yet: half typed, not to be
// read, or questioned and not confirmed. It outlives the page, so that a box
// made anew goes on from it. nil is none.
type draft []typedLine

// A typedLine is the text of one line of a box, with its answer where it
// reads, to be written anew in another language; and how often a worksheet's
// line comes.
type typedLine struct {
	text   string
	answer model.Answer
	period model.Period
}

// notTyping is the line of a box that does not have the focus.
const notTyping = -1

func (b *typedBox) draft() draft {
	text := b.entry.Text
	if text == "" || b.now.State != model.Missing {
		return nil
	}
	line := typedLine{text: text}
	if a, err := b.parse(text); err == nil {
		line.answer = a
	}
	return draft{line}
}

func (b *typedBox) resume(d draft, line int) {
	text := d[0].text
	if d[0].answer.State == model.Given {
		text = b.write(d[0].answer)
	}
	b.entry.rewrite(text)
	b.look(line == notTyping)
}

func (b *worksheetBox) draft() draft {
	if b.now.State != model.Missing {
		return nil
	}
	var d draft
	begun := false
	for _, r := range b.rows {
		line := typedLine{text: r.entry.Text, period: r.period.period}
		if m, err := r.money(); err == nil && m.Set {
			line.answer = model.Answer{State: model.Given, Number: m.Amount}
		}
		begun = begun || line.text != "" || line.period != r.line.usual
		d = append(d, line)
	}
	if !begun {
		return nil
	}
	return d
}

func (b *worksheetBox) resume(d draft, line int) {
	for i, r := range b.rows {
		text := d[i].text
		if d[i].answer.State == model.Given {
			text = b.reader.Amount(d[i].answer.Number, b.kind.decimals)
		}
		r.period.show(d[i].period)
		r.entry.rewrite(text)
	}
	if line == notTyping {
		b.look(nil)
	} else {
		b.look(b.rows[line])
	}
}

// A choice, and a name, are never half made.
func (p *picker) draft() draft       { return nil }
func (p *picker) resume(draft, int)  {}
func (b *nameBox) draft() draft      { return nil }
func (b *nameBox) resume(draft, int) {}
