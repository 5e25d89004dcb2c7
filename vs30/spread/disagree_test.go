package spread

import (
	"math"
	"strings"
	"testing"

	"shearbook/profile"
)

func disagree(t *testing.T, lines []Line) Disagreement {
	t.Helper()
	d, err := Disagree(lines, 0, 30)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// Two lines of 300 and 360 m/s, each with 0.05: (ln 1.2)²/(2·0.05²) = 6.6482, and
// the chance of that or more with one degree of freedom is erfc(√(6.6482/2)) =
// 0.009924.
func TestTwoLinesThatDisagree(t *testing.T) {
	d := disagree(t, linesOf(0.05, 300, 360))
	near(t, "chi-square", d.ChiSquare, 6.6482, 5e-5)
	near(t, "chance", d.Chance, 0.009924, 5e-6)
	near(t, "ratio", d.Ratio, 1.2, 1e-9)
	if !d.Beyond || d.Freedom != 1 || d.Slowest != 0 || d.Fastest != 1 {
		t.Errorf("%+v", d)
	}
	for _, words := range []string{"L2 is a factor of 1.2 faster than L1", "0.0099", "from 0 to 30 m by up to a factor of 1.2"} {
		if !strings.Contains(d.Note.Text, words) {
			t.Errorf("%q does not say %q", d.Note.Text, words)
		}
	}
	// Twice the sigma allows for it: a quarter of the chi-square, 1.66.
	if d := disagree(t, linesOf(0.10, 300, 360)); d.Beyond || d.Note != (profile.Note{}) || d.Partings != nil {
		t.Errorf("%+v", d)
	}
}

// The lines part where one has a layer that the other has not.
func TestWhereTheyPart(t *testing.T) {
	lines := []Line{
		{Name: "hole", Layers: pairs(5, 200, 8, 150, 7, 300, 20, 500), SigmaLn: 0.05},
		{Name: "line", Layers: pairs(4, 205, 9, 290, 7, 310, 20, 490), SigmaLn: 0.05},
	}
	d := disagree(t, lines)
	if !d.Beyond || len(d.Partings) != 1 {
		t.Fatalf("%+v", d)
	}
	// From 4 m, where the line is 290/200 faster, and 290/150 from 5 m, to 13 m.
	p := d.Partings[0]
	if p.Top != 4 || p.Bottom != 13 || p.Slowest != 0 || p.Fastest != 1 {
		t.Errorf("%+v, want 4 to 13 m", p)
	}
	near(t, "ratio", p.Ratio, 290.0/150, 1e-9)
	if !strings.Contains(d.Note.Text, "from 4 to 13 m") {
		t.Errorf("%q does not say where", d.Note.Text)
	}
	// A sigma of the layer itself counts before that of the average.
	lines[0].Layers[1].SigmaLnVs, lines[0].Layers[1].Given = 0.4, profile.GivenSigma
	if d := disagree(t, lines); len(d.Partings) != 1 || d.Partings[0].Bottom != 5 {
		t.Errorf("%+v, want 4 to 5 m", d.Partings)
	}
}

// Velocities may part one way and then the other, and the averages agree.
func TestAveragesThatAgree(t *testing.T) {
	d := disagree(t, []Line{
		{Name: "a", Layers: pairs(15, 200, 25, 400), SigmaLn: 0.05},
		{Name: "b", Layers: pairs(15, 400, 25, 200), SigmaLn: 0.05},
	})
	if d.Beyond || len(d.Partings) != 1 || d.Partings[0].Top != 0 || d.Partings[0].Bottom != 30 {
		t.Errorf("%+v", d)
	}
}

func TestNotJudged(t *testing.T) {
	lines := linesOf(0.05, 300, 400, 500)
	lines[1].SigmaLn = 0
	for _, c := range []struct {
		lines []Line
		say   string
	}{{lines, "no sigma is stated for L2"}, {linesOf(0.1, 300), "one profile"}} {
		d := disagree(t, c.lines)
		if !strings.Contains(d.Why, c.say) || d.Beyond {
			t.Errorf("%q does not say %q", d.Why, c.say)
		}
	}
	if _, err := Disagree(nil, 0, 30); err == nil {
		t.Error("no profiles disagree")
	}
}

// Lines that differ by their errors alone are beyond them in 5 ± 2 % of cases.
func TestFalseAlarms(t *testing.T) {
	rng, beyond := seeded(15), 0
	for range 1000 {
		var v []float64
		for range 4 {
			v = append(v, 300*math.Exp(0.08*rng.NormFloat64()))
		}
		if disagree(t, linesOf(0.08, v...)).Beyond {
			beyond++
		}
	}
	near(t, "false alarms", float64(beyond)/1000, 0.05, 0.02)
}
