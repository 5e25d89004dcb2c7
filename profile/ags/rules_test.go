package ags

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// The rules of AGS4 on files, as AGS edition 4.1.1 states them (section 4,
// "Rules"), held against what Write writes. They are coded here again, over
// encoding/csv, and know nothing of the reader. The numbers of the rules, the
// order of the headings of LOCA, and the types of TESN and ANYN are from
// memory.

// standardGroup is a group of the standard dictionary: its parent, and its
// headings in their order, * for a key, ! for one that must not be blank.
type standardGroup struct {
	parent   string
	headings string
}

var standard = map[string]standardGroup{
	"PROJ": {"", "PROJ_ID*! PROJ_NAME PROJ_LOC PROJ_CLNT PROJ_CONT PROJ_ENG PROJ_MEMO FILE_FSET"},
	"TRAN": {"", "TRAN_ISNO*! TRAN_DATE! TRAN_PROD! TRAN_STAT! TRAN_DESC TRAN_AGS! TRAN_RECV! TRAN_DLIM! TRAN_RCON! TRAN_REM FILE_FSET"},
	"UNIT": {"", "UNIT_UNIT*! UNIT_DESC! UNIT_REM"},
	"TYPE": {"", "TYPE_TYPE*! TYPE_DESC!"},
	"ABBR": {"", "ABBR_HDNG*! ABBR_CODE*! ABBR_DESC! ABBR_LIST ABBR_REM"},
	"DICT": {"", "DICT_TYPE*! DICT_GRP*! DICT_HDNG* DICT_STAT DICT_DTYP DICT_DESC! DICT_UNIT DICT_EXMP DICT_PGRP DICT_REM"},
	"LOCA": {"PROJ", "LOCA_ID*! LOCA_TYPE LOCA_STAT LOCA_NATE LOCA_NATN LOCA_GREF LOCA_GL LOCA_REM LOCA_FDEP LOCA_STAR LOCA_LAT LOCA_LON LOCA_ELAT LOCA_ELON LOCA_LLZ LOCA_LOCM LOCA_LOCA"},
	"GEOL": {"LOCA", "LOCA_ID*! GEOL_TOP*! GEOL_BASE*! GEOL_DESC GEOL_LEG"},
	"WGPG": {"LOCA", "LOCA_ID*! WGPG_ID*! WGPG_TOOL*! WGPG_DATE WGPG_STRT WGPG_STOP WGPG_BHD WGPG_WAT WGPG_METH WGPG_CONT"},
	"WGPT": {"WGPG", "LOCA_ID*! WGPG_ID*! WGPG_TOOL*! WGPT_PARA*! WGPT_UNIT*! WGPT_DPTH*! WGPT_RDNG WGPT_CAS WGPT_REM"},
	"ISTG": {"LOCA", "LOCA_ID*! ISTG_TESN*! ISTG_TYPE ISTG_RECC ISTG_SOUR ISTG_METH"},
	"ISTA": {"ISTG", "LOCA_ID*! ISTG_TESN*! ISTA_TOP*! ISTA_BASE*! ISTA_ANYN*! ISTA_DPTH ISTA_WVTY ISTA_WVL"},
}

// standardTypes are the types of the headings that Write uses.
var standardTypes = map[string]string{
	"PROJ_ID": "ID", "TRAN_DATE": "DT", "DICT_TYPE": "PA", "DICT_STAT": "PA", "DICT_DTYP": "PT", "DICT_UNIT": "PU",
	"LOCA_ID": "ID", "LOCA_NATE": "2DP", "LOCA_NATN": "2DP", "LOCA_GREF": "PA", "LOCA_GL": "2DP", "LOCA_LAT": "DMS", "LOCA_LON": "DMS", "GEOL_TOP": "2DP", "GEOL_BASE": "2DP",
	"WGPG_TOOL": "PA", "WGPG_DATE": "DT", "WGPT_PARA": "PA", "WGPT_UNIT": "PU", "WGPT_DPTH": "2DP", "WGPT_RDNG": "U",
	"ISTG_TYPE": "PA", "ISTA_TOP": "2DP", "ISTA_BASE": "2DP", "ISTA_WVTY": "PA", "ISTA_WVL": "1DP",
}

// shapes are the forms of the values of a type.
var shapes = map[string]*regexp.Regexp{
	"1DP": regexp.MustCompile(`^-?\d+\.\d$`),
	"2DP": regexp.MustCompile(`^-?\d+\.\d\d$`),
	"U":   regexp.MustCompile(`^-?\d+(\.\d+)?(e[+-]\d+)?$`),
	"YN":  regexp.MustCompile(`^[YN]$`),
	"DT":  regexp.MustCompile(`^\d{4}-\d\d-\d\d$`),
	"DMS": regexp.MustCompile(`^-?\d{1,3}:\d\d:\d\d(\.\d+)?$`),
	"ID":  regexp.MustCompile(`.`),
}

var (
	groupName   = regexp.MustCompile(`^[A-Z]{4}$`)
	headingName = regexp.MustCompile(`^[A-Z]{4}_[A-Z0-9]{1,4}$`)
	quotedLine  = regexp.MustCompile(`^"(?:[^"]|"")*"(?:,"(?:[^"]|"")*")*$`)
)

// parsed is a group of a file.
type parsed struct {
	name                   string
	headings, units, types []string
	rows                   [][]string
}

// brokenRules returns what a file breaks of the rules, in words.
func brokenRules(data []byte) (broken []string) {
	say := func(format string, args ...any) { broken = append(broken, fmt.Sprintf(format, args...)) }
	text := string(data)
	for _, b := range data {
		if b > 0x7e || b < ' ' && b != '\r' && b != '\n' { // Rule 1
			say("byte %#x is not printable ASCII", b)
			return broken
		}
	}
	if strings.Count(text, "\n") != strings.Count(text, "\r\n") || strings.Count(text, "\r") != strings.Count(text, "\n") || !strings.HasSuffix(text, "\r\n") { // Rule 2a
		say("lines do not all end in CRLF")
	}
	var groups []*parsed
	step := 0 // rows of the present group so far
	for line := range strings.SplitSeq(strings.TrimSuffix(text, "\r\n"), "\r\n") {
		if line == "" {
			continue
		}
		if !quotedLine.MatchString(line) { // Rule 5
			say("not quoted: %s", line)
			continue
		}
		fields, err := csv.NewReader(strings.NewReader(line)).Read()
		if err != nil {
			say("%v: %s", err, line)
			continue
		}
		order := []string{"GROUP", "HEADING", "UNIT", "TYPE", "DATA"}
		if fields[0] == "GROUP" { // Rules 2 and 3
			if len(fields) != 2 || !groupName.MatchString(fields[1]) {
				say("bad group row %s", line)
			}
			groups, step = append(groups, &parsed{name: fields[len(fields)-1]}), 1
			continue
		}
		if len(groups) == 0 || fields[0] != order[min(step, 4)] {
			say("%s in place of %s", fields[0], order[min(step, 4)])
			continue
		}
		g := groups[len(groups)-1]
		step++
		if g.headings != nil && len(fields)-1 != len(g.headings) { // Rule 4
			say("%d fields in %s", len(fields)-1, g.name)
			continue
		}
		switch fields[0] {
		case "HEADING":
			g.headings = fields[1:]
		case "UNIT":
			g.units = fields[1:]
		case "TYPE":
			g.types = fields[1:]
		default:
			g.rows = append(g.rows, fields[1:])
		}
	}
	if len(broken) > 0 {
		return broken // the groups cannot be told apart
	}
	return brokenGroups(groups)
}

// brokenGroups returns what groups break of the rules.
func brokenGroups(groups []*parsed) (broken []string) {
	say := func(format string, args ...any) { broken = append(broken, fmt.Sprintf(format, args...)) }
	byName := map[string]*parsed{}
	for _, g := range groups {
		if byName[g.name] != nil {
			say("group %s twice", g.name)
		}
		byName[g.name] = g
		if len(g.rows) == 0 {
			say("group %s has no data", g.name)
		}
	}
	column := func(group, heading string) map[string]bool {
		values := map[string]bool{}
		if g := byName[group]; g != nil {
			if i := slices.Index(g.headings, heading); i >= 0 {
				for _, row := range g.rows {
					values[row[i]] = true
				}
			}
		}
		return values
	}
	for _, name := range []string{"PROJ", "TRAN"} { // Rules 13 and 14
		if g := byName[name]; g == nil || len(g.rows) != 1 {
			say("%s is missing or has several rows", name)
		}
	}
	units, types := column("UNIT", "UNIT_UNIT"), column("TYPE", "TYPE_TYPE") // Rules 15 and 17
	codes := map[string]bool{}
	if g := byName["ABBR"]; g != nil {
		for _, row := range g.rows {
			codes[row[0]+" "+row[1]] = true
		}
	}
	usedUnits, usedTypes := map[string]bool{}, map[string]bool{}
	for _, g := range groups {
		spec, parent, keys := specOf(g.name, byName["DICT"])
		if spec == nil {
			say("group %s is not declared", g.name) // Rule 18
			continue
		}
		last := -1
		for i, h := range g.headings {
			if !headingName.MatchString(h) { // Rule 19
				say("heading %s", h)
			}
			at := slices.IndexFunc(spec, func(s string) bool { return strings.TrimRight(s, "*!") == h })
			if at < 0 || at < last { // Rules 7 and 9
				say("heading %s of %s is unknown or out of order", h, g.name)
			}
			last = at
			want := standardTypes[h]
			if want == "" && standard[g.name].headings != "" {
				want = "X"
			}
			if want != "" && g.types[i] != want {
				say("type %s of %s, want %s", g.types[i], h, want)
			}
			usedUnits[g.units[i]], usedTypes[g.types[i]] = true, true
			for _, row := range g.rows {
				value := row[i]
				if value == "" {
					continue
				}
				if shape := shapes[g.types[i]]; shape != nil && !shape.MatchString(value) { // Rule 8
					say("%s %q is not of type %s", h, value, g.types[i])
				}
				switch g.types[i] {
				case "PA": // Rule 16
					if !codes[h+" "+value] {
						say("code %s of %s is not in ABBR", value, h)
					}
				case "PU":
					usedUnits[value] = true
				case "PT":
					usedTypes[value] = true
				}
			}
		}
		for _, s := range spec {
			h := strings.TrimRight(s, "*!")
			i := slices.Index(g.headings, h)
			switch {
			case i < 0 && strings.ContainsAny(s, "*!"): // Rules 10a and 10b
				say("heading %s of %s is missing", h, g.name)
			case strings.HasSuffix(s, "!"):
				for _, row := range g.rows {
					if row[i] == "" {
						say("%s is blank", h)
					}
				}
			}
		}
		broken = append(broken, brokenKeys(g, keys, byName[parent], byName["DICT"])...)
	}
	for u := range usedUnits {
		if u != "" && !units[u] {
			say("unit %s is not listed", u)
		}
	}
	for u := range usedTypes {
		if u != "" && !types[u] {
			say("type %s is not listed", u)
		}
	}
	return broken
}

// specOf is the dictionary's entry of a group, with its keys, standard or
// declared.
func specOf(name string, dict *parsed) (spec []string, parent string, keys []string) {
	if s, ok := standard[name]; ok {
		spec, parent = strings.Fields(s.headings), s.parent
	} else if dict != nil {
		for _, row := range dict.rows {
			switch {
			case row[1] != name:
			case row[0] == "GROUP":
				parent = row[slices.Index(dict.headings, "DICT_PGRP")]
			case row[3] == "KEY":
				spec = append(spec, row[2]+"*")
			default:
				spec = append(spec, row[2])
			}
		}
	}
	for _, s := range spec {
		if strings.Contains(s, "*") {
			keys = append(keys, strings.TrimRight(s, "*!"))
		}
	}
	return spec, parent, keys
}

// brokenKeys looks for keys that are there twice (Rule 10a), and rows without
// a row of the parent (Rule 10c).
func brokenKeys(g *parsed, keys []string, parent, dict *parsed) (broken []string) {
	of := func(g *parsed, row []string, keys []string) string {
		var parts []string
		for _, k := range keys {
			if i := slices.Index(g.headings, k); i >= 0 { // a missing one is told already
				parts = append(parts, row[i])
			}
		}
		return strings.Join(parts, "\x1f")
	}
	seen := map[string]bool{}
	for _, row := range g.rows {
		k := of(g, row, keys)
		if seen[k] {
			broken = append(broken, fmt.Sprintf("key %q of %s twice", k, g.name))
		}
		seen[k] = true
	}
	if parent == nil || g.name == "LOCA" {
		return broken
	}
	_, _, parentKeys := specOf(parent.name, dict)
	parents := map[string]bool{}
	for _, row := range parent.rows {
		parents[of(parent, row, parentKeys)] = true
	}
	for _, row := range g.rows {
		if k := of(g, row, parentKeys); !parents[k] {
			broken = append(broken, fmt.Sprintf("%q of %s has no row in %s", k, g.name, parent.name))
		}
	}
	return broken
}

// The checks above find what is wrong: each change to a good file breaks the
// rule that it is meant to.
func TestRulesFind(t *testing.T) {
	good := written(t, sampleProfiles(), WriteOptions{Edition: "4.2", Date: "2026-03-31"})
	if broken := brokenRules(good); len(broken) > 0 {
		t.Fatalf("the file is not good: %q\n%s", broken, good)
	}
	for _, c := range []struct{ name, from, to string }{
		{"not ASCII", "Firm", "F\xefrm"},
		{"end of line", "\r\n", "\n"},
		{"no quotes", `"DATA","H1"`, `"DATA",H1`},
		{"short row", `,"8.40"`, ``},
		{"order of rows", `"UNIT"`, `"TYPE"`},
		{"group twice", `"GROUP","LOCA"`, `"GROUP","GEOL"`},
		{"order of headings", `"GEOL_TOP","GEOL_BASE"`, `"GEOL_BASE","GEOL_TOP"`},
		{"decimals", `"8.40"`, `"8.4"`},
		{"unit not listed", `"DATA","kPa","kilopascal"` + "\r\n", ""},
		{"type not listed", `"DATA","DMS",`, `"DATA","DMZ",`},
		{"code not listed", `"ABBR_HDNG","ABBR_CODE"`, `"ABBR_CODE","ABBR_HDNG"`},
		{"key twice", `"H1","0.00","1.75"`, `"H1","1.75","2.25"`},
		{"no parent", `"DATA","H1","1","PSL","PSL-SWV"`, `"DATA","H9","1","PSL","PSL-SWV"`},
		{"blank", `"DATA","1","2026-03-31"`, `"DATA","1",""`},
		{"no group", `"GROUP","TRAN"`, `"GROUP","TRAM"`},
		{"not declared", `"HEADING","VSPL","VSPL_VS"`, `"HEADING","VSPL","VSPL_VZ"`},
		{"name of a group", `"GROUP","LOCA"`, `"GROUP","LOCAL"`},
	} {
		bad := bytes.Replace(good, []byte(c.from), []byte(c.to), 1)
		if bytes.Equal(bad, good) {
			t.Errorf("%s: %s is not in the file\n%s", c.name, c.from, good)
		} else if broken := brokenRules(bad); len(broken) == 0 {
			t.Errorf("%s: nothing was found", c.name)
		}
	}
}
