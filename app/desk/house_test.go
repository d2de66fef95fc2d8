package desk

import (
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// The house: an import only ever points down, from app to store to model.
func TestImportsPointDown(t *testing.T) {
	none := func(string) bool { return false }
	within := func(prefixes ...string) func(string) bool {
		return func(path string) bool {
			return slices.ContainsFunc(prefixes, func(p string) bool { return path == p || strings.HasPrefix(path, p+"/") })
		}
	}
	norm := within("golang.org/x/text/unicode/norm", "golang.org/x/text/transform")
	for _, room := range []struct {
		name string
		// own are the packages of the house that it may stand on, and others the
		// libraries; nil for any.
		own, others func(string) bool
		never       []string
	}{
		{"model/loan", none, none, nil},
		{"model", within("weighhouse/model"), norm, []string{"net", "database/sql"}},
		{"model/duty", within("weighhouse/model"), none, []string{"database/sql"}},
		{"store/vault", none, within("golang.org/x"), []string{"database/sql"}},
		{"store/workbook", within("weighhouse/model"), nil, []string{"database/sql"}},
		{"store/table", within("weighhouse/model", "weighhouse/store/workbook"), nil, []string{"database/sql"}},
		{"store", within("weighhouse/model", "weighhouse/store"), nil, nil},
		{"assets", none, none, nil},
		{"app/words", within("weighhouse/model", "weighhouse/assets"), nil, []string{"database/sql"}},
		{"app/clerk", within("weighhouse/model", "weighhouse/store", "weighhouse/assets", "weighhouse/app/words", "weighhouse/app/practice"), nil, []string{"fyne.io/fyne/v2"}},
		{"app/desk", within("weighhouse/model", "weighhouse/store", "weighhouse/assets", "weighhouse/app/words", "weighhouse/app/practice"), nil, []string{"fyne.io/fyne/v2/app"}},
	} {
		self := "weighhouse/" + room.name
		for _, path := range list(t, "-deps", "-f", "{{.ImportPath}}", "weighhouse/"+room.name) {
			switch {
			case path == self:
			case slices.Contains(room.never, path):
				t.Errorf("%s must not stand on %s", room.name, path)
			case within("weighhouse")(path) && !room.own(path):
				t.Errorf("%s must not stand on %s: imports point down", room.name, path)
			case room.others != nil && library(path) && !room.others(path):
				t.Errorf("%s must not stand on the library %s", room.name, path)
			}
		}
	}
	// The model does no input or output.
	for _, path := range list(t, "-f", "{{join .Imports \"\\n\"}}", "weighhouse/model/...") {
		if within("os", "io", "net", "log", "bufio")(path) {
			t.Errorf("model imports %s", path)
		}
	}
	// SQL is written in store alone, and one file opens Fyne's driver.
	only(t, "database/sql", "store")
	only(t, "fyne.io/fyne/v2/app", "app")
}

// library tells a library's package from one of Go's own.
func library(path string) bool {
	host, _, _ := strings.Cut(path, "/")
	return strings.Contains(host, ".")
}

// only tells that no folder but one imports a package.
func only(t *testing.T, path, folder string) {
	t.Helper()
	for _, line := range list(t, "-e", "-f", "{{.ImportPath}} {{join .Imports \" \"}}", "weighhouse/...") {
		words := strings.Fields(line)
		if words[0] != "weighhouse/"+folder && slices.Contains(words[1:], path) {
			t.Errorf("%s imports %s", words[0], path)
		}
	}
}

func list(t *testing.T, arguments ...string) []string {
	t.Helper()
	c := exec.Command("go", append([]string{"list"}, arguments...)...)
	c.Env = append(os.Environ(), "CGO_ENABLED=0")
	c.Stderr = os.Stderr
	out, err := c.Output()
	if err != nil {
		t.Fatal(err)
	}
	return strings.Split(strings.TrimSpace(string(out)), "\n")
}

// At the top of the repository stands the house and nothing else.
func TestNothingElseAtTheTop(t *testing.T) {
	known := []string{"app", "model", "store", "assets", "testdata", "go.mod", "go.sum", "README.md", "DEVELOPERS.md"}
	top, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	entries, err := os.ReadDir(top)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && !slices.Contains(known, e.Name()) {
			t.Errorf("%s stands at the top", e.Name())
		}
	}
	for _, name := range known {
		if _, err := os.Stat(filepath.Join(top, name)); err != nil {
			t.Errorf("%s is missing", name)
		}
	}
}
