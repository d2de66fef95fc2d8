package main

import (
	"fmt"
	"slices"
	"strings"

	"weighhouse/app/practice"
	"weighhouse/app/words"
	"weighhouse/model"
)

// A command is one thing that clerk does. Its sentences are clerk.about.NAME
// and clerk.help.NAME.
type command struct {
	name     string
	options  []string // that take a value
	needed   []string // options that must be given
	switches []string
	files    int // how many arguments besides the options
	run      func(*clerk) error
}

// commands are in the order of the help. It is a function because help, which
// is one of them, lists them.
func commands() []command {
	return []command{
		{name: "score", options: []string{"card", "branch", "product", "client", "on", "in", "out"}, needed: []string{"in", "out"}, run: (*clerk).score},
		{name: "ask", options: []string{"card", "branch", "product", "client", "on"}, run: (*clerk).ask},
		{name: "check", switches: []string{"json"}, files: 1, run: (*clerk).check},
		{name: "blank", options: []string{"card"}, files: 1, run: (*clerk).blank},
		{name: "try", files: 2, run: (*clerk).tryIt},
		{name: "practice", options: []string{"product", "branch"}, files: -1, run: (*clerk).practice},
		{name: "prove", options: []string{"branch"}, run: (*clerk).prove},
		{name: "help", files: -1, run: (*clerk).help},
	}
}

func commandNamed(name string) (command, bool) {
	all := commands()
	i := slices.IndexFunc(all, func(c command) bool { return c.name == name })
	if i < 0 {
		return command{}, false
	}
	return all[i], true
}

// A wrongUse is a problem with how clerk was called.
type wrongUse model.Problem

func (w wrongUse) Error() string { return model.Problem(w).Error() }

func misuse(code string, args ...string) error { return wrongUse(problem(code, args...)) }

// problem makes a Problem from pairs of a name and a value.
func problem(code string, args ...string) model.Problem {
	p := model.Problem{Code: code, Args: model.Args{}}
	for i := 0; i+1 < len(args); i += 2 {
		p.Args[args[i]] = args[i+1]
	}
	return p
}

// parse sorts a command's arguments: -name VALUE, -name=VALUE, with one hyphen
// or two, before or after the files; after -- all are files, and - is one.
func (k *clerk) parse(c command, args []string) error {
	k.option = map[string]string{}
	var wrong error
	miss := func(code string, args ...string) {
		if wrong == nil {
			wrong = misuse(code, append(args, "command", c.name)...)
		}
	}
	for len(args) > 0 {
		arg := args[0]
		args = args[1:]
		if arg == "--" {
			k.files = append(k.files, args...)
			break
		}
		if arg == "-" || !strings.HasPrefix(arg, "-") {
			k.files = append(k.files, arg)
			continue
		}
		name, value, given := strings.Cut(strings.TrimPrefix(strings.TrimPrefix(arg, "-"), "-"), "=")
		if name == "h" {
			name = "help"
		}
		_, twice := k.option[name]
		switch {
		case name == "help" || slices.Contains(c.switches, name):
			value = "yes"
		case name != "language" && !slices.Contains(c.options, name):
			miss("clerk_option_unknown", "value", "-"+name)
			continue
		case !given && len(args) == 0 || given && value == "":
			miss("clerk_option_empty", "value", "-"+name)
			continue
		case !given:
			value, args = args[0], args[1:]
		}
		if twice {
			miss("clerk_option_twice", "value", "-"+name)
		}
		k.option[name] = value
	}
	for _, name := range c.needed {
		if k.option[name] == "" {
			miss("clerk_option_needed", "value", "-"+name)
		}
	}
	if language := k.option["language"]; language != "" && !spoken(language) {
		miss("clerk_no_such_language", "value", language)
	}
	switch {
	case c.files >= 0 && len(k.files) > c.files:
		miss("clerk_too_many_files", "value", k.files[c.files])
	case len(k.files) < c.files:
		miss("clerk_file_needed")
	}
	return wrong
}

// help lists the commands, or tells one of them in full.
func (k *clerk) help() error {
	if len(k.files) > 1 {
		return misuse("clerk_too_many_files", "value", k.files[1], "command", "help")
	}
	if len(k.files) == 1 {
		return k.helpOn(k.files[0])
	}
	fmt.Fprintln(k.out, k.words.T("clerk.help_head"))
	fmt.Fprintln(k.out)
	for _, c := range commands() {
		fmt.Fprintf(k.out, "  clerk %-9s %s\n", c.name, k.words.T("clerk.about."+c.name))
	}
	fmt.Fprintln(k.out)
	fmt.Fprintln(k.out, k.words.T("clerk.help_foot"))
	return nil
}

func (k *clerk) helpOn(name string) error {
	if _, ok := commandNamed(name); !ok {
		return misuse("clerk_no_such_command", "value", name)
	}
	if name == "help" {
		k.files = nil
		return k.help()
	}
	folder, _ := practice.Folder() // only named here
	fmt.Fprint(k.out, k.words.T("clerk.help."+name, "folder", folder))
	return nil
}

// spoken tells that the program speaks a language.
func spoken(tag string) bool {
	return strings.HasPrefix(strings.ToLower(tag), words.StyleOf(tag).Language)
}
