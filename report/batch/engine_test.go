package batch

import (
	"context"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
	"shearbook/profile/delimited"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// runJob runs a job into a fresh folder and returns the tables.
func runJob(tb testing.TB, job Job) (Outcome, map[string]string) {
	tb.Helper()
	if job.Out == "" {
		job.Out = filepath.Join(tb.TempDir(), "out")
	}
	o, err := Run(context.Background(), job)
	if err != nil {
		tb.Fatal(err)
	}
	return o, readFolder(tb, job.Out)
}

// readFolder returns all files of a folder.
func readFolder(tb testing.TB, dir string) map[string]string {
	tb.Helper()
	files := map[string]string{}
	err := filepath.WalkDir(dir, func(path string, e fs.DirEntry, err error) error {
		if err != nil || e.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		name, _ := filepath.Rel(dir, path)
		files[name] = string(data)
		return err
	})
	if err != nil {
		tb.Fatal(err)
	}
	return files
}

func rowsOf(tb testing.TB, files map[string]string) []Row {
	tb.Helper()
	var rows []Row
	for r, err := range Rows(Summary, strings.NewReader(files[Summary])) {
		if err != nil {
			tb.Fatal(err)
		}
		rows = append(rows, *r)
	}
	return rows
}

func writeFile(tb testing.TB, name, text string) string {
	tb.Helper()
	if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
		tb.Fatal(err)
	}
	if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
		tb.Fatal(err)
	}
	return name
}

// fixtures are the profile files of the tests and of the starter.
func fixtures(tb testing.TB) []string {
	tb.Helper()
	var names []string
	for _, dir := range []string{"../../testdata/profiles", "../../templates/starter"} {
		err := filepath.WalkDir(dir, func(path string, e fs.DirEntry, err error) error {
			if err == nil && filepath.Ext(path) == ".csv" {
				names = append(names, path)
			}
			return err
		})
		if err != nil {
			tb.Fatal(err)
		}
	}
	if len(names) < 3 {
		tb.Fatalf("only %d fixtures", len(names))
	}
	return names
}

// A batch of one file says of it what classify says, under every code.
func TestBatchOfOneIsClassify(t *testing.T) {
	codes := siteclass.All()
	for _, name := range fixtures(t) {
		for _, facts := range []report.Facts{{}, {Extend: "constant-velocity", Datum: profile.Known(1)}} {
			_, files := runJob(t, Job{Inputs: []string{name}, Codes: codes, Facts: facts})
			rows := rowsOf(t, files)
			profiles, err := open.File(name, open.Options{})
			if err != nil { // then each code has a row that says so
				if len(rows) != len(codes) || rows[0].Flags != Failed || !strings.HasPrefix(err.Error(), fmt.Sprintf("%s:%d:1: %s", name, 1, rows[0].Problem)) {
					t.Errorf("%s: %+v, want %v", name, rows[0], err)
				}
				continue
			}
			if len(rows) != len(profiles)*len(codes) {
				t.Fatalf("%s: %d rows of %d profiles under %d codes", name, len(rows), len(profiles), len(codes))
			}
			for i, row := range rows {
				compareClassified(t, &row, &profiles[i/len(codes)], codes[i%len(codes)], facts)
			}
		}
	}
}

func compareClassified(t *testing.T, row *Row, p *profile.Profile, code *siteclass.Code, facts report.Facts) {
	t.Helper()
	d, err := report.Classify(p, code, facts)
	if err != nil {
		if row.Class != "" || row.Problem == "" || row.Flags&Failed == 0 {
			t.Errorf("%s under %s: %+v, want %v", p.Name, code.ID, row, err)
		}
		return
	}
	to, margin := "", 0.0
	if d.Margin != nil {
		to, margin = d.Margin.ToClass, d.Margin.Percent
	}
	v30 := 0.0
	if v := report.Average30(p, d.Datum, facts); v != nil {
		v30 = *v
	}
	type answer struct{ profile, code, class, route, velocity, depth, vs30, reached, datum, basis, standing, to, margin string }
	number := func(x float64, decimals int) string { return fmt.Sprintf("%.*f", decimals, x) }
	got := answer{row.Profile, row.Code, row.Class, row.Route, number(row.Velocity, 1), number(row.Depth, 2), number(row.Vs30, 1),
		number(row.DepthReached, 2), number(row.Datum, 2), row.Basis, row.Standing, row.ToClass, number(row.Margin+0, 1)}
	want := answer{p.Name, code.ID, d.Class, d.Route, number(d.Velocity, 1), number(d.Thickness, 2), number(v30, 1),
		number(p.DepthReached(), 2), number(d.Datum, 2), d.Basis, d.Standing.String(), to, number(margin, 1)}
	got.margin, want.margin = strings.TrimPrefix(got.margin, "-0.0"), strings.TrimPrefix(want.margin, "-0.0")
	got.margin, want.margin = strings.TrimPrefix(got.margin, "0.0"), strings.TrimPrefix(want.margin, "0.0")
	if got != want {
		t.Errorf("%s under %s:\ngot  %+v\nwant %+v", p.Name, code.ID, got, want)
	}
}

// writeMixed writes a table of profiles of every sort: plain, at fault, short,
// with a half-space, on a bound, and such as the quick way must leave alone.
func writeMixed(tb testing.TB, name string, profiles int, seed uint64) {
	tb.Helper()
	random := rand.New(rand.NewPCG(seed, 6))
	var b strings.Builder
	b.WriteString("profile,top_m,bottom_m,vs_mps,latitude,longitude,remark\n")
	for p := range profiles {
		id := fmt.Sprintf("P%05d", p)
		switch random.IntN(40) {
		case 0:
			id = `"` + id + `"`
		case 1:
			id += " é"
		case 2:
			id = " " + id
		}
		writeMixedProfile(&b, id, random)
	}
	writeFile(tb, name, b.String())
}

func writeMixedProfile(b *strings.Builder, id string, random *rand.Rand) {
	z, base, n := 0.0, 60+700*random.Float64()*random.Float64(), 1+random.IntN(12)
	if random.IntN(30) == 0 {
		base = 2500
	}
	position := fmt.Sprintf("%.5f,%.4f", 170*random.Float64()-82, 360*random.Float64()-180)
	for k := range n {
		switch random.IntN(40) {
		case 0:
			position = ","
		case 1:
			position = "51N,4.5"
		case 2:
			position = "51.2,"
		}
		top, bottom, vs := fmt.Sprintf("%.2f", z), "", fmt.Sprintf("%.1f", base*(0.8+0.5*random.Float64()))
		h := 0.5 + 7*random.Float64()
		if bottom = fmt.Sprintf("%.2f", z+h); k == n-1 && random.IntN(4) == 0 {
			bottom = ""
		}
		end := "\n"
		switch random.IntN(400) {
		case 0:
			bottom = "0"
		case 1:
			vs = "-3"
		case 2:
			vs = "fast"
		case 3:
			top = "1e1"
		case 4:
			vs = "+" + vs
		case 5:
			end = "\n\n# a comment\n"
		case 6:
			end = "\r\n"
		case 7:
			vs = "20000.5"
		case 8:
			bottom = "999"
		case 9:
			top = ".5"
		case 10:
			vs = "123456789012345678"
		case 11:
			end = ",more\n"
		case 12:
			vs = " " + vs
		}
		fmt.Fprintf(b, "%s,%s,%s,%s,%s,r%s", id, top, bottom, vs, position, end)
		fmt.Sscanf(fmt.Sprintf("%.2f", z+h), "%g", &z)
	}
}

// The quick way through a table gives the bytes of the ordinary one, under every
// code.
func TestFastIsOrdinary(t *testing.T) {
	in := filepath.Join(t.TempDir(), "mixed.csv")
	writeMixed(t, in, 700, 1)
	for _, facts := range []report.Facts{{}, {Extend: "constant-velocity"}, {Extend: "boore-2004"}, {Datum: profile.Known(2), Extend: "constant-velocity"}} {
		job := Job{Inputs: []string{in}, Codes: siteclass.All(), Facts: facts}
		o, quick := runJob(t, job)
		job.ordinary = true
		_, plain := runJob(t, job)
		if diff := cmp.Diff(plain, quick); diff != "" {
			t.Errorf("%+v: the quick way differs (-ordinary +quick):\n%.3000s", facts.Extend, diff)
		}
		if o.Units < 650 || !strings.Contains(quick[Summary], ",reversed,") || !strings.Contains(quick[Summary], ",failed,") {
			t.Errorf("%+v: %d units", facts.Extend, o.Units)
		}
		job.FaultsAlone = true
		_, plain = runJob(t, job)
		job.ordinary = false
		_, alone := runJob(t, job)
		if diff := cmp.Diff(plain, alone); diff != "" {
			t.Errorf("%+v: the quick way without notes differs (-ordinary +quick):\n%.3000s", facts.Extend, diff)
		}
		compareAlone(t, quick, alone)
	}
}

// compareAlone holds the tables of a job without its notes against those with
// them: the same faults, and the same rows but for the number of notes.
func compareAlone(t *testing.T, with, alone map[string]string) {
	t.Helper()
	var faults strings.Builder
	for line := range strings.Lines(with[FaultsIn]) {
		if !strings.HasPrefix(line, "note,") {
			faults.WriteString(line)
		}
	}
	if alone[FaultsIn] != faults.String() {
		t.Errorf("the faults differ without notes")
	}
	want := rowsOf(t, with)
	for i := range want {
		want[i].Notes = 0
	}
	if diff := cmp.Diff(want, rowsOf(t, alone)); diff != "" {
		t.Errorf("without notes: %.3000s", diff)
	}
}

// A row of totals at the foot of a profile is no layer on the quick way either.
func TestFastLeavesTotals(t *testing.T) {
	text := []byte("profile,remark,bottom_m,vs_mps\nA,,5,150\nA,,12,220\nA,,20,400\nA,Total,40,256.7\nB,,9,180\nB,,45,300\n")
	job := Job{Codes: mustCode(t, "asce-7-22")}
	quick, _ := inMemory(t, job, text)
	job.ordinary = true
	plain, _ := inMemory(t, job, text)
	if plain != quick || !strings.Contains(quick, ",A,asce-7-22,,") || !strings.Contains(quick, "the row is labelled") {
		t.Errorf("ordinary:\n%s\nquick:\n%s", plain, quick)
	}
}

// FuzzFast: whatever the rows, the quick way gives the bytes of the ordinary
// one.
func FuzzFast(f *testing.F) {
	f.Add("A,0,10,200\nA,10,40,300\nB,0,31,180\n")
	f.Add("A,0,10,200\r\nA,10,,300\n\"A\",10,20,3\nA,0,5,100\n# x\n,,,\nB b,0,99,1e2")
	f.Add("A,0,999,200\nA,0.0000001,5.5,20\nÄ,0,1,1\nA,0,12.,3.\n")
	f.Add("A,0,10,200,51,-4.5,523145.5,5e6,32631\nA,10,40,300,51,,523145.5,5e6,\nB,0,31,180,-0,0,,,1\n")
	codes := mustCode(f, "asce-7-22", "ec8-2004", "nbcc-2015")
	f.Fuzz(func(t *testing.T, rows string) {
		if len(rows) > 1<<16 {
			return
		}
		text := []byte("profile,top_m,bottom_m,vs_mps\n" + rows)
		if line, _, _ := strings.Cut(rows, "\n"); strings.Count(line, ",") > 3 {
			text = []byte("profile,top_m,bottom_m,vs_mps,latitude,longitude,easting,northing,epsg\n" + rows)
		}
		job := Job{Codes: codes, Facts: report.Facts{Extend: "constant-velocity"}}
		quick, ok := inMemory(t, job, text)
		job.ordinary = true
		if plain, _ := inMemory(t, job, text); ok && plain != quick {
			t.Error(cmp.Diff(plain, quick))
		}
		job.FaultsAlone = true
		plain, _ := inMemory(t, job, text)
		job.ordinary = false
		if quick, _ = inMemory(t, job, text); ok && plain != quick {
			t.Error(cmp.Diff(plain, quick))
		}
	})
}

// inMemory returns the rows of a table that is one chunk; false where it is
// none.
func inMemory(t *testing.T, job Job, text []byte) (rows string, ok bool) {
	t.Helper()
	h, err := delimited.ReadHead("t.csv", text, delimited.Options{})
	if h == nil || err != nil {
		return "", false
	}
	c := &chunk{it: &item{name: "t.csv"}, first: true, last: true, head: h, data: text[h.Size():], line: h.Line(), done: make(chan struct{})}
	w := worker{run: &run{job: &job, setting: setting{codes: job.Codes, facts: job.Facts}, rooms: make(chan []byte)}}
	w.do(c)
	if c.made.err != nil {
		t.Fatal(c.made.err)
	}
	return string(c.made.summary) + string(c.made.faults), true
}

// survey is a folder with files of several kinds, a large table and a manifest.
func survey(tb testing.TB) (dir string, inputs []string) {
	tb.Helper()
	dir = tb.TempDir()
	for i, name := range fixtures(tb) {
		data, err := os.ReadFile(name)
		if err != nil {
			tb.Fatal(err)
		}
		writeFile(tb, filepath.Join(dir, "files", fmt.Sprintf("%02d", i), filepath.Base(name)), string(data))
	}
	writeFile(tb, filepath.Join(dir, "files", "bad.csv"), "top_m,bottom_m,vs_mps\n0,5,fast\n")
	writeFile(tb, filepath.Join(dir, "files", "notes.docx"), "no profile")
	writeMixed(tb, filepath.Join(dir, "region.csv"), 9000, 2)
	writeFile(tb, filepath.Join(dir, "list.csv"), "file,profile,code,datum,latitude,longitude,notes\n"+
		"files/bad.csv,,,,,,\nsmall.csv,B,ec8-2004 ntc-2018,2 m,51.5,4.25,by the gate\nsmall.csv,A,,,,,\nsmall.csv,C,,,,,\n../up.csv,,,,,,\n")
	writeFile(tb, filepath.Join(dir, "small.csv"), "profile,top_m,bottom_m,vs_mps\nA,0,5,100\nA,5,60,300\nB,0,5,150\nB,5,60,500\n")
	return dir, []string{filepath.Join(dir, "files"), filepath.Join(dir, "region.csv"), filepath.Join(dir, "list.csv"), filepath.Join(dir, "none-*.csv")}
}

// However many workers, shards and runs: the same bytes.
func TestSameBytes(t *testing.T) {
	_, inputs := survey(t)
	job := Job{Inputs: inputs, Codes: mustCode(t, "asce-7-22", "ec8-2004"), Facts: report.Facts{Extend: "constant-velocity"},
		Derive: DeriveOptions{GeoJSON: true, JSON: true}, Workers: 1}
	one, want := runJob(t, job)
	if one.Units < 9000 || one.Failed < 100 {
		t.Fatalf("%d units, %d failed", one.Units, one.Failed)
	}
	t.Run("workers", func(t *testing.T) {
		for _, workers := range []int{2, 5} {
			job.Workers = workers
			o, got := runJob(t, job)
			if diff := cmp.Diff(want, got); diff != "" {
				t.Errorf("%d workers: %.2000s", workers, diff)
			}
			if diff := cmp.Diff(one.Tally, o.Tally); diff != "" {
				t.Error(diff)
			}
		}
	})
	t.Run("shards", func(t *testing.T) {
		const n = 3
		var dirs []string
		for i := range n {
			part := job
			part.Shard, part.Out = Shard{(i+1)%n + 1, n}, filepath.Join(t.TempDir(), "part")
			if o, _ := runJob(t, part); o.Units < one.Units/n || o.Units > one.Units/n+1 {
				t.Errorf("shard %v has %d units of %d", part.Shard, o.Units, one.Units)
			}
			dirs = append(dirs, part.Out)
		}
		out := filepath.Join(t.TempDir(), "whole")
		o, err := Merge(context.Background(), dirs, Job{Out: out, Derive: job.Derive})
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(want, readFolder(t, out)); diff != "" {
			t.Errorf("merged: %.2000s", diff)
		}
		if diff := cmp.Diff(one.Tally, o.Tally); diff != "" {
			t.Error(diff)
		}
		for _, bad := range [][]string{dirs[:2], {dirs[0], dirs[0], dirs[1]}, {t.TempDir()}} {
			if _, err := Merge(context.Background(), bad, Job{Out: filepath.Join(t.TempDir(), "x")}); err == nil {
				t.Errorf("%d folders were merged", len(bad))
			}
		}
	})
	t.Run("interrupted", func(t *testing.T) {
		random := rand.New(rand.NewPCG(3, 3))
		out := filepath.Join(t.TempDir(), "out")
		runs, reused := 0, 0
		for unfinished := true; unfinished; runs++ {
			ctx, cancel := context.WithCancel(context.Background())
			part, calls, most := job, 0, 1+random.IntN(9)
			part.Out, part.Resume = out, true
			part.Progress = func(Progress) {
				if calls++; calls == most {
					cancel()
				}
			}
			o, err := Run(ctx, part)
			cancel()
			if err != nil {
				t.Fatal(err)
			}
			if _, err := os.Stat(filepath.Join(out, Summary)); (err == nil) == o.Unfinished {
				t.Fatalf("unfinished %v, but the summary: %v", o.Unfinished, err)
			}
			unfinished, reused = o.Unfinished, o.Reused
		}
		if diff := cmp.Diff(want, readFolder(t, out)); diff != "" || runs < 3 || reused == 0 {
			t.Errorf("after %d runs, %d units reused: %.2000s", runs, reused, diff)
		}
	})
}
