package main

import (
	"fmt"
	"io"
	"os"
	"os/exec"
	"strings"
	"testing"
)

// peak is the most memory, in kilobytes, that the program held while it scored
// so many rows from standard input.
func peak(t *testing.T, dir string, rows int) (most int64) {
	t.Helper()
	c := exec.Command(program, "score", "-card", "card.xlsx", "-in", "-", "-out", "-")
	c.Dir = dir
	c.Stdout = io.Discard
	in, err := c.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	const header = "ref,amount,term,home,has_stall,stall_years,opened,late_days,household\n"
	if _, err := io.WriteString(in, header); err != nil {
		t.Fatal(err)
	}
	const some = 1000
	chunk := strings.Repeat("A-1,1000,12,own,yes,7.5,2019-05-01,0,612.3\n", some-1) + "A-2,\"stray,12\n"
	for range rows / some {
		if _, err := io.WriteString(in, chunk); err != nil {
			t.Fatal(err)
		}
	}
	// All but what stands in the pipe is scored. What the system tells after the
	// end is no less than the memory of the test that started the program.
	status := read(t, fmt.Sprintf("/proc/%d/status", c.Process.Pid))
	in.Close()
	if err := c.Wait(); err != nil {
		t.Fatal(err)
	}
	_, kilobytes, _ := strings.Cut(status, "VmHWM:")
	if _, err := fmt.Sscan(kilobytes, &most); err != nil {
		t.Fatal(err)
	}
	return most
}

// Many rows need no more memory than few, but for what the collector lets lie.
func TestMemoryDoesNotGrow(t *testing.T) {
	dir := desk(t)
	few, many := peak(t, dir, 10_000), peak(t, dir, 200_000)
	t.Logf("%d kB for ten thousand rows, %d kB for two hundred thousand", few, many)
	if many > few+8<<10 {
		t.Errorf("%d kB for ten thousand rows, %d kB for two hundred thousand", few, many)
	}
}

// An interruption leaves no results and nothing half written.
func TestInterrupted(t *testing.T) {
	dir := desk(t)
	c := exec.Command(program, "score", "-card", "card.xlsx", "-in", "-", "-out", "out.csv")
	c.Dir = dir
	var told strings.Builder
	c.Stderr = &told
	in, err := c.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(in, "amount\n"+strings.Repeat("1000\n", 100_000)); err != nil {
		t.Fatal(err)
	}
	if err := c.Process.Signal(os.Interrupt); err != nil {
		t.Fatal(err)
	}
	c.Wait()
	files, err := os.ReadDir(dir)
	if c.ProcessState.ExitCode() != 1 || !strings.Contains(told.String(), "Interrupted") || err != nil || len(files) != 1 {
		t.Error(c.ProcessState, told.String(), files, err)
	}
}

// A full disk is said.
func TestFullDisk(t *testing.T) {
	code, _, told := call(t, desk(t), "amount\n1\n", "score", "-card", "card.xlsx", "-in", "-", "-out", "/dev/full")
	if code != 1 || !strings.Contains(told, "\n/dev/full could not be used: no space left") {
		t.Error(code, told)
	}
}
