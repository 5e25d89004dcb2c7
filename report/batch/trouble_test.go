//go:build unix

package batch

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"shearbook/report"
)

// jobVariable makes the test binary do a job and nothing else: it holds the
// input and the output.
const jobVariable = "SHEARBOOK_TEST_JOB"

func TestMain(m *testing.M) {
	if inOut := os.Getenv(jobVariable); inOut != "" {
		doJob(inOut)
		return
	}
	os.Exit(m.Run())
}

// doJob runs the job of the kill test.
func doJob(inOut string) {
	in, out, _ := strings.Cut(inOut, "|")
	limitFiles()
	job := killJob(in, out)
	job.Resume = true
	if _, err := Run(context.Background(), job); err != nil {
		fmt.Println(err)
		os.Exit(1)
	}
}

func killJob(in, out string) Job {
	job := Job{Inputs: []string{in}, Out: out, Facts: report.Facts{Extend: "constant-velocity"}, Derive: DeriveOptions{GeoJSON: true, JSON: true}}
	job.Codes = mustCode(&testing.T{}, "asce-7-22", "ec8-2004")
	return job
}

// A kill at any moment loses nothing and leaves nothing half-written: at every
// moment the earlier batch stands, or none, or the whole new one; and what the
// next run goes on with comes to the same bytes.
func TestKill(t *testing.T) {
	dir := t.TempDir()
	in, out := filepath.Join(dir, "in"), filepath.Join(dir, "out")
	writeMixed(t, filepath.Join(in, "region.csv"), 12000, 5)
	writeMixed(t, filepath.Join(in, "small.csv"), 100, 6)
	_, want := runJob(t, killJob(in, filepath.Join(dir, "whole")))
	earlierJob := killJob(filepath.Join(in, "small.csv"), out)
	_, earlier := runJob(t, earlierJob)
	took := timeJob(t, in, filepath.Join(dir, "timed"))

	random := rand.New(rand.NewPCG(uint64(took), 9))
	kills, finished, between := 0, 0, 0
	for kills < 20 && finished < 40 {
		command := exec.Command(os.Args[0])
		command.Env = append(os.Environ(), jobVariable+"="+in+"|"+out)
		if err := command.Start(); err != nil {
			t.Fatal(err)
		}
		timer := time.AfterFunc(time.Duration(random.Int64N(int64(took))), func() { command.Process.Kill() })
		err := command.Wait()
		timer.Stop()
		got := readFolder(t, out)
		if err == nil {
			finished++
			if diff := cmp.Diff(want, got); diff != "" {
				t.Fatalf("after %d kills: %.2000s", kills, diff)
			}
			if err := os.RemoveAll(out); err != nil {
				t.Fatal(err)
			}
			runJob(t, earlierJob)
			continue
		}
		kills++
		summary, stands := got[Summary]
		switch {
		case !stands:
			between++
		case summary == earlier[Summary] && got[FaultsIn] == earlier[FaultsIn]:
		case summary == want[Summary] && got[FaultsIn] == want[FaultsIn] && got[MapLayer] == want[MapLayer]:
		default:
			t.Fatalf("kill %d left a summary of %d bytes, which is neither the earlier one nor the new one", kills, len(summary))
		}
	}
	if kills < 20 {
		t.Errorf("only %d kills came in time", kills)
	}
	t.Logf("%d kills, %d runs that finished, %d kills left no summary", kills, finished, between)
}

// timeJob returns how long the whole job takes.
func timeJob(t *testing.T, in, out string) time.Duration {
	t.Helper()
	command := exec.Command(os.Args[0])
	command.Env = append(os.Environ(), jobVariable+"="+in+"|"+out)
	start := time.Now()
	if text, err := command.CombinedOutput(); err != nil {
		t.Fatal(err, string(text))
	}
	return time.Since(start)
}

// A full disk, here a limit on the size of files, ends the run with a message;
// what was done is kept, and the next run goes on with it.
func TestDiskFull(t *testing.T) {
	dir := t.TempDir()
	in, out := filepath.Join(dir, "in"), filepath.Join(dir, "out")
	writeMixed(t, filepath.Join(in, "region.csv"), 12000, 7)
	command := exec.Command(os.Args[0])
	command.Env = append(os.Environ(), jobVariable+"="+in+"|"+out, limitVariable+"=1")
	text, err := command.CombinedOutput()
	if err == nil || !strings.Contains(string(text), "cannot be written in "+unfinished(out)) {
		t.Fatalf("%v: %s", err, text)
	}
	if _, err := os.Stat(filepath.Join(out, Summary)); err == nil {
		t.Error("a summary stands there")
	}
	job := killJob(in, out)
	job.Resume = true
	o, got := runJob(t, job)
	_, want := runJob(t, killJob(in, filepath.Join(dir, "whole")))
	if diff := cmp.Diff(want, got); diff != "" || o.Reused == 0 {
		t.Errorf("%d units were reused: %.2000s", o.Reused, diff)
	}
}

// Rows of a profile that do not follow one another are brought together,
// whatever the size of the table: then the answers are those of the table in
// order, and each such profile has a note.
func TestRowsApart(t *testing.T) {
	for _, profiles := range []int{3, 9000} {
		dir := t.TempDir()
		var upper, lower, whole strings.Builder
		for p := range profiles {
			name := fmt.Sprintf("P%d", (p*7919)%profiles)
			top, bottom := fmt.Sprintf("%s,0,5,%d\n", name, 100+p%300), fmt.Sprintf("%s,5,60,%d\n", name, 400+p%300)
			upper.WriteString(top)
			lower.WriteString(bottom)
			whole.WriteString(top + bottom)
		}
		const head = "profile,top_m,bottom_m,vs_mps\n"
		apart := writeFile(t, filepath.Join(dir, "region.csv"), head+upper.String()+strings.TrimSuffix(lower.String(), "\n"))
		job := Job{Inputs: []string{apart}, Codes: mustCode(t, "ec8-2004")}
		var said string
		job.Say = func(text, _ string) { said += text }
		_, files := runJob(t, job)
		got := rowsOf(t, files)
		if !strings.Contains(said, "do not follow one another") || len(got) != profiles {
			t.Fatalf("%d profiles: %d rows, said %q", profiles, len(got), said)
		}
		_, files = runJob(t, Job{Inputs: []string{writeFile(t, filepath.Join(dir, "order", "region.csv"), head+whole.String())}, Codes: job.Codes})
		for i, want := range rowsOf(t, files) {
			if got[i].Profile != want.Profile || got[i].Class != want.Class || got[i].Velocity != want.Velocity || got[i].Line != i+2 || got[i].Notes != want.Notes+1 {
				t.Fatalf("got %+v, want %+v", got[i], want)
			}
		}
		first := fmt.Sprintf("the last stands in line %d,", profiles+2)
		if !strings.Contains(readFolder(t, job0Out(t, job))[FaultsIn], first) {
			t.Errorf("no note says that %s", first)
		}
		for i := range 3 { // shards and an interruption change nothing
			job.Out, job.Shard = filepath.Join(dir, fmt.Sprint("part", i)), Shard{i + 1, 3}
			runJob(t, job)
		}
		out := filepath.Join(dir, "merged")
		if _, err := Merge(context.Background(), []string{filepath.Join(dir, "part0"), filepath.Join(dir, "part1"), filepath.Join(dir, "part2")}, Job{Out: out}); err != nil {
			t.Fatal(err)
		}
		job.Shard, job.Out = Shard{}, ""
		if _, want := runJob(t, job); !cmp.Equal(want, readFolder(t, out)) {
			t.Error("merged shards differ")
		}
	}
}

func job0Out(t *testing.T, job Job) string {
	job.Out = filepath.Join(t.TempDir(), "again")
	runJob(t, job)
	return job.Out
}

// What a table states of one profile holds for that one, and of a profile that
// it does not have there is a note.
func TestScopedLines(t *testing.T) {
	in := writeFile(t, filepath.Join(t.TempDir(), "a.csv"), "# [B] depth reached: 20 m\n# [C] depth reached: 9 m\n"+
		"profile,top_m,bottom_m,vs_mps\nA,0,5,200\nA,5,60,300\nB,0,5,200\nB,5,60,300\n")
	_, files := runJob(t, Job{Inputs: []string{in}, Codes: mustCode(t, "ec8-2004")})
	rows := rowsOf(t, files)
	if len(rows) != 2 || rows[0].DepthReached != 60 || rows[1].DepthReached != 20 || rows[0].Notes != 1 ||
		!strings.Contains(files[FaultsIn], `no-such-profile,"a line above the header is about profile ""C"", which the file does not have"`) {
		t.Errorf("%+v\n%s", rows, files[FaultsIn])
	}
}

// A name that comes twice in different files is two profiles.
func TestOneNameInTwoFiles(t *testing.T) {
	dir := t.TempDir()
	a := writeFile(t, filepath.Join(dir, "a.csv"), "profile,top_m,bottom_m,vs_mps\nA,0,60,200\n")
	b := writeFile(t, filepath.Join(dir, "b.csv"), "profile,top_m,bottom_m,vs_mps\nA,0,60,500\n")
	_, files := runJob(t, Job{Inputs: []string{a, b}, Codes: mustCode(t, "ec8-2004")})
	rows := rowsOf(t, files)
	if len(rows) != 2 || rows[0].Class != "C" || rows[1].Class != "B" || rows[0].File != a || rows[1].File != b {
		t.Errorf("%+v", rows)
	}
}

// What cannot be read has a row that says why, and the others have theirs.
func TestUnreadable(t *testing.T) {
	dir := t.TempDir()
	in := filepath.Join(dir, "in")
	writeFile(t, filepath.Join(in, "good.csv"), "top_m,bottom_m,vs_mps\n0,60,300\n")
	writeFile(t, filepath.Join(in, "empty.csv"), "")
	writeFile(t, filepath.Join(in, "locked.csv"), "top_m,bottom_m,vs_mps\n0,60,300\n")
	for _, err := range []error{
		os.Symlink(filepath.Join(dir, "gone"), filepath.Join(in, "vanished.csv")),
		os.Symlink(in, filepath.Join(in, "loop")),
		os.Symlink("self.csv", filepath.Join(in, "self.csv")),
		os.Chmod(filepath.Join(in, "locked.csv"), 0),
	} {
		if err != nil {
			t.Fatal(err)
		}
	}
	var said []string
	o, files := runJob(t, Job{Inputs: []string{in, filepath.Join(dir, "none.csv")}, Codes: mustCode(t, "ec8-2004"),
		Say: func(text, _ string) { said = append(said, text) }})
	problems := map[string]string{}
	for _, r := range rowsOf(t, files) {
		problems[filepath.Base(r.File)] = r.Problem
	}
	locked := "the file may not be read"
	if os.Geteuid() == 0 {
		locked = "" // the superuser reads it all the same
	}
	want := map[string]string{"good.csv": "", "empty.csv": "the file is empty", "locked.csv": locked, "vanished.csv": "there is no such file",
		"none.csv": "there is no such file", "self.csv": "the file cannot be read: too many levels of symbolic links"}
	if diff := cmp.Diff(want, problems); diff != "" || o.Units != len(want) {
		t.Error(diff)
	}
	if len(said) != 1 || !strings.HasSuffix(said[0], "loop is a link to a folder and was not followed") {
		t.Errorf("said %q", said)
	}
}

// A folder with anything else in it is left alone, and so is an unfinished
// batch without Resume, or of another job.
func TestFolderInTheWay(t *testing.T) {
	dir := t.TempDir()
	in := writeFile(t, filepath.Join(dir, "a.csv"), "top_m,bottom_m,vs_mps\n0,60,300\n")
	job := Job{Inputs: []string{in}, Codes: mustCode(t, "ec8-2004"), Out: dir}
	var c *conflict
	if _, err := Run(context.Background(), job); !errors.As(err, &c) || !strings.Contains(c.Error(), "holds a.csv, which is not of a batch") {
		t.Error(err)
	}
	job.Out = filepath.Join(dir, "out")
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if o, err := Run(ctx, job); err != nil || !o.Unfinished {
		t.Errorf("%+v, %v", o, err)
	}
	if _, err := Run(context.Background(), job); !errors.As(err, &c) || !strings.Contains(c.Hint(), "--resume") {
		t.Error(err)
	}
	other := job
	other.Resume, other.Near = true, 9
	if _, err := Run(context.Background(), other); !errors.As(err, &c) || !strings.Contains(c.Error(), "other inputs or options") {
		t.Error(err)
	}
	job.Resume = true
	runJob(t, job)
}

// What is wrong with a manifest is told before anything is done.
func TestManifestFaults(t *testing.T) {
	dir := t.TempDir()
	list := writeFile(t, filepath.Join(dir, "list.csv"), "file,code,datum,latitude,colour\na.csv,ec8-2005,deep,99,red\n,,,,\n")
	_, err := Run(context.Background(), Job{Inputs: []string{list}, Codes: mustCode(t, "ec8-2004"), Out: filepath.Join(dir, "out")})
	for _, want := range []string{
		`list.csv:1:5: a manifest has no column "colour"`, `list.csv:2:7: no code is called "ec8-2005"`, `list.csv:2:16: datum "deep" is no depth`,
		`list.csv:2:21: latitude "99" is no angle`, "latitude and longitude belong together", "list.csv:3:1: no file is named",
	} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("no %q in %v", want, err)
		}
	}
}
