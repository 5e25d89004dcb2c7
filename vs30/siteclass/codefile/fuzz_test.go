package codefile

import (
	"bytes"
	"errors"
	"os"
	"testing"

	"shearbook/profile"
	"shearbook/vs30/siteclass"
)

// FuzzRead reads what strangers send. Whatever it is: no panic; a fault names
// the file, and its line is in the file; and a table that is read gives every
// site a class and is the same when it is written and read again.
func FuzzRead(f *testing.F) {
	f.Add([]byte(base))
	if data, err := os.ReadFile(exampleFile); err == nil {
		f.Add(data)
	}
	for _, c := range faultCases() {
		f.Add([]byte(c.text()))
	}
	for _, c := range siteclass.All() {
		if text, err := text(c); err == nil {
			f.Add(text)
		}
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		c, err := Read("t.yaml", data)
		if err != nil {
			var faults profile.Faults
			if !errors.As(err, &faults) || len(faults) == 0 || c != nil {
				t.Fatalf("%v is no list of faults, or there is a code beside it", err)
			}
			for _, fault := range faults {
				if lines := 2 + bytes.Count(data, []byte("\n")) + bytes.Count(data, []byte("\r")); fault.Place.File != "t.yaml" || fault.Place.Line > 3*lines {
					t.Errorf("a fault at %v", fault.Place)
				}
			}
			return
		}
		settles(t, c)
		travels(t, c)
	})
}

// settles looks for a class for soft and stiff ground, with rock near and
// far, with every condition met and with none.
func settles(t *testing.T, c *siteclass.Code) {
	thick := siteclass.Deposit{Thickness: profile.Known(1e4)}
	met := siteclass.Ground{Liquefiable: siteclass.Yes, Sensitive: siteclass.Yes, Collapsible: siteclass.Yes,
		Peat: thick, HighPlasticity: thick, SoftClay: thick, ThickClay: thick}
	for _, v := range []float64{1e-3, 90, 180, 360, 800, 1500, 1e9} {
		for _, ground := range []siteclass.Ground{{}, met} {
			for _, soil := range []float64{1, 20, 5000} {
				s := siteclass.Site{Ground: ground, Layers: []profile.Layer{
					{Top: 0, Bottom: soil, Vs: v / 3}, {Top: soil, Bottom: 1e5, Vs: v}}}
				d, err := c.Decide(s)
				if err == nil && note(d, "own-table") == "" {
					t.Error("no note own-table")
				}
				if byVelocity := hasColumn(c, siteclass.AverageVs) && (len(c.Routes) == 0 || c.Routes[0].Measures[0] == siteclass.AverageVs); byVelocity && (err != nil || d.Class == "") {
					t.Errorf("%v m/s under %v m of soil: class %q, %v", v, soil, d.Class, err)
				}
			}
		}
	}
}

// travels writes a code and reads it again.
func travels(t *testing.T, c *siteclass.Code) {
	var b bytes.Buffer
	if err := Write(&b, c); err != nil {
		t.Fatalf("%v cannot be written: %v", c.ID, err)
	}
	back, err := Read("t.yaml", b.Bytes())
	if err != nil || back.ID != c.ID || *back.Own != *c.Own || !equal(*back, *c) {
		t.Errorf("written and read again it is another code (%v):\n%s", err, b.String())
	}
}
