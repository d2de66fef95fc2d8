//go:build window

package desk_test

import (
	"context"
	"encoding/binary"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"weighhouse/app/desk"
	"weighhouse/app/practice"
)

// What the whole program promises, started and typed into as by a person:
//
//	go test -tags window -run '^$' -bench Window -benchtime 10x -timeout 1h ./app/desk -args -program "$PWD/.bin/weighhouse"

// From the start of the process until its first page is painted, with 200,000
// results kept. The first start of all is left out.
func BenchmarkWindowStart(b *testing.B) {
	folder, home, frame := filepath.Join(b.TempDir(), "branch"), b.TempDir(), b.TempDir()
	desk.Fill(b, folder, 200_000)
	s := bare(b, "1366x768", "-fbdir", frame)
	start(b, s.command("openbox"))
	picture, err := os.Open(filepath.Join(frame, "Xvfb_screen0"))
	if err != nil {
		b.Fatal(err)
	}
	defer picture.Close()
	once := func() time.Duration {
		p := s.command(*program, "-practice", "-folder", folder)
		p.Env = append(p.Env, "HOME="+home, "XDG_CONFIG_HOME="+home)
		begin := time.Now()
		start(b, p)
		await(b, func() bool { return stands(b, picture) })
		took := time.Since(begin)
		time.Sleep(time.Second)
		p.Process.Signal(syscall.SIGTERM)
		p.Wait()
		await(b, func() bool { return !stands(b, picture) })
		return took
	}
	once()
	var times []time.Duration
	for b.Loop() {
		times = append(times, once())
	}
	slices.Sort(times)
	b.ReportMetric(0, "ns/op")
	b.ReportMetric(float64(times[0].Milliseconds()), "fastest-ms")
	b.ReportMetric(float64(times[len(times)/2].Milliseconds()), "median-ms")
}

// await waits for something, a minute at most.
func await(b *testing.B, done func() bool) {
	b.Helper()
	for limit := time.Now().Add(time.Minute); !done(); time.Sleep(5 * time.Millisecond) {
		if time.Now().After(limit) {
			b.Fatal("waited a minute in vain")
		}
	}
}

// stands tells that the ground of the practice banner is on the screen, down
// whose middle it looks. The server keeps the screen in a file, in the X
// Window Dump format: big-endian words, of which the first is the head's
// length, the 13th a line's, and the 20th how many colours follow the head, of
// 12 bytes each; then the pixels, here blue, green, red and nothing.
func stands(b *testing.B, picture *os.File) bool {
	b.Helper()
	at := func(offset int64) []byte {
		word := make([]byte, 4)
		if _, err := picture.ReadAt(word, offset); err != nil {
			b.Fatal(err)
		}
		return word
	}
	number := func(word int64) int64 { return int64(binary.BigEndian.Uint32(at(4 * word))) }
	pixels := number(0) + 12*number(19)
	for y := range int64(768) {
		if c := at(pixels + y*number(12) + 4*1366/2); c[0] == 0xcb && c[1] == 0xee && c[2] == 0xfb {
			return true
		}
	}
	return false
}

// Memory of the process's own after 200 answers, in whole applications.
func BenchmarkWindowMemory(b *testing.B) {
	for b.Loop() {
		folder := filepath.Join(b.TempDir(), "branch")
		s := open(b, "1366x768", "-practice", "-folder", folder)
		answers, kept := 0, 200 // those of the practice branch
		for answers < 200 {
			s.answers(fmt.Sprint("Ana Example ", kept), "", "", "3000", "12", "1985", "m", "y", "0", "w", "2015")
			s.keys("Down", "Return")
			s.answers("6", "y", "200", "100")
			for _, h := range household {
				s.answers(h.amount)
			}
			s.keys("F10", "F5", "Escape", "F2")
			answers, kept = answers+13+len(household), kept+1
		}
		s.settle()
		b.ReportMetric(float64(s.status(b, "RssAnon"))/1024, "MiB")
		b.ReportMetric(float64(answers), "answers")
		s.close()
		session, err := practice.Open(context.Background(), folder)
		if err != nil {
			b.Fatal(err)
		}
		if n, err := session.ResultCount(context.Background()); n != kept {
			b.Errorf("%d results kept, want %d (%v)", n, kept, err)
		}
		session.Branch().Close()
	}
	b.ReportMetric(0, "ns/op")
}

// status is a figure of the program's /proc status, in kB.
func (s *screen) status(b *testing.B, name string) int {
	b.Helper()
	text, err := os.ReadFile(fmt.Sprintf("/proc/%d/status", s.program.Process.Pid))
	if err != nil {
		b.Fatal(err)
	}
	_, rest, _ := strings.Cut(string(text), name+":")
	n, err := strconv.Atoi(strings.Fields(rest)[0])
	if err != nil {
		b.Fatal(err)
	}
	return n
}

// How much of a core the program takes in half a minute while a box has the
// focus and nothing is done.
func BenchmarkWindowIdle(b *testing.B) {
	s := open(b, "1366x768", "-practice", "-folder", filepath.Join(b.TempDir(), "branch"))
	s.keys("Return", "Return", "Return", "1")
	s.settle()
	used := func() int {
		text, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", s.program.Process.Pid))
		if err != nil {
			b.Fatal(err)
		}
		fields := strings.Fields(string(text[strings.LastIndexByte(string(text), ')')+1:]))
		user, _ := strconv.Atoi(fields[11])
		system, _ := strconv.Atoi(fields[12])
		return user + system // in hundredths of a second
	}
	for b.Loop() {
		before := used()
		time.Sleep(30 * time.Second)
		b.ReportMetric(float64(used()-before)/30, "%-of-a-core")
	}
	b.ReportMetric(0, "ns/op")
}
