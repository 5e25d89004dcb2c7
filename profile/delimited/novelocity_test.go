package delimited

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"shearbook/profile"
)

// A table of blow counts or strengths without velocities is a profile, too.
func TestTableWithoutVelocities(t *testing.T) {
	for name, text := range map[string]string{
		"N":  "bottom (m),N,soil\n5,8,fill\n15,25,sand\n30,140,gravel\n",
		"su": "bottom (m),su (kPa),PI\n5,150,60\n15,100,65\n20,60,35\n",
	} {
		profiles, err := Read("x.csv", []byte(text), Options{})
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		p := profiles[0]
		if !p.NoVelocity || len(p.Layers) != 3 || p.Layers[1].Vs != 0 {
			t.Errorf("%s: %+v", name, p)
		}
		if l := p.Layers[1]; l.Line != 3 || l.Column != 4 {
			t.Errorf("%s: the second layer stands at %d:%d, want 3:4", name, l.Line, l.Column)
		}
		var out strings.Builder
		if err := Write(&out, profiles); err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		again, err := Read("y.csv", []byte(out.String()), Options{})
		if err != nil {
			t.Fatalf("%s: %v\n%s", name, err, &out)
		}
		if diff := cmp.Diff(p.Layers, again[0].Layers, asWritten); diff != "" || !again[0].NoVelocity {
			t.Errorf("%s: came back otherwise:\n%s", name, diff)
		}
	}
}

// With neither, it is no table of layers; nor do profiles with and without
// velocities share one.
func TestVelocitiesStayAskedFor(t *testing.T) {
	_, err := Read("x.csv", []byte("bottom (m),soil\n5,fill\n"), Options{})
	if err == nil || !strings.Contains(err.Error(), "no column of Vs") {
		t.Errorf("got %v", err)
	}
	err = Write(&strings.Builder{}, []profile.Profile{
		{Name: "a", Layers: []profile.Layer{{Bottom: 5, Vs: 200}}},
		{Name: "b", NoVelocity: true, Layers: []profile.Layer{{Bottom: 5, N: 8, Given: profile.GivenN}}},
	})
	if err == nil || !strings.Contains(err.Error(), "cannot share a table") {
		t.Errorf("got %v", err)
	}
}
