package words

import (
	"fmt"
	"go/ast"
	goparser "go/parser"
	"go/token"
	"io/fs"
	"maps"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/nicksnyder/go-i18n/v2/i18n"

	"weighhouse/model"
)

// messages are a language's by key; no key may stand in two files.
func messages(t *testing.T, language string) map[string]*i18n.Message {
	t.Helper()
	all := map[string]*i18n.Message{}
	for _, m := range load(language) {
		if all[m.ID] != nil {
			t.Errorf("%s: %s stands twice", language, m.ID)
		}
		all[m.ID] = m
	}
	return all
}

var blank = regexp.MustCompile(`\{\{[^}]*\}\}`)
var blankName = regexp.MustCompile(`\.(\w+)`)

// blanks are the names of a message's blanks.
func blanks(m *i18n.Message) string {
	names := map[string]bool{}
	for _, b := range blank.FindAllString(m.One+m.Many+m.Other, -1) {
		for _, n := range blankName.FindAllStringSubmatch(b, -1) {
			names[n[1]] = true
		}
	}
	return strings.Join(slices.Sorted(maps.Keys(names)), " ")
}

// Every sentence stands in every language, with the same blanks and plurals,
// and reads as a template.
func TestMessagesAreComplete(t *testing.T) {
	english := messages(t, "en")
	for _, l := range Languages() {
		these, parser := messages(t, l.Code), New(Style{Language: l.Code}).parser
		for key, m := range english {
			other := these[key]
			switch {
			case other == nil:
				t.Errorf("%s: no %s", l.Code, key)
				continue
			case blanks(m) != blanks(other):
				t.Errorf("%s: %s has the blanks %q, not %q", l.Code, key, blanks(other), blanks(m))
			case (m.One == "") != (other.One == ""):
				t.Errorf("%s: %s has other plurals than in English", l.Code, key)
			case other.Other == "":
				t.Errorf("%s: %s is empty", l.Code, key)
			case other.Few+other.Two+other.Zero != "":
				t.Errorf("%s: %s has a plural that is not used", l.Code, key)
			}
			for _, form := range []string{other.One, other.Many, other.Other} {
				if _, err := parser.Parse(form, "", ""); err != nil {
					t.Errorf("%s: %s: %v", l.Code, key, err)
				}
			}
		}
		for key := range these {
			if english[key] == nil {
				t.Errorf("%s: %s is not in English", l.Code, key)
			}
		}
	}
}

// The window's font draws all of Latin-1 and Latin Extended-A and, beyond
// them, the marks of these sentences; not every machine has other fonts.
func TestMessagesCanBeDrawn(t *testing.T) {
	for _, l := range Languages() {
		for key, m := range messages(t, l.Code) {
			for _, c := range m.One + m.Many + m.Other {
				if c > 0x17f && !strings.ContainsRune("“”‘’…–", c) {
					t.Errorf("%s: %s has %q", l.Code, key, c)
				}
			}
		}
	}
}

// Every entry of the model's closed lists that a person sees has a name.
func TestNames(t *testing.T) {
	english := messages(t, "en")
	lists := map[string][]string{}
	for _, l := range []interface{ Options() []string }{
		model.Approve, model.Day, model.NewClients, model.Told, model.Safer, model.Estimated, model.WhenComplete,
		model.Adds, model.EqualPayments, model.PerYear, model.Flat, model.Months,
	} {
		lists[listOf(l)] = l.Options()
	}
	for _, s := range NumberStyles() {
		lists[listOf(s)] = append(lists[listOf(s)], string(s))
	}
	for _, o := range DateOrders() {
		lists[listOf(o)] = append(lists[listOf(o)], string(o))
	}
	for list, entries := range lists {
		for _, e := range entries {
			if list == "" || english[list+"."+e] == nil {
				t.Errorf("no name for %q in %q", e, list)
			}
		}
	}
}

// sources parses the Go files under the named folders, tests left out.
func sources(t *testing.T, folders ...string) map[string][]*ast.File {
	t.Helper()
	packages := map[string][]*ast.File{}
	for _, folder := range folders {
		err := filepath.WalkDir(filepath.Join("..", "..", folder), func(path string, d fs.DirEntry, err error) error {
			if err != nil || d.IsDir() || filepath.Ext(path) != ".go" || strings.HasSuffix(path, "_test.go") {
				return err
			}
			f, err := goparser.ParseFile(positions, path, nil, 0)
			packages[filepath.Dir(path)] = append(packages[filepath.Dir(path)], f)
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	return packages
}

var positions = token.NewFileSet()

func literal(e ast.Expr) (string, bool) {
	l, ok := e.(*ast.BasicLit)
	if !ok || l.Kind != token.STRING {
		return "", false
	}
	s, err := strconv.Unquote(l.Value)
	return s, err == nil
}

// Every key that the programs ask for exists, and is given the blanks it has.
func TestUsedKeysExist(t *testing.T) {
	english := messages(t, "en")
	used := 0
	for _, files := range sources(t, "app") {
		for _, f := range files {
			ast.Inspect(f, func(n ast.Node) bool {
				call, ok := n.(*ast.CallExpr)
				if !ok {
					return true
				}
				s, ok := call.Fun.(*ast.SelectorExpr)
				if !ok || s.Sel.Name != "T" || len(call.Args) == 0 {
					return true
				}
				used++
				at := positions.Position(call.Pos())
				if key, ok := literal(call.Args[0]); !ok {
					if prefix := beginning(call.Args[0]); prefix != "" && !slices.ContainsFunc(slices.Collect(maps.Keys(english)), func(k string) bool { return strings.HasPrefix(k, prefix) }) {
						t.Errorf("%s: no key begins with %q", at, prefix)
					}
				} else if m := english[key]; m == nil {
					t.Errorf("%s: no key %q", at, key)
				} else if given := argNames(call); given != "" && given != blanks(m) && strings.Join(slices.DeleteFunc(strings.Fields(given), func(s string) bool { return s == "n" }), " ") != blanks(m) {
					t.Errorf("%s: %s has the blanks %q but is given %q", at, key, blanks(m), given)
				}
				return true
			})
		}
	}
	if used < 50 {
		t.Errorf("only %d uses found: the search is broken", used)
	}
}

// beginning is the literal with which a key put together begins.
func beginning(e ast.Expr) string {
	if b, ok := e.(*ast.BinaryExpr); ok && b.Op == token.ADD {
		if s, ok := literal(b.X); ok {
			return s
		}
		return beginning(b.X)
	}
	return ""
}

// argNames are the names given to T; "-" for none, "" where they cannot be
// told from the source.
func argNames(call *ast.CallExpr) string {
	var names []string
	if call.Ellipsis != 0 {
		return ""
	}
	for i := 1; i < len(call.Args); i += 2 {
		s, ok := literal(call.Args[i])
		if !ok {
			return ""
		}
		names = append(names, s)
	}
	slices.Sort(names)
	return strings.Join(names, " ")
}

// Every problem that the programs can find has words, and no words stand for
// one that cannot be found. A code stands in the
// source as a Problem's Code, as the argument of a function's parameter named
// code, as what is put into a variable of that name or into a field Code, as
// the result of a function whose name ends in Code, or as a constant of
// model/loan.
func TestEveryProblemHasWords(t *testing.T) {
	english := messages(t, "en")
	written := map[string]bool{}
	for folder, files := range sources(t, "model", "store", "app") {
		note := func(e ast.Expr) {
			code, ok := literal(e)
			if !ok || !isCode.MatchString(code) {
				return
			}
			if english["problem."+code] == nil {
				t.Errorf("%s: problem %q has no words", positions.Position(e.Pos()), code)
			}
		}
		for _, f := range files {
			// A file's own closures of a name come before another file's.
			takers := codeTakers(files)
			maps.Copy(takers, codeTakers([]*ast.File{f}))
			inspectCodes(f, takers, filepath.Base(folder) == "loan", note)
			ast.Inspect(f, func(n ast.Node) bool {
				if l, ok := n.(*ast.BasicLit); ok {
					text, _ := literal(l)
					written[text] = true
				}
				return true
			})
		}
	}
	for key := range english {
		if code, ok := strings.CutPrefix(key, "problem."); ok && !written[code] {
			t.Errorf("%s: nothing finds this problem", key)
		}
	}
}

var isCode = regexp.MustCompile(`^[a-z0-9]+(_[a-z0-9]+)*$`)

// codeTakers are the functions with a parameter named code, and its place.
func codeTakers(files []*ast.File) map[string]int {
	takers := map[string]int{}
	note := func(name string, f *ast.FuncType) {
		at := 0
		for _, field := range f.Params.List {
			for _, p := range field.Names {
				if p.Name == "code" && fmt.Sprint(field.Type) == "string" {
					takers[name] = at
				}
				at++
			}
		}
	}
	for _, f := range files {
		ast.Inspect(f, func(n ast.Node) bool {
			switch n := n.(type) {
			case *ast.FuncDecl:
				if n.Name.Name != "Text" { // Labels.Text takes the codes of the sheet Words
					note(n.Name.Name, n.Type)
				}
			case *ast.AssignStmt:
				if lit, ok := n.Rhs[0].(*ast.FuncLit); ok {
					if name, ok := n.Lhs[0].(*ast.Ident); ok {
						note(name.Name, lit.Type)
					}
				}
			}
			return true
		})
	}
	return takers
}

func inspectCodes(f *ast.File, takers map[string]int, loan bool, note func(ast.Expr)) {
	ast.Inspect(f, func(n ast.Node) bool {
		switch n := n.(type) {
		case *ast.CompositeLit:
			problem := n.Type == nil || strings.HasSuffix(fmt.Sprint(n.Type), "Problem") || strings.HasSuffix(fmt.Sprint(n.Type), "Problem}")
			for _, e := range n.Elts {
				if kv, ok := e.(*ast.KeyValueExpr); ok && problem && fmt.Sprint(kv.Key) == "Code" {
					note(kv.Value)
				}
			}
		case *ast.CallExpr:
			name := ""
			switch fun := n.Fun.(type) {
			case *ast.Ident:
				name = fun.Name
			case *ast.SelectorExpr:
				name = fun.Sel.Name
			}
			if at, ok := takers[name]; ok && at < len(n.Args) {
				note(n.Args[at])
			}
		case *ast.AssignStmt:
			for i, l := range n.Lhs {
				id, ok := l.(*ast.Ident)
				s, field := l.(*ast.SelectorExpr)
				if (ok && id.Name == "code" || field && s.Sel.Name == "Code") && i < len(n.Rhs) {
					note(n.Rhs[i])
				}
			}
		case *ast.FuncDecl:
			if strings.HasSuffix(n.Name.Name, "Code") && n.Body != nil {
				ast.Inspect(n.Body, func(n ast.Node) bool {
					if r, ok := n.(*ast.ReturnStmt); ok && len(r.Results) == 1 {
						note(r.Results[0])
					}
					return true
				})
			}
		case *ast.GenDecl:
			if loan && n.Tok == token.CONST {
				for _, s := range n.Specs {
					for _, v := range s.(*ast.ValueSpec).Values {
						if code, _ := literal(v); strings.HasPrefix(code, "loan_") || strings.HasPrefix(code, "cost_") {
							note(v)
						}
					}
				}
			}
		}
		return true
	})
}
