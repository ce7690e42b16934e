//go:build unix

package main

import (
	"bytes"
	"errors"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
	"testing"
	"time"
)

// The tests below start the program as a process and do to it what can happen to a
// process: it is ended, started twice, given odd surroundings and little memory.

const oneSoak = `exclude: {steps: [trap, buy, settle, salt, column, reactive, forerun], agents: [sieve-4a, sieve-5a]}
lots:
  - {name: a lot, solvent: toluene, batch: 18 L, water: 400 mg/kg, target: 15 mg/kg, vessel height: 0.25 m}
`

// workplace is a folder with the program, a small job, and what a run of it writes.
type workplace struct {
	program, dir string
	whole        map[string][]byte // by name of the file
	stdout       []byte
	took         time.Duration
}

var outputFiles = []string{"plan.xlsx", "plan.json", "tables/bills.csv", "tables/buying.csv", "tables/routes.csv"}

func newWorkplace(t *testing.T) *workplace {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	w := &workplace{program: filepath.Join(t.TempDir(), "parch"), dir: t.TempDir(), whole: map[string][]byte{}}
	if err := os.Symlink(self, w.program); err != nil { // under this name TestMain runs the program
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(w.dir, "job.yaml"), []byte(oneSoak), 0o644); err != nil {
		t.Fatal(err)
	}
	started := time.Now()
	if w.stdout, err = w.compare("--force").Output(); err != nil {
		t.Fatal(err)
	}
	w.took = time.Since(started)
	for _, name := range outputFiles {
		w.whole[name] = w.read(t, name)
	}
	return w
}

func (w *workplace) compare(more ...string) *exec.Cmd {
	args := []string{"compare", "job.yaml", "--draws", "0", "--workbook", "plan.xlsx", "--json", "plan.json", "--csv", "tables"}
	return w.command(append(args, more...)...)
}

func (w *workplace) command(args ...string) *exec.Cmd {
	cmd := exec.Command(w.program, args...)
	cmd.Dir = w.dir
	return cmd
}

func (w *workplace) read(t *testing.T, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join(w.dir, name))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// clear takes the outputs away.
func (w *workplace) clear(t *testing.T) {
	t.Helper()
	for _, name := range outputFiles {
		if err := os.Remove(filepath.Join(w.dir, name)); err != nil && !errors.Is(err, os.ErrNotExist) {
			t.Fatal(err)
		}
	}
}

// left checks that each output is whole or not there, and returns those that are
// there. Unfinished parts may stay behind only where they are allowed to.
func (w *workplace) left(t *testing.T, parts bool) (names []string) {
	t.Helper()
	err := filepath.WalkDir(w.dir, func(path string, e os.DirEntry, err error) error {
		if err != nil || e.IsDir() {
			return err
		}
		name, err := filepath.Rel(w.dir, path)
		switch whole, ok := w.whole[name]; {
		case ok && !bytes.Equal(w.read(t, name), whole):
			t.Errorf("%s is broken", name)
		case ok:
			names = append(names, name)
		case strings.HasSuffix(name, ".part.xlsx"), strings.HasSuffix(name, ".part"):
			if !parts {
				t.Errorf("%s stays behind", name)
			}
			return errors.Join(err, os.Remove(path))
		case name != "job.yaml":
			t.Errorf("%s was written", name)
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return names
}

func statusOf(err error) int {
	var exit *exec.ExitError
	switch {
	case err == nil:
		return 0
	case errors.As(err, &exit):
		return exit.ExitCode()
	}
	return -2
}

// Interrupts at 50 random moments of a run: each output is whole or not there,
// nothing else stays behind, and status 0 is given only where all are there.
func TestInterruptedAtAnyMoment(t *testing.T) {
	w := newWorkplace(t)
	r := rand.New(rand.NewPCG(9, 0))
	ended := map[int]int{}
	for i := range 50 {
		w.clear(t)
		cmd := w.compare()
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(time.Duration(r.Int64N(int64(w.took))))
		signal := []os.Signal{syscall.SIGINT, syscall.SIGTERM}[i%2]
		if err := cmd.Process.Signal(signal); err != nil && !errors.Is(err, os.ErrProcessDone) {
			t.Fatal(err)
		}
		status := statusOf(cmd.Wait())
		ended[status]++
		names := w.left(t, false)
		// -1: the signal came before the program had asked for it
		if !slices.Contains([]int{0, 1, -1}, status) || status == 0 && len(names) < len(outputFiles) || status == -1 && len(names) > 0 {
			t.Errorf("%v: status %d with %v", signal, status, names)
		}
	}
	t.Logf("ended with status: %v", ended)
}

// Killed outright at 20 random moments: each output is whole or not there.
func TestKilledAtAnyMoment(t *testing.T) {
	w := newWorkplace(t)
	r := rand.New(rand.NewPCG(10, 0))
	for range 20 {
		w.clear(t)
		cmd := w.compare()
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(w.took/2 + time.Duration(r.Int64N(int64(w.took/2))))
		if err := cmd.Process.Kill(); err != nil && !errors.Is(err, os.ErrProcessDone) {
			t.Fatal(err)
		}
		_ = cmd.Wait()
		w.left(t, true)
	}
}

// An interrupt ends the program within a few seconds, also where it waits for
// something that does not come: here a pipe that nobody writes to.
func TestInterruptWhileWaiting(t *testing.T) {
	w := newWorkplace(t)
	if err := syscall.Mkfifo(filepath.Join(w.dir, "pipe"), 0o600); err != nil {
		t.Fatal(err)
	}
	defer os.Remove(filepath.Join(w.dir, "pipe"))
	cmd := w.command("check", "pipe")
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	time.Sleep(w.took)
	if err := cmd.Process.Signal(syscall.SIGTERM); err != nil {
		t.Fatal(err)
	}
	stuck := time.AfterFunc(time.Minute, func() { _ = cmd.Process.Kill() })
	defer stuck.Stop()
	if status := statusOf(cmd.Wait()); status != 1 {
		t.Errorf("status %d", status)
	}
}

// Two runs at once to the same files: without --force each file is written by one of
// them and kept by the other, which says so; with --force both are done. The files
// are whole.
func TestTwoProcessesToTheSameFiles(t *testing.T) {
	w := newWorkplace(t)
	for _, force := range []string{"", "--force"} {
		w.clear(t)
		var two [2]*exec.Cmd
		for i := range two {
			two[i] = w.compare(strings.Fields(force)...)
			if err := two[i].Start(); err != nil {
				t.Fatal(err)
			}
		}
		statuses := []int{statusOf(two[0].Wait()), statusOf(two[1].Wait())}
		if names := w.left(t, false); len(names) != len(outputFiles) {
			t.Errorf("%q: %v", force, names)
		}
		slices.Sort(statuses)
		if want := map[string][]int{"": {0, 2}, "--force": {0, 0}}[force]; !slices.Equal(statuses, want) && !(force == "" && slices.Equal(statuses, []int{2, 2})) {
			t.Errorf("%q: statuses %v, want %v", force, statuses, want)
		}
	}
}

// What the clock, the language, the terminal and the number of processors are makes
// no difference to any byte.
func TestSurroundingsChangeNothing(t *testing.T) {
	w := newWorkplace(t)
	for _, surrounding := range [][]string{
		{"TZ=Pacific/Kiritimati"}, {"TZ=America/Los_Angeles"}, {"TZ=nowhere"},
		{"LC_ALL=C"}, {"LC_ALL=de_DE.UTF-8", "LANG=de_DE.UTF-8"}, {"LC_ALL=tr_TR.ISO-8859-9"}, {"LANG=ja_JP.eucJP"},
		{"TERM=dumb"}, {"TERM=vt100", "COLUMNS=20"}, {"NO_COLOR=1"}, {"HOME=/nowhere", "PATH="},
		{"GOMAXPROCS=1"}, {"GOMAXPROCS=2"}, {"GOMAXPROCS=8"},
	} {
		cmd := w.compare("--force")
		cmd.Env = append(os.Environ(), surrounding...)
		out, err := cmd.Output()
		if err != nil || !bytes.Equal(out, w.stdout) {
			t.Errorf("%v: %v, prints otherwise: %v", surrounding, err, !bytes.Equal(out, w.stdout))
		}
		if names := w.left(t, false); len(names) != len(outputFiles) {
			t.Errorf("%v: %v", surrounding, names)
		}
	}
}

// Too little memory is said before any work is done. Under about 0.6 GB the program
// does not come so far: Go's own start fails, with status 2.
func TestLittleMemory(t *testing.T) {
	w := newWorkplace(t)
	for _, c := range []struct {
		kiB     string
		allowed []int
	}{{"200000", []int{1, 2}}, {"1400000", []int{1}}, {"unlimited", []int{0}}} {
		w.clear(t)
		line := append([]string{"-c", "ulimit -v " + c.kiB + ` && exec "$0" "$@"`, w.program}, w.compare().Args[1:]...)
		cmd := exec.Command("sh", line...)
		cmd.Dir = w.dir
		var messages bytes.Buffer
		cmd.Stderr = &messages
		status := statusOf(cmd.Run())
		if !slices.Contains(c.allowed, status) {
			t.Errorf("%s KiB: status %d, %s", c.kiB, status, &messages)
		}
		if names := w.left(t, false); status != 0 && len(names) > 0 {
			t.Errorf("%s KiB: %v", c.kiB, names)
		}
	}
}

// What is no file is not taken for one, and links are not written through.
func TestLinksAndSpecialFiles(t *testing.T) {
	w := newWorkplace(t)
	at := func(name string) string { return filepath.Join(w.dir, name) }
	keep := []byte("kept")
	if err := errors.Join(os.WriteFile(at("kept.txt"), keep, 0o644), os.Symlink("kept.txt", at("link.xlsx")), os.Symlink("nothing", at("dangling.xlsx")),
		os.Symlink("job.yaml", at("link.yaml")), os.Symlink("loop.yaml", at("loop.yaml")), os.Mkdir(at("folder.xlsx"), 0o755), syscall.Mkfifo(at("pipe.xlsx"), 0o600)); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		want int
		args []string
		says string
	}{
		{2, []string{"compare", "job.yaml", "--force", "--workbook", "link.xlsx"}, "it is a link"},
		{2, []string{"compare", "job.yaml", "--force", "--workbook", "dangling.xlsx"}, "it is a link"},
		{2, []string{"compare", "job.yaml", "--force", "--workbook", "folder.xlsx"}, "it is not a file"},
		{2, []string{"compare", "job.yaml", "--force", "--workbook", "pipe.xlsx"}, "it is not a file"},
		{2, []string{"compare", "job.yaml", "--force", "--workbook", "kept.txt/plan.xlsx"}, "cannot write"},
		{2, []string{"compare", "job.yaml", "--force", "--json", "/dev/full"}, "it is not a file"},
		{2, []string{"compare", "job.yaml", "--force", "--csv", "kept.txt"}, "it is not a folder"},
		{2, []string{"check", "loop.yaml"}, "cannot read"},
		{2, []string{"check", "."}, "is a directory"},
		{2, []string{"check", "/dev/zero"}, "1 MiB"},
		{2, []string{"check", "/dev/null"}, "empty"},
		{0, []string{"check", "link.yaml"}, ""},
		{0, []string{"check", "/dev/stdin"}, ""},
	} {
		cmd := w.command(c.args...)
		cmd.Stdin = strings.NewReader(oneSoak)
		var messages bytes.Buffer
		cmd.Stderr = &messages
		if status := statusOf(cmd.Run()); status != c.want || !strings.Contains(messages.String(), c.says) {
			t.Errorf("%v: status %d, %q; want %d, %q", c.args, status, &messages, c.want, c.says)
		}
	}
	if !bytes.Equal(w.read(t, "kept.txt"), keep) {
		t.Error("kept.txt was written to")
	}
	if _, err := os.Lstat(at("nothing")); err == nil {
		t.Error("a dangling link was written through")
	}
}

// A hundred times the draws take no more than some megabytes more.
func TestMemoryWithAHundredTimesTheDraws(t *testing.T) {
	w := newWorkplace(t)
	peak := func(draws string) int64 {
		cmd := w.command("compare", "job.yaml", "--force", "--workbook", "plan.xlsx", "--draws", draws)
		if out, err := cmd.CombinedOutput(); err != nil {
			t.Fatalf("%v: %s", err, out)
		}
		usage, ok := cmd.ProcessState.SysUsage().(*syscall.Rusage)
		if !ok {
			t.Skip("no account of the memory on this system")
		}
		return usage.Maxrss
	}
	few, many := peak("200"), peak("20000")
	t.Logf("%d and %d", few, many)
	if many > 4*few {
		t.Errorf("200 draws take %d of memory at most, 20 000 draws %d", few, many)
	}
}
