package main

import (
	"bytes"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"slices"
	"sort"
	"strings"
	"testing"
)

// k7 is 6 m at 220 m/s over 430 m/s.
const k7 = "top (m),bottom (m),vs (m/s)\n0,6,220\n6,40,430\n"

func classifyJSON(t *testing.T, args ...string) map[string]any {
	t.Helper()
	file := filepath.Join(t.TempDir(), "k7.csv")
	if err := os.WriteFile(file, []byte(k7), 0o666); err != nil {
		t.Fatal(err)
	}
	var out, errs bytes.Buffer
	status := run(append([]string{"classify", file, "--format", "json"}, args...), streams{in: strings.NewReader(""), out: &out, err: &errs})
	if status != done || errs.Len() > 0 {
		t.Fatalf("status %d: %s", status, &errs)
	}
	var got map[string]any
	if err := json.Unmarshal(out.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	return got
}

// The JSON is stable: these keys, of schema 1.
func TestJSONShape(t *testing.T) {
	got := classifyJSON(t, "--code", "asce-7-16")
	check := func(where string, value any, want string) {
		t.Helper()
		var keys []string
		for k := range value.(map[string]any) {
			keys = append(keys, k)
		}
		sort.Strings(keys)
		for _, k := range strings.Fields(want) {
			if !slices.Contains(keys, k) {
				t.Errorf("%s has no %s: %v", where, k, keys)
			}
		}
	}
	check("the whole", got, "schema confirmation results")
	r := got["results"].([]any)[0].(map[string]any)
	check("a result", r, "profile source code edition class route depth_m velocity_mps velocity vs30_mps depth_reached_m datum_m basis standing margin steps notes unassessed")
	check("the source", r["source"], "file sha256")
	check("the velocity", r["velocity"], "value unit")
	check("the margin", r["margin"], "to_class bound unit percent")
	check("a step", r["steps"].([]any)[0], "text clause value operator bound unit holds")
	check("a note", r["notes"].([]any)[0], "id text")
	if s := got["schema"]; s != 1.0 {
		t.Errorf("schema %v, want 1", s)
	}
	if s := got["confirmation"].(string); !strings.Contains(s, "licensed engineer") {
		t.Errorf("confirmation %q", s)
	}
}

func TestJSONValues(t *testing.T) {
	r := classifyJSON(t, "--code", "asce-7-16")["results"].([]any)[0].(map[string]any)
	// By hand: 30/(6/220 + 24/430) = 361.0687 m/s;
	// 30.48/(6/220 + 24.48/430) = 361.983 m/s = 1,187.61 ft/s: class D,
	// and 1.04 % below the bound of 1,200 ft/s.
	over30 := 30 / (6.0/220 + 24.0/430)
	over100ft := 30.48 / (6.0/220 + 24.48/430)
	margin := r["margin"].(map[string]any)
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"vs30_mps", r["vs30_mps"].(float64), over30},
		{"velocity_mps", r["velocity_mps"].(float64), over100ft},
		{"velocity in ft/s", r["velocity"].(map[string]any)["value"].(float64), over100ft / 0.3048},
		{"depth_m", r["depth_m"].(float64), 30.48},
		{"depth_reached_m", r["depth_reached_m"].(float64), 40},
		{"datum_m", r["datum_m"].(float64), 0},
		{"margin bound", margin["bound"].(float64), 1200},
		{"margin percent", margin["percent"].(float64), 100 * (1200 - over100ft/0.3048) / (over100ft / 0.3048)},
	} {
		if math.Abs(c.got-c.want) > 1e-9*math.Max(1, c.want) {
			t.Errorf("%s = %v, want %v", c.name, c.got, c.want)
		}
	}
	if r["class"] != "D" || margin["to_class"] != "C" || r["route"] != "velocity" || r["code"] != "asce-7-16" {
		t.Errorf("class %v, next %v, route %v, code %v", r["class"], margin["to_class"], r["route"], r["code"])
	}
}

// results.json of a report holds what classify says of the same profile.
func TestReportAndClassifyAgree(t *testing.T) {
	dir := t.TempDir()
	file := filepath.Join(dir, "k7.csv")
	if err := os.WriteFile(file, []byte(k7), 0o666); err != nil {
		t.Fatal(err)
	}
	var errs bytes.Buffer
	if status := run([]string{"report", file, "--code", "ec8-2004,asce-7-16"}, streams{out: &bytes.Buffer{}, err: &errs}); status != done {
		t.Fatalf("status %d: %s", status, &errs)
	}
	data, err := os.ReadFile(filepath.Join(dir, "k7-report", "results.json"))
	if err != nil {
		t.Fatal(err)
	}
	var inReport map[string]any
	if err := json.Unmarshal(data, &inReport); err != nil {
		t.Fatal(err)
	}
	onTerminal := classifyJSON(t, "--code", "ec8-2004,asce-7-16")
	for _, results := range []map[string]any{inReport, onTerminal} {
		for _, r := range results["results"].([]any) {
			delete(r.(map[string]any)["source"].(map[string]any), "file") // named as it was given
		}
	}
	a, _ := json.Marshal(inReport)
	b, _ := json.Marshal(onTerminal)
	if !bytes.Equal(a, b) {
		t.Errorf("the report says\n%s\nclassify says\n%s", a, b)
	}
}
