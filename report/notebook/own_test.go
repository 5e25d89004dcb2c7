package notebook_test

import (
	"errors"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/notebook"
)

// counter is a working of the caller's own.
var counter = notebook.OwnWorking{
	Name: "count", Keys: []notebook.Key{{Name: "of", Meaning: "what is counted"}},
	Evaluate: func(keys map[string]string) ([]report.Block, error) {
		if keys["of"] == "sand" {
			return nil, notebook.OwnFault("count layers", "there is no number of %s", keys["of"])
		}
		if keys["of"] == "fail" {
			return nil, errors.New("it went wrong")
		}
		return []report.Block{&report.Paragraph{Inline: []report.Inline{report.Text("counted " + keys["of"])}}}, nil
	},
}

func evaluateCount(body string, own ...notebook.OwnWorking) (string, error) {
	nb, err := notebook.ParseOwn("n.md", []byte("---\ntitle: T\n---\n# Head\n\n```count\n"+body+"```\n"))
	if err != nil {
		return "", err
	}
	r, err := notebook.Evaluate(nb, notebook.Options{Own: own})
	if err != nil {
		return "", err
	}
	var b strings.Builder
	err = report.Markdown(&b, r.Document, report.MarkdownOptions{})
	return b.String(), err
}

func TestOwnWorking(t *testing.T) {
	text, err := evaluateCount("of: layers\n", counter)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"# Head", "counted layers", report.Caution} {
		if !strings.Contains(strings.ReplaceAll(text, "\n> ", " "), want) {
			t.Errorf("%q is missing in %s", want, text)
		}
	}
}

// Without its caller a fence of that name is a block of code, as any other.
func TestOwnWorkingIsUnknownElsewhere(t *testing.T) {
	text, err := evaluateCount("of: layers\n")
	if err != nil || !strings.Contains(text, "```count\nof: layers\n```") {
		t.Errorf("%s, %v", text, err)
	}
	if _, known := notebook.WorkingNamed("count"); known {
		t.Error("count is a working of every notebook")
	}
	if _, err := notebook.Parse("n.md", []byte("---\ntitle: T\n---\n")); err == nil {
		t.Error("an ordinary notebook need not name a profile")
	}
}

func TestOwnWorkingFaults(t *testing.T) {
	for _, p := range []struct{ body, text, hint string }{
		{"of: sand\n", "n.md:6:1: working count: there is no number of sand", "count layers"},
		{"of: fail\n", "n.md:6:1: working count: it went wrong", ""},
		{"off: layers\n", `n.md:7:1: working count has no key "off"`, `did you mean "of"?`},
		{"of: [a, b]\n", "n.md:7:5: of of working count is not plain text", ""},
	} {
		_, err := evaluateCount(p.body, counter)
		var faults profile.Faults
		if !errors.As(err, &faults) || len(faults) != 1 || faults[0].Error() != p.text || faults[0].Hint != p.hint {
			t.Errorf("%q: %v (%+v), want %s, %s", p.body, err, faults, p.text, p.hint)
		}
	}
}
