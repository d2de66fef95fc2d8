package main

import (
	"fmt"
	"os"
	"strings"
	"time"
	"unicode/utf8"

	"golang.org/x/term"
)

// A progress is one line on a terminal that is written over; where standard
// error is no terminal it says nothing.
type progress struct {
	k     *clerk // nil where there is no terminal
	last  time.Time
	width int // of what stands there now
}

func (k *clerk) progress() *progress {
	if f, ok := k.err.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
		return &progress{k: k, last: time.Now()}
	}
	return &progress{}
}

// tell writes a sentence, ten times a second at the most.
func (p *progress) tell(key string, args ...any) {
	if p.k == nil || time.Since(p.last) < time.Second/10 {
		return
	}
	p.last = time.Now()
	p.write(p.k.words.T(key, args...))
}

// end wipes the line.
func (p *progress) end() {
	if p.k != nil && p.width > 0 {
		p.write("")
		fmt.Fprint(p.k.err, "\r")
	}
}

func (p *progress) write(text string) {
	n := utf8.RuneCountInString(text)
	fmt.Fprint(p.k.err, "\r"+text+strings.Repeat(" ", max(0, p.width-n)))
	p.width = n
}
