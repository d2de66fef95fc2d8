// Clerk does the work of the window without one: it scores files of
// applicants, asks one applicant's questions in the terminal, and looks at
// scorecard workbooks. It needs no C compiler:
//
//	CGO_ENABLED=0 go build ./app/clerk
//
// It exits with 0 when it did what it was asked, some rows refused or not, 1
// when something was refused or could not be done, and 2 when it was used
// wrongly. What it is asked for goes to
// standard output, what is wrong to standard error.
package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
	"time"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

func main() {
	os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}

// A clerk is one run of the program.
type clerk struct {
	in     io.Reader
	out    io.Writer
	err    io.Writer
	words  *words.Reader
	option map[string]string // by name; a switch that is set is "yes"
	files  []string          // arguments that are no options
	today  model.Date
}

// errRefused ends a run whose problems were told already.
var errRefused = errors.New("refused")

func run(args []string, in io.Reader, out, errs io.Writer) int {
	k := &clerk{in: in, out: out, err: errs, words: words.New(words.StyleOf("en")), today: model.DateOf(time.Now())}
	switch err := k.run(args).(type) {
	case nil:
		return 0
	case wrongUse:
		fmt.Fprintln(errs, k.told(model.Problem(err)))
		fmt.Fprintln(errs, k.words.T("clerk.see_help"))
		return 2
	default:
		if err != errRefused {
			for _, p := range store.Problems(err) {
				fmt.Fprintln(errs, k.told(p))
			}
		}
		return 1
	}
}

func (k *clerk) run(args []string) error {
	if len(args) == 0 {
		return misuse("clerk_no_command")
	}
	name, rest := args[0], args[1:]
	if name == "-h" || name == "-help" || name == "--help" {
		name = "help"
	}
	c, ok := commandNamed(name)
	if !ok {
		return misuse("clerk_no_such_command", "value", name)
	}
	err := k.parse(c, rest)
	if language := k.option["language"]; language != "" {
		k.words = words.New(words.StyleOf(language))
	}
	switch {
	case k.option["help"] != "":
		return k.helpOn(c.name)
	case err != nil:
		return err
	}
	return c.run(k)
}

// note tells something that stops nothing.
func (k *clerk) note(p model.Problem) {
	fmt.Fprintln(k.err, k.words.T("clerk.note", "what", k.words.Problem(p)))
}

// told words a problem. What was typed on the command line is repeated whole:
// a file's name may be long.
func (k *clerk) told(p model.Problem) string {
	if !strings.HasPrefix(p.Code, "clerk_") {
		return k.words.Problem(p)
	}
	var args []any
	for name, value := range p.Args {
		args = append(args, name, value)
	}
	return k.words.T("problem."+p.Code, args...)
}
