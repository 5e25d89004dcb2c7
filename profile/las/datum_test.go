package las

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"shearbook/profile"
)

// A log from a kelly bushing 5 m above the ground was read as from the ground
// without a word: 20 − 15 = 5 m; in feet 65.6 ft − 15 m = 4.995 m.
func TestKellyBushingIsNotSaid(t *testing.T) {
	const log = "~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nSTRT.M 0 :\nSTOP.M 4 :\nSTEP.M 1 :\nNULL. -999.25 :\nWELL. BH7 :\n%s~C\nDEPT.M :\nVS.M/S : shear\n~A\n0 200\n1 200\n2 210\n3 220\n4 230\n"
	for _, c := range []struct {
		items string
		opt   Options
		want  string
	}{
		{"EKB.M 20.0 :\nEGL.M 15.0 :\n", Options{}, "the file states EKB 20.0 m and a ground level 5 m below it, and not from which of them depths are measured; they were taken as below ground level: if they are not, add --log-datum 5m"},
		{"EDF.FT 65.6 :\nEGL.M 15.0 :\n", Options{}, "add --log-datum 4.995m"},
		{"EREF.M 20 :\nEGL.M 15 :\n", Options{}, "add --log-datum 5m"},
		{"EKB.M 20 :\nEGL.M 15 :\nLMF. KB :\n", Options{}, `depths are measured from "KB", and EKB stands 5 m above ground level`},
		{"EKB.M 20 :\nEGL.M 15 :\nLMF. GL :\n", Options{}, ""},
		{"EKB.M 15 :\nEGL.M 15 :\n", Options{}, ""},
		{"EKB.M 20 :\n", Options{}, ""},
	} {
		p, err := Read("x.las", fmt.Appendf(nil, log, c.items), c.opt)
		if err != nil {
			t.Errorf("%q: %v", c.items, err)
			continue
		}
		got := ""
		for _, n := range p[0].Notes {
			if n.ID == "depth-datum" {
				got = n.Text
			}
		}
		if (got == "") != (c.want == "") || !strings.Contains(got, c.want) {
			t.Errorf("%q: %q, want %q", c.items, got, c.want)
		}
	}
}

// The hint on two shear curves names those of the file.
func TestHintNamesOtherCurves(t *testing.T) {
	const log = "~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nSTRT.M 0 :\nSTOP.M 2 :\nSTEP.M 1 :\nNULL. -999.25 :\n~C\nDEPT.M :\nVS1.M/S :\nVS2.M/S :\n~A\n0 200 400\n1 200 400\n2 210 400\n"
	if _, hint := faultAndHint(t, log); hint != "choose one by its mnemonic, as --map Vs=VS1 or --map Vs=VS2" {
		t.Error(hint)
	}
	for _, c := range [][2]string{{"VS.FT", "--map 'Vs=VS [us/ft]'"}, {"DTS.US", "--map 'Vs=DTS [us/ft]'"}} {
		text := strings.Replace(strings.Replace(log, "VS1.M/S", c[0], 1), "VS2.M/S", "GR.API", 1)
		if _, hint := faultAndHint(t, text); !strings.Contains(hint, c[1]) {
			t.Errorf("%s: %s", c[0], hint)
		}
	}
}

func faultAndHint(t *testing.T, text string) (fault, hint string) {
	t.Helper()
	_, err := Read("x.las", []byte(text), Options{})
	var faults profile.Faults
	if !errors.As(err, &faults) {
		t.Fatal(err)
	}
	return faults[0].Text, faults[0].Hint
}
