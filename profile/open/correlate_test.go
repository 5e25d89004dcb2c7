package open

import (
	"math"
	"strings"
	"testing"

	"shearbook/profile"
	"shearbook/profile/correlate"
)

const (
	blows = "top_m,bottom_m,N,soil\n0,4,5,Clay\n4,12,20,Sand\n"

	hole = "\"GROUP\",\"LOCA\"\r\n\"HEADING\",\"LOCA_ID\"\r\n\"UNIT\",\"\"\r\n\"DATA\",\"C1\"\r\n" +
		"\"GROUP\",\"GEOL\"\r\n\"HEADING\",\"LOCA_ID\",\"GEOL_TOP\",\"GEOL_BASE\",\"GEOL_DESC\"\r\n\"UNIT\",\"\",\"m\",\"m\",\"\"\r\n" +
		"\"DATA\",\"C1\",\"0\",\"0.6\",\"Fill\"\r\n\"DATA\",\"C1\",\"0.6\",\"9\",\"Sand\"\r\n"
	cone = "\"GROUP\",\"SCPT\"\r\n\"HEADING\",\"LOCA_ID\",\"SCPG_TESN\",\"SCPT_DPTH\",\"SCPT_RES\",\"SCPT_FRES\"\r\n\"UNIT\",\"\",\"\",\"m\",\"MPa\",\"kPa\"\r\n" +
		"\"DATA\",\"C1\",\"T1\",\"0.25\",\"5\",\"50\"\r\n\"DATA\",\"C1\",\"T1\",\"0.75\",\"5\",\"50\"\r\n\"DATA\",\"C1\",\"T1\",\"1.25\",\"5\",\"100\"\r\n"
	counts = "\"GROUP\",\"ISPT\"\r\n\"HEADING\",\"LOCA_ID\",\"ISPT_TOP\",\"ISPT_NVAL\",\"ISPT_N60\"\r\n\"UNIT\",\"\",\"m\",\"\",\"\"\r\n" +
		"\"DATA\",\"C1\",\"1\",\"20\",\"25\"\r\n\"DATA\",\"C1\",\"2\",\"20\",\"25\"\r\n"
)

func by(ids ...string) Options {
	return Options{Correlate: correlate.Options{Relations: ids}}
}

// By hand: 97·5^0.314 = e^(4.5747110 + 0.314·1.6094379) = 160.786 and 97·20^0.314 = 248.482.
func TestCorrelateTable(t *testing.T) {
	profiles, err := Bytes("b.csv", []byte(blows), by("imai-tonouchi-1982"))
	if err != nil {
		t.Fatal(err)
	}
	p := &profiles[0]
	if p.NoVelocity || math.Abs(p.Layers[0].Vs-160.786) > 0.001 || math.Abs(p.Layers[1].Vs-248.482) > 0.001 || p.BasisOf(1) != profile.Correlated {
		t.Errorf("got %+v", p)
	}
}

// A profile that states velocities stays as it is, and says so.
func TestCorrelateMeasured(t *testing.T) {
	const text = "top_m,bottom_m,vs_mps,N\n0,4,200,5\n"
	plain, err := Bytes("b.csv", []byte(text), Options{})
	if err != nil {
		t.Fatal(err)
	}
	got, err := Bytes("b.csv", []byte(text), by("imai-tonouchi-1982", "mayne-2006"))
	if err != nil || got[0].Layers[0] != plain[0].Layers[0] || len(got[0].Notes) != len(plain[0].Notes)+1 ||
		got[0].Notes[len(plain[0].Notes)].Text != "the profile states velocities of its own; the correlations that were asked for are not used" {
		t.Errorf("got %+v, %v", got, err)
	}
}

// A cone gives a profile, by hand of 220.337637 m/s at fs = 50 kPa and of
// 118.8·2 + 18.5 = 256.1 m/s at 100 kPa, cut at the strata of its hole: the
// readings stand for 0–0.5, 0.5–1 and 1–1.5 m, so 0.9/(0.4/220.337637 +
// 0.5/256.1) = 238.869 m/s below 0.6 m.
func TestCorrelateCone(t *testing.T) {
	profiles, err := Bytes("c.ags", []byte(hole+cone), by("mayne-2006"))
	if err != nil || len(profiles) != 1 {
		t.Fatal(profiles, err)
	}
	p := &profiles[0]
	if p.Name != "C1" || len(p.Layers) != 2 || math.Abs(p.Layers[0].Vs-220.337637) > 1e-6 || math.Abs(p.Layers[1].Vs-238.869) > 0.001 ||
		p.Layers[0].Soil != "Fill" || p.Layers[1].Soil != "Sand" || p.BasisOf(0) != profile.Correlated {
		t.Errorf("got %+v", p)
	}
	r := p.Reading
	if r == nil || len(r.Rows) != 3 || strings.Join(r.Rows[2].Split(), " ") != "1.25 5 100 " || r.Columns[1].Heading != "SCPT_RES" || r.Columns[1].Unit != "MPa" || r.Columns[2].Unit != "kPa" || r.Rows[0].Line != 13 || len(r.SHA256) != 64 {
		t.Errorf("got %+v", r)
	}
}

// In one hole a cone stands beside the blow counts, each with its relations.
func TestCorrelateBoth(t *testing.T) {
	data := []byte(hole + cone + counts)
	profiles, err := Bytes("c.ags", data, by("imai-1977", "mayne-2006"))
	if err != nil || len(profiles) != 2 || profiles[0].Name != "C1" || profiles[1].Name != "C1/T1" {
		t.Fatal(profiles, err)
	}
	// 249.740226 m/s at N = 20, by hand 91·e^(0.337·2.9957323).
	if v := profiles[0].Layers[1].Vs; math.Abs(v-249.740226) > 1e-5 || profiles[1].NoVelocity {
		t.Errorf("got %v m/s", v)
	}
	profiles, err = Bytes("c.ags", data, by("mayne-2006"))
	if err != nil || len(profiles) != 2 || !profiles[0].NoVelocity || profiles[1].NoVelocity {
		t.Errorf("got %+v, %v", profiles, err)
	}
}

// N60 of the file is known as such: sand at 1 m, dry, is not for clay, and the
// stress at 1.05 m of 18 kN/m³ is 18.9 kPa; e^(4.045 + 0.096·3.2188758 +
// 0.236·2.9391619) = 155.657, the fill above having no soil of its own.
func TestCorrelateN60(t *testing.T) {
	opt := by("imai-1977", "brandenberg-2010-sand")
	opt.Correlate.UnitWeight, opt.Correlate.WaterTable = 18, profile.Known(9)
	without, err := Bytes("c.ags", []byte(hole+counts), opt)
	if err != nil {
		t.Fatal(err)
	}
	opt.N60 = true
	with, err := Bytes("c.ags", []byte(hole+counts), opt)
	if err != nil {
		t.Fatal(err)
	}
	// By hand: 0.6 to 1.5 m.
	if l := with[0].Layers[1]; l.Top != 0.6 || l.Bottom != 1.5 || math.Abs(l.Vs-math.Sqrt(91*math.Pow(25, 0.337)*155.657)) > 0.01 {
		t.Errorf("got %+v", l)
	}
	if l := without[0].Layers[1]; math.Abs(l.Vs-249.740226) > 1e-5 {
		t.Errorf("without: got %+v", l)
	}
}

func TestCorrelateFaults(t *testing.T) {
	gap := strings.Replace(blows, "20", "", 1)
	for _, c := range []struct {
		data, id, want string
	}{
		{blows, "imai-1978", `f: no correlation is called "imai-1978"; did you mean "imai-1977"`},
		{blows, "mayne-2006", "f: the correlations named estimate from cones, and the file has none"},
		{gap, "imai-1977", "f:3:6: no correlation gives a velocity for layer 2, 4–12 m: imai-1977 needs N, which is not stated"},
		{hole + cone, "robertson-2009", `f:13: cone "C1" gives no velocity: robertson-2009 needs σv, and the unit weight of the ground down to there is not stated`},
		{hole + cone, "imai-1977", "f: the file gives neither a shear-wave velocity of the ground nor N nor su; it has LOCA, GEOL, SCPT"},
		{hole, "mayne-2006", "f: the file gives neither a shear-wave velocity of the ground nor N nor su; it has LOCA, GEOL"},
	} {
		_, err := Bytes("f", []byte(c.data), by(c.id))
		wantFault(t, err, c.want)
	}
}
