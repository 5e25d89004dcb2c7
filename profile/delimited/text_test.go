package delimited

import (
	"errors"
	"strings"
	"testing"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"

	"shearbook/profile"
)

// soil is a table with a letter from outside ASCII in its first description.
const soil = "top_m,bottom_m,vs_mps,soil\n0,5,200,Löss\n5,,300,Clay\n"

func encode(t *testing.T, e encoding.Encoding, text string) []byte {
	t.Helper()
	data, _, err := transform.Bytes(e.NewEncoder(), []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// The same table in every encoding and with every end of line is the same
// profile. The encoder is golang.org/x/text v0.44.0.
func TestEncodings(t *testing.T) {
	utf16 := func(e unicode.Endianness, mark unicode.BOMPolicy) []byte {
		return encode(t, unicode.UTF16(e, mark), soil)
	}
	for _, c := range []struct {
		name, encoding string
		data           []byte
	}{
		{"plain", "UTF-8", []byte(soil)},
		{"mark", "UTF-8", []byte("\ufeff" + soil)},
		{"CRLF", "UTF-8", []byte(strings.ReplaceAll(soil, "\n", "\r\n"))},
		{"CR", "UTF-8", []byte(strings.ReplaceAll(soil, "\n", "\r"))},
		{"no last end of line", "UTF-8", []byte(strings.TrimSuffix(soil, "\n"))},
		{"DOS end of file", "UTF-8", []byte(soil + "\x1a")},
		{"blank lines", "UTF-8", []byte(soil + "\n\r\n  \n")},
		{"Windows-1252", "Windows-1252", encode(t, charmap.Windows1252, soil)},
		{"little endian, mark", "UTF-16LE", utf16(unicode.LittleEndian, unicode.UseBOM)},
		{"big endian, mark", "UTF-16BE", utf16(unicode.BigEndian, unicode.UseBOM)},
		{"little endian", "UTF-16LE", utf16(unicode.LittleEndian, unicode.IgnoreBOM)},
		{"big endian", "UTF-16BE", utf16(unicode.BigEndian, unicode.IgnoreBOM)},
	} {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read("x.csv", c.data, Options{})
			if err != nil {
				t.Fatal(err)
			}
			const want = "profile x\n2:5: 0–5 m: Vs 200, Löss\n3:4: 5–… m: Vs 300, Clay\n"
			if got := describe(profiles, nil); got != want {
				t.Errorf("got\n%swant\n%s", got, want)
			}
			reading := profiles[0].Reading
			if reading.Encoding != c.encoding || reading.Size != int64(len(c.data)) {
				t.Errorf("encoding %s, size %d; want %s, %d", reading.Encoding, reading.Size, c.encoding, len(c.data))
			}
		})
	}
}

// Faults of the text as a whole, each with its place.
func TestTextFaults(t *testing.T) {
	const header = "top_m,bottom_m,vs_mps\n"
	for _, c := range []struct {
		name, data, want string
	}{
		{"empty", "", "x.csv: the file is empty"},
		{"blank", " \r\n\t\n", "x.csv: the file is empty"},
		{"only a mark", "\ufeff", "x.csv: the file is empty"},
		{"NUL", header + "0,5,2\x000\n", "x.csv:2:6: NUL character"},
		{"NUL after a letter of two bytes", header + "ö\x00", "x.csv:2:2: NUL character"},
		{"unit separator", header + "0,5,200\x1f\n", "x.csv:2:8: control character U+001F"},
		{"UTF-32", "\xff\xfe\x00\x00t\x00\x00\x00", "x.csv: the file is in UTF-32"},
		{"half a character", "\xff\xfet\x00o", "x.csv:1:2: the file is in UTF-16 but ends in half a character"},
		{"half a pair", "\xff\xfet\x00\x00\xd8o\x00", "x.csv:1:2: half of a UTF-16 surrogate pair"},
		{"column in characters", "soil,top_m,bottom_m,vs_mps\nLöß …,0,5,x\n", `x.csv:2:11: Vs "x" is not a number`},
		{"column after blanks", header + "0 , 5 ,  x\n", `x.csv:2:10: Vs "x" is not a number`},
		{"line after a cell of two lines", "soil,top_m,bottom_m,vs_mps\n\"Clay\nand silt\",0,5,x\n", `x.csv:3:15: Vs "x" is not a number`},
		{"direction mark", header + "0,5,\u202e002\n", `x.csv:2:5: Vs "\u202e002" is not a number`},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.csv", []byte(c.data), Options{})
			var faults profile.Faults
			if !errors.As(err, &faults) || faults.Error() != c.want {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
}

// What the appendix of a report shows is what the file says.
func TestReading(t *testing.T) {
	const text = "# method: MASW\n# checked twice\n# [A] colour : blue\nline;top (ft);Vs;remark\n;ft;ft/s\nA;0;600;\"a; b\"\nA;10;1e3\nB;0,0;500;c\n"
	profiles, err := Read("dir/site.csv", []byte(text), Options{})
	if err != nil {
		t.Fatal(err)
	}
	// sha256sum of GNU coreutils 9.1 over the text above.
	const sum = "9c177e1c00538d92da409119a7982dd79cba3b72c51474dd4bc1fd3853f99771"
	a, b := profiles[0].Reading, profiles[1].Reading
	if a.SHA256 != sum || b.SHA256 != sum || a.File != "dir/site.csv" {
		t.Errorf("digests %s and %s of %s, want %s", a.SHA256, b.SHA256, a.File, sum)
	}
	wantColumns := []profile.Column{
		{Heading: "line", Quantity: profile.ProfileName},
		{Heading: "top", Unit: "ft", Quantity: profile.Top},
		{Heading: "Vs", Unit: "ft/s", Quantity: profile.Vs},
		{Heading: "remark"},
	}
	equal(t, "columns", a.Columns, wantColumns)
	equal(t, "metadata of A", a.Metadata, []profile.Metadatum{
		{Key: "method", Value: "MASW", Line: 1}, {Value: "checked twice", Line: 2}, {Key: "colour", Value: "blue", Line: 3},
	})
	equal(t, "metadata of B", b.Metadata, a.Metadata[:2])
	equal(t, "rows of A", rows(a), [][]string{{"A", "0", "600", "a; b"}, {"A", "10", "1e3", ""}})
	equal(t, "rows of B", rows(b), [][]string{{"B", "0,0", "500", "c"}})
	if a.Rows[1].Line != 7 || b.Rows[0].Line != 8 {
		t.Errorf("lines %d and %d, want 7 and 8", a.Rows[1].Line, b.Rows[0].Line)
	}
	if a.Unit(profile.Vs) != "ft/s" || a.Index(profile.Vp) != -1 {
		t.Errorf("unit of Vs %q, column of Vp %d", a.Unit(profile.Vs), a.Index(profile.Vp))
	}
}

func rows(r *profile.Reading) [][]string {
	var list [][]string
	for _, row := range r.Rows {
		list = append(list, row.Split())
	}
	return list
}

// A name stated above the header becomes one line of plain text, as one in a
// column does, so that what is read can be written.
func TestStatedNameOneLine(t *testing.T) {
	profiles, err := Read("a.csv", []byte("# name: L\t1  b\ntop_m,bottom_m,vs_mps\n0,4,180\n"), Options{})
	if err != nil {
		t.Fatal(err)
	}
	if profiles[0].Name != "L 1 b" {
		t.Errorf("name %q, want %q", profiles[0].Name, "L 1 b")
	}
}

// Every heading of names.go is found, alone, in other spellings and with a
// unit behind it, and none stands for two quantities.
func TestNames(t *testing.T) {
	units := map[profile.Dimension]string{
		profile.Length: "m", profile.Velocity: "ft/s", profile.MassDensity: "g/cm3",
		profile.Stress: "kPa", profile.Percent: "%", profile.Blows: "blows",
	}
	seen := map[string]bool{}
	for q, list := range names {
		for _, name := range list {
			if seen[name] || plain(name) != name {
				t.Errorf("heading %q is there twice or not in plain form", name)
			}
			seen[name] = true
			spellings := []string{name, strings.ToUpper(name), " " + strings.ReplaceAll(name, " ", "_") + " ", strings.ReplaceAll(name, " ", "-")}
			for _, s := range spellings {
				if h := parseHeading(s); h.quantity != q || h.problem != "" {
					t.Errorf("heading %q is %v (%s), want %v", s, h.quantity, h.problem, q)
				}
			}
			unit, ok := units[q.Dimension()]
			if !ok {
				continue
			}
			for _, s := range []string{name + " (" + unit + ")", name + " [" + unit + "]", name + ", " + unit, name + " " + unit, name + "_" + strings.ReplaceAll(unit, "/", "_")} {
				h := parseHeading(s)
				if h.quantity != q || h.problem != "" || h.unit.Name == "" || h.unit.Dimension != q.Dimension() || plain(h.name) != name {
					t.Errorf("heading %q is %+v, want %v with its unit", s, h, q)
				}
			}
		}
	}
}

// Names that look like a quantity and are another thing stay unread.
func TestNamesUnread(t *testing.T) {
	for _, name := range []string{"Vs30 (m/s)", "vs_quality", "vs std (m/s)", "qc (MPa)", "depth to water (m)", "elevation (m)", "velocity (m/s)", "(N1)60", "", "m/s", strings.Repeat("vs ", 100)} {
		if h := parseHeading(name); h.quantity != profile.Unknown {
			t.Errorf("heading %q is taken for %v", name, h.quantity)
		}
	}
}
