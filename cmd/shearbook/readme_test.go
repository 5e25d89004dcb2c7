package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// The README promises two commands on a fresh machine. The first is run
// here as it stands there, but for the folder it writes; the second is what
// runs this test, and what .ci/run runs.
func TestReadmeCommands(t *testing.T) {
	root := filepath.Join("..", "..")
	readme, err := os.ReadFile(filepath.Join(root, "README.md"))
	if err != nil {
		t.Fatal(err)
	}
	blocks := regexp.MustCompile("(?s)```sh\n(.*?)```").FindAllStringSubmatch(string(readme), -1)
	if len(blocks) < 2 {
		t.Fatal("the README does not show two commands")
	}
	makes, tests := strings.TrimSpace(blocks[0][1]), strings.TrimSpace(blocks[1][1])

	ci, err := os.ReadFile(filepath.Join(root, ".ci", "run"))
	if err != nil {
		t.Fatal(err)
	}
	if !regexp.MustCompile(`(?m)^` + regexp.QuoteMeta(tests) + `$`).Match(ci) {
		t.Errorf(".ci/run does not run the README's %q", tests)
	}

	const folder = "ferry-road-report"
	if !strings.HasSuffix(makes, " --out "+folder) {
		t.Fatalf("the README's first command is %q, which does not write %s", makes, folder)
	}
	out := filepath.Join(t.TempDir(), folder)
	words := strings.Fields(strings.TrimSuffix(makes, folder) + out)
	command := exec.Command(words[0], words[1:]...)
	command.Dir = root
	if text, err := command.CombinedOutput(); err != nil {
		t.Fatalf("%s: %v\n%s", makes, err, text)
	}
	for _, name := range []string{"report.md", "report.html", "report.pdf", "results.json", "figures/velocity-L1.svg"} {
		if info, err := os.Stat(filepath.Join(out, name)); err != nil || info.Size() == 0 {
			t.Errorf("%s was not written: %v", name, err)
		}
	}
}

// Each command line that the README and the package comment show is one the
// program knows.
func TestShownCommandsExist(t *testing.T) {
	for _, file := range []string{filepath.Join("..", "..", "README.md"), "main.go"} {
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		shown := regexp.MustCompile("(?m)^(?://\t)?shearbook ([a-z]+)").FindAllStringSubmatch(string(text), -1)
		if len(shown) < 4 {
			t.Errorf("%s shows %d commands", file, len(shown))
		}
		for _, s := range shown {
			c, _, err := newRoot(streams{}).Find([]string{s[1]})
			if err != nil || c.Name() != s[1] {
				t.Errorf("%s shows %q, which is no command", file, s[0])
			}
		}
	}
}
