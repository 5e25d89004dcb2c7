package profile

import (
	"math"
	"strings"
	"testing"
)

// TestNoVelocity: a profile may state no velocity at all where it says so,
// and then none in any layer.
func TestNoVelocity(t *testing.T) {
	boring := func() *Profile {
		return &Profile{Name: "B1", NoVelocity: true, Layers: []Layer{
			{Top: 0, Bottom: 6, N: 12, Given: GivenN},
			{Top: 6, Bottom: math.Inf(1), Su: 60, Given: GivenSu},
		}}
	}
	if faults := Validate(boring()); len(faults) > 0 {
		t.Errorf("a boring without velocities: %v", faults)
	}
	if notes := Doubts(boring()); len(notes) > 0 {
		t.Errorf("doubts about velocities that are not there: %v", notes)
	}
	silent := boring()
	silent.NoVelocity = false
	if faults := Validate(silent); len(faults) != 2 || !strings.Contains(faults.Error(), "Vs of layer 1 is zero") {
		t.Errorf("without saying so: %v", faults)
	}
	for name, spoil := range map[string]func(*Layer){
		"Vs":           func(l *Layer) { l.Vs = 300 },
		"Vs at bottom": func(l *Layer) { l.VsBottom = 300 },
		"Vp":           func(l *Layer) { l.Vp, l.Given = 600, l.Given|GivenVp },
	} {
		p := boring()
		spoil(&p.Layers[0])
		if faults := Validate(p); len(faults) != 1 || !strings.Contains(faults.Error(), "layer 1 states a velocity") {
			t.Errorf("%s in one layer: %v", name, faults)
		}
	}
}
