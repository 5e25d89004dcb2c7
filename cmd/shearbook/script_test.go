package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"shearbook": main})
}

// TestScripts runs the whole program as a user would: each script says what
// is typed, what is answered, and what files are left.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"exits": exits,
			"make":  makeFile,
			"wide":  wide,
			"same":  same,
		},
	})
}

// exits runs a command and checks its exit status: exits 2 shearbook report.
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: exits STATUS COMMAND [ARG...]")
	}
	err := ts.Exec(args[1], args[2:]...)
	status := "0"
	if err != nil {
		status = strings.TrimPrefix(err.Error(), "exit status ")
	}
	if status != args[0] {
		ts.Fatalf("exit status %s, not %s", status, args[0])
	}
}

// makeFile makes a file that is too large or too strange to stand in a
// script: make KIND FILE.
func makeFile(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: make KIND FILE")
	}
	kinds := map[string]func() []byte{
		"nul": func() []byte { return []byte("top (m),bottom (m),vs (m/s)\n0,5,2\x0000\n") },
		"bigfield": func() []byte {
			return []byte("top (m),bottom (m),vs (m/s)\n0,5," + strings.Repeat("1", 100<<20) + "\n")
		},
		"manyrows":  manyRows,
		"utf16":     func() []byte { return utf16("top (m),bottom (m),vs (m/s),soil\r\n0,5,200,Ä\r\n5,,400,ß\r\n") },
		"latin1":    func() []byte { return []byte("top (m),bottom (m),vs (m/s),soil\n0,5,200,M\xe4rz\n5,,400,Stra\xdfe\n") },
		"crlfbom":   func() []byte { return []byte("\ufefftop (m),bottom (m),vs (m/s)\r\n0,5,200\r\n5,,400\r\n\r\n\r\n") },
		"onelayer":  func() []byte { return []byte("thickness (m),vs (m/s)\n30,300\n") },
		"emptyfile": func() []byte { return nil },
		"codefile":  func() []byte { return exampleTable(ts) },
	}
	kind, ok := kinds[args[0]]
	if !ok {
		ts.Fatalf("no kind %q", args[0])
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[1]), kind(), 0o666))
}

// exampleTable is the documented example of a jurisdiction's own table.
func exampleTable(ts *testscript.TestScript) []byte {
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "codefile", "example.yaml"))
	ts.Check(err)
	return data
}

// manyRows is 10⁷ rows of one profile: more than a file of layers may have.
func manyRows() []byte {
	var b bytes.Buffer
	b.WriteString("h (m),vs (m/s)\n")
	for range 10_000_000 {
		b.WriteString("1,2\n")
	}
	return b.Bytes()
}

func utf16(text string) []byte {
	out := []byte{0xff, 0xfe}
	for _, r := range text {
		out = append(out, byte(r), byte(r>>8))
	}
	return out
}

// wide fails where a line of the last output is wider than 80 columns.
func wide(ts *testscript.TestScript, neg bool, args []string) {
	for i, line := range strings.Split(ts.ReadFile("stdout"), "\n") {
		if n := columns(line); n > width {
			ts.Fatalf("line %d is %d columns wide: %s", i+1, n, line)
		}
	}
}

// same compares two folders file by file: same A B.
func same(ts *testscript.TestScript, neg bool, args []string) {
	a, b := tree(ts, ts.MkAbs(args[0])), tree(ts, ts.MkAbs(args[1]))
	if len(a) == 0 || fmt.Sprint(a) != fmt.Sprint(b) {
		ts.Fatalf("%s and %s differ", args[0], args[1])
	}
}

func tree(ts *testscript.TestScript, dir string) map[string]string {
	files := map[string]string{}
	ts.Check(filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		name, _ := filepath.Rel(dir, path)
		files[name] = string(data)
		return err
	}))
	return files
}
