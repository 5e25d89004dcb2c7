package extend

import (
	"encoding/csv"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/vs30"
)

// uniform returns one layer of velocity v down to depth.
func uniform(depth, v float64) []profile.Layer { return []profile.Layer{{Bottom: depth, Vs: v}} }

func find(t testing.TB, id string) *Relation {
	t.Helper()
	r, err := Find(id)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func estimate(t testing.TB, id string, layers []profile.Layer, from, thickness float64) Estimate {
	t.Helper()
	e, err := find(t, id).Estimate(layers, from, thickness)
	if err != nil {
		t.Fatalf("%s: %v", id, err)
	}
	return e
}

// Averages over d and the Vs30 that follow from the printed coefficients,
// 10^(a + b·log v) and 10^(c₀ + c₁·log v + c₂·(log v)²), computed outside this
// program; for d = 20 and v = 250 by hand: log 250 = 2.397940,
// 0.025439 + 1.0095·2.397940 = 2.446160, 10^2.446160 = 279.36.
func TestPublishedCoefficients(t *testing.T) {
	for _, c := range []struct {
		id             string
		depth, v, want float64
	}{
		{"boore-2004", 10, 250, 323.61},
		{"boore-2004", 15, 350, 421.48},
		{"boore-2004", 20, 250, 279.36},
		{"boore-2004", 25, 350, 368.98},
		{"boore-2004", 29, 500, 505.18},
		{"boore-2011", 5, 250, 489.80},
		{"boore-2011", 10, 250, 407.50},
		{"boore-2011", 20, 250, 300.56},
		{"boore-2011", 25, 350, 380.25},
	} {
		e := estimate(t, c.id, uniform(c.depth, c.v), 0, 30)
		near(t, c.id, e.Velocity, c.want, 0.005)
	}
}

// z₁ = 10, z₂ = 20 m, 220 and 280 m/s: 280·(280/220)^(log 1.5 / log 2) =
// 280·1.272727^0.584963 = 322.4217. The layers: 10 m at 220, and what brings
// the average over 20 m to 280.
func TestTwoDepths(t *testing.T) {
	near(t, "from the averages", twoDepths(10, 220, 20, 280, 30), 322.4217, 0.00005)
	layers := []profile.Layer{{Bottom: 10, Vs: 220}, {Top: 10, Bottom: 20, Vs: 10 / (20.0/280 - 10.0/220)}}
	near(t, "from the layers", estimate(t, "wang-2015", layers, 0, 30).Velocity, 322.4217, 0.00005)
}

// Three measured profiles, cut at 20 m and estimated by every relation; source
// in testdata/profiles/README.md, values computed outside this program. OHW and
// AND slow down below 20 m: every relation comes out too high there.
func TestBlind(t *testing.T) {
	profiles := readLayers(t)
	ids := []string{"constant-velocity", "boore-2004", "boore-2011", "wang-2015"}
	for _, c := range []struct {
		name string
		want []float64
		true float64
		high bool
	}{
		{"AP2", []float64{133.11, 125.61, 132.23, 134.77}, 133.11, false},
		{"OHW", []float64{281.00, 281.08, 302.42, 286.18}, 248.62, true},
		{"AND", []float64{514.30, 557.08, 589.54, 526.70}, 488.77, true},
	} {
		whole, err := vs30.Average(profiles[c.name], 0, 30)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.name+" whole", whole, c.true, 0.005)
		cut := Cut(profiles[c.name], 20)
		for i, id := range ids {
			near(t, c.name+" "+id, estimate(t, id, cut, 0, 30).Velocity, c.want[i], 0.005)
		}
		for _, r := range All() {
			over := 30.0
			if r.ID == "asce-7-22" {
				over = hundredFeet
			}
			truth, err := vs30.Average(profiles[c.name], 0, over)
			if err != nil {
				t.Fatal(err)
			}
			e, err := r.Estimate(cut, 0, over)
			if err != nil {
				t.Errorf("%s %s: %v", c.name, r.ID, err)
			} else if c.high && e.Velocity <= truth {
				t.Errorf("%s %s: %.2f m/s is not above %.2f", c.name, r.ID, e.Velocity, truth)
			}
		}
	}
}

// Sigma in natural logarithms: 0.030181·ln 10 = 0.069494, 0.035·ln 10 = 0.080590.
func TestSigma(t *testing.T) {
	layers := uniform(20, 250)
	near(t, "2004", estimate(t, "boore-2004", layers, 0, 30).SigmaLn, 0.069494, 5e-7)
	near(t, "2011", estimate(t, "boore-2011", layers, 0, 30).SigmaLn, 0.080590, 5e-7)
	near(t, "2004 at 20 m", find(t, "boore-2004").SigmaLn(20), 0.069494, 5e-7)
	for _, id := range []string{"constant-velocity", "wang-2015", "power-law"} {
		if s := estimate(t, id, []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 20, Vs: 300}}, 0, 30).SigmaLn; s != 0 {
			t.Errorf("%s: sigma %g, none is published", id, s)
		}
	}
	if s := find(t, "boore-2004").SigmaLn(9.9); s != 0 {
		t.Errorf("sigma at 9.9 m %g, want 0", s)
	}
}

// secondEntry returns a table of testdata.
func secondEntry(t *testing.T, name string) []row {
	t.Helper()
	f, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var table []row
	for _, record := range records[1:] {
		var n []float64
		for _, cell := range record {
			x, err := strconv.ParseFloat(cell, 64)
			if err != nil {
				t.Fatal(err)
			}
			n = append(n, x)
		}
		if len(n) == 4 {
			n = slices.Insert(n, 3, 0)
		}
		table = append(table, row{n[0], n[1], n[2], n[3], n[4]})
	}
	return table
}

// Each table agrees with its second entry, and the comparison sees a change of
// any cell by one in its last printed digit.
func TestSecondEntry(t *testing.T) {
	for _, c := range []struct {
		id, file string
		rows     int
	}{{"boore-2004", "boore-2004.csv", 20}, {"boore-2011", "boore-2011.csv", 25}} {
		r, second := find(t, c.id), secondEntry(t, c.file)
		if len(second) != c.rows || !slices.Equal(r.table, second) {
			t.Errorf("%s: the two entries differ", c.id)
		}
		for i := range r.table {
			for _, cell := range []func(*row) *float64{
				func(r *row) *float64 { return &r.depth }, func(r *row) *float64 { return &r.c0 },
				func(r *row) *float64 { return &r.c1 }, func(r *row) *float64 { return &r.c2 },
				func(r *row) *float64 { return &r.sigma },
			} {
				changed := slices.Clone(r.table)
				*cell(&changed[i]) += 1e-8
				if slices.Equal(changed, second) {
					t.Errorf("%s: a change in row %d is not seen", c.id, i)
				}
			}
		}
		if r.MinDepth != second[0].depth || r.MaxDepth != second[len(second)-1].depth {
			t.Errorf("%s: depths %g to %g, the table has %g to %g", c.id, r.MinDepth, r.MaxDepth,
				second[0].depth, second[len(second)-1].depth)
		}
	}
}

// A slip of a digit shows as a kink: from row to row Vs30 for the same average
// falls, by less and less, and so does sigma.
func TestTablesAreSmooth(t *testing.T) {
	for _, id := range []string{"boore-2004", "boore-2011"} {
		table := find(t, id).table
		for _, v := range []float64{150, 300, 600} {
			for i := 1; i < len(table); i++ {
				a, b := table[i-1], table[i]
				if fall := a.ln(v) - b.ln(v); fall < -0.005 || fall > 0.11 {
					t.Errorf("%s, %g m/s: ln Vs30 falls by %.4f from %g to %g m", id, v, fall, a.depth, b.depth)
				}
				if b.sigma >= a.sigma || b.depth != a.depth+1 {
					t.Errorf("%s: row %g m after row %g m", id, b.depth, a.depth)
				}
			}
		}
		last := table[len(table)-1]
		near(t, id+" at 29 m", math.Exp(last.ln(300)), 300, 5)
	}
}

// Between rows coefficients are linear. By hand for boore-2004 at 10.5 m:
// a = 0.032101, b = 1.03165, sigma = 0.067991; log 250 = 2.3979400;
// 10^(0.032101 + 2.4738348) = 10^2.5059358 = 320.580. It is the geometric mean
// of what the rows of 10 and 11 m give, and continuous at the rows.
func TestBetweenRows(t *testing.T) {
	c, ok := between(find(t, "boore-2004").table, 10.5)
	if !ok {
		t.Fatal("no row for 10.5 m")
	}
	near(t, "a", c.c0, 0.032101, 1e-12)
	near(t, "b", c.c1, 1.03165, 1e-12)
	near(t, "sigma", c.sigma, 0.067991, 1e-12)
	near(t, "Vs30", math.Exp(c.ln(250)), 320.580, 0.005)

	for _, id := range []string{"boore-2004", "boore-2011"} {
		table := find(t, id).table
		for i := 1; i < len(table); i++ {
			a, b := table[i-1], table[i]
			mid, _ := between(table, a.depth+0.5)
			near(t, id+" half-way", mid.ln(300), (a.ln(300)+b.ln(300))/2, 1e-12)
			at, _ := between(table, b.depth)
			near(t, id+" at a row", at.ln(300), b.ln(300), 1e-12)
			under, _ := between(table, b.depth-1e-7)
			near(t, id+" just above a row", under.ln(300), b.ln(300), 1e-7)
		}
		for _, depth := range []float64{table[0].depth - 1e-6, 29 + 1e-6, 0, math.NaN(), math.Inf(1)} {
			if _, ok := between(table, depth); ok {
				t.Errorf("%s: a row at %v m", id, depth)
			}
		}
		if _, ok := between(table, math.Nextafter(table[0].depth, 0)); !ok {
			t.Errorf("%s: no row an ulp above the first", id)
		}
	}
}

// The pair for Japan is the 2011 relation at 10 m or less, the 2004 one from
// 20 m on, and in between lies between the two, half-way in ln at 15 m; there
// for 350 m/s: √(421.48·V₂₀₁₁), and sigma of the mixture.
func TestJapan(t *testing.T) {
	at := func(id string, depth, v float64) Estimate { return estimate(t, id, uniform(depth, v), 0, 30) }
	for _, depth := range []float64{5, 7.5, 10} {
		a, b := at("boore-japan", depth, 250), at("boore-2011", depth, 250)
		near(t, "as 2011", a.Velocity, b.Velocity, 1e-9)
		near(t, "sigma as 2011", a.SigmaLn, b.SigmaLn, 1e-12)
	}
	for _, depth := range []float64{20, 24.2, 29} {
		a, b := at("boore-japan", depth, 250), at("boore-2004", depth, 250)
		near(t, "as 2004", a.Velocity, b.Velocity, 1e-9)
		near(t, "sigma as 2004", a.SigmaLn, b.SigmaLn, 1e-12)
	}
	japan, kik, california := at("boore-japan", 15, 350), at("boore-2011", 15, 350), at("boore-2004", 15, 350)
	near(t, "half-way", japan.Velocity, math.Sqrt(kik.Velocity*california.Velocity), 1e-9)
	gap := math.Log(kik.Velocity / california.Velocity)
	near(t, "its sigma", japan.SigmaLn,
		math.Sqrt((kik.SigmaLn*kik.SigmaLn+california.SigmaLn*california.SigmaLn)/2+gap*gap/4), 1e-12)
	// A quarter of the way.
	japan, kik, california = at("boore-japan", 12.5, 350), at("boore-2011", 12.5, 350), at("boore-2004", 12.5, 350)
	near(t, "three quarters 2011", math.Log(japan.Velocity),
		0.75*math.Log(kik.Velocity)+0.25*math.Log(california.Velocity), 1e-12)
}

// Over 100 ft the velocity that Vs30 implies below the profile goes on. By
// hand, boore-2004, 20 m at 250 m/s: Vs30 = 279.356, 30/279.356 = 0.107390 s,
// of which 0.08 s above 20 m; 0.027390 s over 10 m is 365.09 m/s; 0.48 m of it
// take 0.0013147 s; 30.48/0.1087051 = 280.392.
func TestHundredFeet(t *testing.T) {
	e := estimate(t, "boore-2004", uniform(20, 250), 0, hundredFeet)
	near(t, "over 100 ft", e.Velocity, 280.392, 0.005)
	near(t, "below", e.Below, 365.09, 0.02)
	if !strings.Contains(e.Note.Text, "30.48 m") {
		t.Errorf("the note does not say so: %q", e.Note.Text)
	}
	w := estimate(t, "wang-2015", Cut(readLayers(t)["AP2"], 20), 0, hundredFeet)
	near(t, "wang-2015", w.Velocity, twoDepths(10, 84.126, 20, 113.255, hundredFeet), 0.01)
}

// The layers that an estimate continues have its average, and end where it does.
func TestContinue(t *testing.T) {
	for name, layers := range readLayers(t) {
		for _, depth := range []float64{12, 20.3, 25} {
			cut := Cut(layers, depth)
			before := slices.Clone(cut)
			for _, r := range All() {
				for _, over := range []float64{30, hundredFeet} {
					e, err := r.Estimate(cut, 0, over)
					if err != nil {
						continue
					}
					v, err := vs30.Average(e.Continue(cut), 0, over)
					if err != nil {
						t.Fatalf("%s %s: %v", name, r.ID, err)
					}
					near(t, name+" "+r.ID, v, e.Velocity, 1e-9*v)
				}
			}
			if !slices.Equal(cut, before) {
				t.Errorf("%s: the caller's layers changed", name)
			}
		}
	}
}

// Splitting a layer changes no estimate.
func TestSplitting(t *testing.T) {
	whole := []profile.Layer{{Bottom: 4, Vs: 150}, {Top: 4, Bottom: 18, Vs: 240}}
	split := []profile.Layer{{Bottom: 1.3, Vs: 150}, {Top: 1.3, Bottom: 4, Vs: 150},
		{Top: 4, Bottom: 11, Vs: 240}, {Top: 11, Bottom: 18, Vs: 240}}
	for _, r := range All() {
		over := 30.0
		if r.ID == "asce-7-22" {
			over = hundredFeet
		}
		a, err := r.Estimate(whole, 0, over)
		if err != nil {
			t.Errorf("%s: %v", r.ID, err)
			continue
		}
		b, err := r.Estimate(split, 0, over)
		if err != nil {
			t.Fatal(err)
		}
		near(t, r.ID, b.Velocity, a.Velocity, 1e-9*a.Velocity)
	}
}

func TestFind(t *testing.T) {
	seen := map[string]bool{}
	for _, r := range All() {
		if got, err := Find(r.ID); got != r || err != nil {
			t.Errorf("Find(%q) = %v, %v", r.ID, got, err)
		}
		if seen[r.ID] || r.Name == "" || r.Source == "" || r.Cite == "" || r.Region == "" || r.Limits == "" || r.Standing == "" || r.estimate == nil {
			t.Errorf("%q is not described", r.ID)
		}
		seen[r.ID] = true
	}
	_, err := Find("boore-2005")
	if err == nil || !strings.Contains(err.Error(), `did you mean "boore-2004"`) {
		t.Errorf("error %v names no nearest", err)
	}
	if _, err := Find(""); err == nil {
		t.Error("a relation without a name")
	}
	all := All()
	all[0] = nil
	if All()[0] == nil {
		t.Error("All hands out its own slice")
	}
}

// Every estimate says what it is, from where, and how sure.
func TestNotes(t *testing.T) {
	layers := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 20, Vs: 300}}
	for _, c := range []struct {
		id  string
		say []string
	}{
		{"constant-velocity", []string{"300 m/s, is taken to go on unchanged over 10 m, 33 %", "doi:10.1785/0120030105", "one source", "no sigma"}},
		{"boore-2004", []string{"over the upper 20 m, 240 m/s", "BSSA 94(2):591–597", "one source; sigma of ln 0.069"}},
		{"boore-2011", []string{"BSSA 101(6):3046–3059", "sigma of ln 0.081"}},
		{"boore-japan", []string{"electronic supplement", "sigma of ln 0.069"}},
		{"wang-2015", []string{"10 m, 200 m/s, and over 20 m, 240 m/s", "BSSA 105(3)", "from memory; no sigma"}},
		{"power-law", []string{"z^0.", "scatters by", "common practice; no sigma"}},
	} {
		n := estimate(t, c.id, layers, 0, 30).Note
		if n.ID != "extended" || strings.HasSuffix(n.Text, ".") {
			t.Errorf("%s: note %q", c.id, n)
		}
		for _, words := range append(c.say, "ends 20 m below ground level", "too high where that is slower") {
			if !strings.Contains(n.Text, words) {
				t.Errorf("%s: %q does not say %q", c.id, n.Text, words)
			}
		}
	}
	n := estimate(t, "asce-7-22", layers, 0, hundredFeet).Note
	if !strings.Contains(n.Text, "engineer has to confirm") || !strings.Contains(n.Text, "from memory") {
		t.Errorf("asce-7-22: %q", n.Text)
	}
}

// The constant velocity as a relation is ConstantVelocity, from any datum.
func TestConstantVelocityRelation(t *testing.T) {
	for name, layers := range readLayers(t) {
		cut := Cut(layers, 12)
		for _, from := range []float64{0, 2.5, 8} {
			for _, over := range []float64{20, 30, 50} {
				near(t, name, estimate(t, "constant-velocity", cut, from, over).Velocity, extended(t, cut, from, over), 1e-9)
			}
		}
	}
}

func TestCut(t *testing.T) {
	layers := []profile.Layer{{Bottom: 10, Vs: 200}, {Top: 10, Bottom: 20, Vs: 300, VsBottom: 400},
		{Top: 20, Bottom: math.Inf(1), Vs: 800}}
	for _, c := range []struct {
		depth float64
		want  []profile.Layer
	}{
		{0, nil},
		{10 + 1e-10, layers[:1]},
		{15, []profile.Layer{layers[0], {Top: 10, Bottom: 15, Vs: 300, VsBottom: 350}}},
		{25, []profile.Layer{layers[0], layers[1], {Top: 20, Bottom: 25, Vs: 800}}},
		{math.Inf(1), layers},
	} {
		if got := Cut(layers, c.depth); !slices.Equal(got, c.want) {
			t.Errorf("Cut at %g: %+v, want %+v", c.depth, got, c.want)
		}
	}
}
