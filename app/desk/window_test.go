//go:build window

package desk_test

import (
	"bytes"
	"context"
	"encoding/csv"
	"flag"
	"fmt"
	"image/png"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"weighhouse/app/practice"
	"weighhouse/assets"
	"weighhouse/model"
	"weighhouse/store/workbook"
)

var (
	program = flag.String("program", "", "the built window program")
	clerk   = flag.String("clerk", "", "the built companion program")
	shots   = flag.String("shots", "", "the folder for pictures")
)

// screen is a virtual display with a window manager and the program on it.
type screen struct {
	t       testing.TB
	display string
	program *exec.Cmd
}

// bare starts a virtual display of a size, with nothing on it.
func bare(t testing.TB, size string, options ...string) *screen {
	t.Helper()
	read, write, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	server := exec.Command("Xvfb", append([]string{"-displayfd", "3", "-screen", "0", size + "x24"}, options...)...)
	server.ExtraFiles = []*os.File{write}
	start(t, server)
	write.Close()
	number := make([]byte, 16)
	n, err := read.Read(number)
	if err != nil {
		t.Fatalf("Xvfb gave no display: %v", err)
	}
	return &screen{t: t, display: ":" + strings.TrimSpace(string(number[:n]))}
}

// open starts the program at a size of the screen and waits until it has
// drawn a page.
func open(t testing.TB, size string, arguments ...string) *screen {
	t.Helper()
	s := bare(t, size)
	start(t, s.command("openbox"))
	s.program = s.command(*program, arguments...)
	s.program.Stderr = os.Stderr
	start(t, s.program)
	s.run("xdotool", "search", "--sync", "--onlyvisible", "--name", "Weighhouse")
	s.run("sh", "-c", "w=$(xdotool search --onlyvisible --name Weighhouse | tail -1); xdotool windowsize $w 100% 100% windowmove $w 0 0 windowactivate --sync $w")
	s.settle()
	return s
}

func start(t testing.TB, c *exec.Cmd) {
	t.Helper()
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { c.Process.Kill(); c.Wait() })
}

func (s *screen) command(name string, arguments ...string) *exec.Cmd {
	c := exec.Command(name, arguments...)
	home := s.t.TempDir()
	c.Env = append(os.Environ(), "DISPLAY="+s.display, "LIBGL_ALWAYS_SOFTWARE=1", "LANG=en_GB.UTF-8", "HOME="+home, "XDG_CONFIG_HOME="+home)
	return c
}

func (s *screen) run(name string, arguments ...string) []byte {
	s.t.Helper()
	out, err := s.command(name, arguments...).Output()
	if err != nil {
		s.t.Fatalf("%s %q: %v", name, arguments, err)
	}
	return out
}

// keys presses keys by name.
func (s *screen) keys(names ...string) {
	s.t.Helper()
	s.run("xdotool", append([]string{"key", "--delay", "40"}, names...)...)
}

// answers types each answer and goes on with Enter.
func (s *screen) answers(texts ...string) {
	s.t.Helper()
	for _, text := range texts {
		if text != "" {
			s.run("xdotool", "type", "--delay", "25", "--", text)
		}
		s.keys("Return")
	}
}

// settle waits until the picture has stood still for half a second.
func (s *screen) settle() []byte {
	s.t.Helper()
	var last []byte
	still := 0
	for range 100 {
		now := s.run("import", "-window", "root", "png:-")
		if bytes.Equal(now, last) {
			if still++; still == 3 && !plain(now) {
				return now
			}
		} else {
			still = 0
		}
		last = now
		time.Sleep(150 * time.Millisecond)
	}
	s.t.Fatal("the window did not come to rest")
	return nil
}

// plain tells that a picture shows next to nothing.
func plain(picture []byte) bool {
	i, err := png.Decode(bytes.NewReader(picture))
	if err != nil {
		return true
	}
	colours := map[string]bool{}
	for y := 0; y < i.Bounds().Dy(); y += 3 {
		for x := 0; x < i.Bounds().Dx(); x += 3 {
			colours[fmt.Sprint(i.At(x, y))] = true
		}
	}
	return len(colours) < 20
}

// shot keeps a picture for people to look at.
func (s *screen) shot(name string) []byte {
	s.t.Helper()
	picture := s.settle()
	if err := os.MkdirAll(*shots, 0o755); err != nil {
		s.t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(*shots, name+".png"), picture, 0o644); err != nil {
		s.t.Fatal(err)
	}
	return picture
}

// close shuts the window as a person would and waits for the program's end.
func (s *screen) close() {
	s.t.Helper()
	s.keys("alt+F4")
	done := make(chan error, 1)
	go func() { done <- s.program.Wait() }()
	select {
	case err := <-done:
		if err != nil {
			s.t.Fatalf("the program ended badly: %v", err)
		}
	case <-time.After(20 * time.Second):
		s.t.Fatal("the program did not end")
	}
}

// household is what the worksheet's lines are answered with, in their order.
var household = []struct{ line, amount string }{
	{"sales", "800"}, {"harvest", "0"}, {"wages", "0"}, {"sent", "0"}, {"stock", "500"},
	{"running", "50"}, {"food", "10"}, {"house", "80"}, {"school", "20"}, {"other_loans", "50"},
}

// A whole application by keyboard alone: the figures kept are those that the
// companion program makes of the same answers.
func TestWindowApplication(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "branch")
	s := open(t, "1366x768", "-practice", "-folder", folder)
	s.shot("1-begin")
	s.answers("Ana Example", "", "", "3000", "12", "1985", "m", "y", "0", "w", "2015")
	s.keys("Down", "Return")
	s.answers("6", "y", "200", "100")
	s.shot("2-half-way")
	for _, h := range household[:len(household)-1] {
		s.answers(h.amount)
	}
	s.run("xdotool", "type", household[len(household)-1].amount)
	s.keys("F12", "Return")
	s.shot("3-result")
	s.keys("F10")
	for _, page := range []struct{ key, name string }{{"F5", "4-why"}, {"F6", "5-details"}, {"F7", "6-fits"}, {"F3", "7-kept"}, {"F4", "8-scorecards"}, {"F1", "9-keys"}} {
		s.keys(page.key)
		s.shot(page.name)
	}
	s.keys("Escape", "F9")
	s.shot("10-hidden")
	s.keys("F9", "F11", "F8")
	s.shot("11-dark-french")
	s.close()

	session, err := practice.Open(context.Background(), folder)
	if err != nil {
		t.Fatal(err)
	}
	defer session.Branch().Close()
	kept, err := session.Results(context.Background(), 0, 1)
	if err != nil || len(kept) != 1 {
		t.Fatal(kept, err)
	}
	edition, err := session.Edition(context.Background(), kept[0].Edition)
	if err != nil {
		t.Fatal(err)
	}
	premises := strings.Fields(strings.SplitN(kept[0].Answers, "premises\t", 2)[1])[0]
	want := byClerk(t, premises)
	got := []string{kept[0].LogOdds.String(), kept[0].PD.String(), kept[0].Score.String(), kept[0].Band, string(kept[0].Recommendation)}
	if fmt.Sprint(got) != fmt.Sprint(want) {
		t.Errorf("the window kept %v, the companion program says %v", got, want)
	}
	if kept[0].Cleared() {
		t.Error("what was handed in counts as cleared")
	}
	if a, problems := edition.ParseAnswers(kept[0].Answers); len(problems) > 0 || !a.At(mustIndex(t, edition, "surplus")).Seen {
		t.Error("the paper seen for the surplus was not kept", problems)
	}
}

func mustIndex(t *testing.T, e *model.Edition, code string) int {
	t.Helper()
	item, ok := e.Item(code)
	if !ok {
		t.Fatal("no characteristic", code)
	}
	return item.Index
}

// byClerk scores the same answers with the companion program.
func byClerk(t *testing.T, premises string) []string {
	t.Helper()
	dir := t.TempDir()
	header := []string{"amount", "term", "birth_date", "sex", "borrowed_before", "worst_delay", "line_of_work", "trading_since",
		"premises", "work_days", "books", "owed_lenders", "owed_shops", "surplus.seen"}
	row := []string{"3000", "12", "1985", "man", "yes", "0", "workshop", "2015", premises, "6", "yes", "200", "100", "yes"}
	for _, h := range household {
		header, row = append(header, "surplus."+h.line), append(row, h.amount)
	}
	text := strings.Join(header, ",") + "\n" + strings.Join(row, ",") + "\n"
	in, out, card := filepath.Join(dir, "in.csv"), filepath.Join(dir, "out.csv"), filepath.Join(dir, "card.xlsx")
	if err := os.WriteFile(in, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	for _, arguments := range [][]string{{"practice", card}, {"score", "-card", card, "-in", in, "-out", out}} {
		if said, err := exec.Command(*clerk, arguments...).CombinedOutput(); err != nil {
			t.Fatalf("clerk %q: %v\n%s", arguments, err, said)
		}
	}
	b, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(bytes.NewReader(b)).ReadAll()
	if err != nil || len(rows) != 2 {
		t.Fatal(rows, err)
	}
	at := map[string]string{}
	for i, name := range rows[0] {
		at[name] = rows[1][i]
	}
	return []string{at["log_odds"], at["pd"], at["score"], at["band"], at["recommendation"]}
}

// A workbook with mistakes is refused and changes nothing; the next edition is
// accepted; all by keyboard.
func TestWindowScorecards(t *testing.T) {
	dir := t.TempDir()
	folder := filepath.Join(dir, "branch")
	good := filepath.Join(dir, "next.xlsx")
	bad := filepath.Join(dir, "slipped.xlsx")
	reading, err := workbook.Read(bytes.NewReader(assets.PracticeWorkbooks()[0]))
	if err != nil || reading.Edition == nil {
		t.Fatal(err, reading.Problems)
	}
	next := reading.Scorecard
	next.Card.Edition++
	writeCard(t, good, next)
	next.Attributes = append([]model.Attribute(nil), next.Attributes...)
	for i := range next.Attributes {
		if l := &next.Attributes[i].LogOdds; l.Set && l.Value != 0 {
			l.Value = -l.Value // a swapped sign
			break
		}
	}
	writeCard(t, bad, next)

	s := open(t, "1024x700", "-practice", "-folder", folder)
	s.keys("F4")
	s.settle()
	s.keys("shift+Tab")
	s.keys("ctrl+a")
	s.answers(bad)
	s.shot("12-refused")
	s.keys("Escape")
	s.settle()
	s.keys("shift+Tab")
	s.keys("ctrl+a")
	s.answers(good)
	s.shot("13-sound")
	s.keys("shift+Tab", "Return")
	s.shot("14-accepted")
	s.close()

	session, err := practice.Open(context.Background(), folder)
	if err != nil {
		t.Fatal(err)
	}
	defer session.Branch().Close()
	editions, err := session.Editions(context.Background())
	if err != nil || len(editions) != 3 {
		t.Fatalf("%d editions, want 3 (%v)", len(editions), err)
	}
	if got := editions[0].Card; got.Edition != next.Card.Edition || got.ProductCode != next.Card.ProductCode {
		t.Errorf("the newest edition is %d of %s", got.Edition, got.ProductCode)
	}
}

func writeCard(t *testing.T, path string, s model.Scorecard) {
	t.Helper()
	var b bytes.Buffer
	if err := workbook.Write(&b, s); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, b.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
}

// Two windows on one desk: the second says so and stops.
func TestWindowTwice(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "branch")
	session, err := practice.Open(context.Background(), folder)
	if err != nil {
		t.Fatal(err)
	}
	defer session.Branch().Close()
	s := open(t, "1024x700", "-practice", "-folder", folder)
	s.shot("15-second-window")
	s.keys("alt+F4")
	if err := s.program.Wait(); err == nil {
		t.Error("a second window on one desk must end with an error")
	}
}

// A machine that cannot show the window is told so in plain words; no process
// stays that nobody sees.
func TestWindowWithoutOpenGL(t *testing.T) {
	silent, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer silent.Close()
	plainly, lacking := bare(t, "640x480"), bare(t, "640x480", "-extension", "GLX")
	for _, c := range []struct{ name, display, set, says string }{
		{"no display is named", "", "", "no display"},
		{"no such display", ":987654", "", "no display"},
		{"a display without OpenGL", lacking.display, "", "OpenGL"},
		{"OpenGL too old", plainly.display, "MESA_GL_VERSION_OVERRIDE=1.4", "OpenGL"},
		{"no OpenGL driver", plainly.display, "LIBGL_DRIVERS_PATH=/nonexistent", "OpenGL"},
		{"a display that never answers", fmt.Sprint("127.0.0.1:", silent.Addr().(*net.TCPAddr).Port-6000), "", "OpenGL"},
	} {
		s := &screen{t: t, display: c.display}
		program := s.command(*program, "-practice", "-folder", filepath.Join(t.TempDir(), "branch"))
		program.Env = append(program.Env, c.set)
		var said bytes.Buffer
		program.Stderr = &said
		start(t, program)
		done := make(chan error, 1)
		go func() { done <- program.Wait() }()
		select {
		case <-done:
		case <-time.After(time.Minute): // its own limit is 10 seconds
			t.Fatalf("%s: the program goes on, unseen", c.name)
		}
		if program.ProcessState.ExitCode() != 1 || !strings.Contains(said.String(), "weighhouse: ") ||
			!strings.Contains(said.String(), c.says) || strings.Contains(said.String(), "goroutine") {
			t.Errorf("%s: %v\n%s", c.name, program.ProcessState, said.String())
		}
	}
}
