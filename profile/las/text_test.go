package las

import (
	"bytes"
	"fmt"
	"runtime"
	"strings"
	"testing"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"

	"shearbook/profile"
)

// small is a log with letters from outside ASCII.
const small = "~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nWELL. Größe 7 : \n~C\nDEPT.M :\nDTS.µs/m :\n~A\n1.0 5000\n2.0 4000\n"

func encode(t *testing.T, e encoding.Encoding, text string) []byte {
	t.Helper()
	data, _, err := transform.Bytes(e.NewEncoder(), []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// The same log in every encoding and with every end of line is the same
// profile. The encoder is golang.org/x/text v0.44.0.
func TestEncodings(t *testing.T) {
	utf16 := func(e unicode.Endianness, mark unicode.BOMPolicy) []byte {
		return encode(t, unicode.UTF16(e, mark), small)
	}
	for _, c := range []struct {
		name, encoding string
		data           []byte
	}{
		{"plain", "UTF-8", []byte(small)},
		{"mark", "UTF-8", []byte("\ufeff" + small)},
		{"CRLF", "UTF-8", []byte(strings.ReplaceAll(small, "\n", "\r\n"))},
		{"CR", "UTF-8", []byte(strings.ReplaceAll(small, "\n", "\r"))},
		{"mixed ends of lines", "UTF-8", []byte(strings.Replace(strings.Replace(small, "\n", "\r\n", 3), "NO :\r\n", "NO :\r", 1))},
		{"no last end of line", "UTF-8", []byte(strings.TrimSuffix(small, "\n"))},
		{"DOS end of file", "UTF-8", []byte(small + "\x1a")},
		{"Windows-1252", "Windows-1252", encode(t, charmap.Windows1252, small)},
		{"Latin-1", "Windows-1252", encode(t, charmap.ISO8859_1, small)},
		{"little endian, mark", "UTF-16LE", utf16(unicode.LittleEndian, unicode.UseBOM)},
		{"big endian, mark", "UTF-16BE", utf16(unicode.BigEndian, unicode.UseBOM)},
		{"little endian", "UTF-16LE", utf16(unicode.LittleEndian, unicode.IgnoreBOM)},
		{"big endian", "UTF-16BE", utf16(unicode.BigEndian, unicode.IgnoreBOM)},
	} {
		t.Run(c.name, func(t *testing.T) {
			profiles, err := Read("x.las", c.data, Options{})
			if err != nil {
				t.Fatal(err)
			}
			p := profiles[0]
			if p.Name != "Größe 7" || p.Layers[1].Vs != 250 || p.Reading.Encoding != c.encoding || p.Reading.Size != int64(len(c.data)) {
				t.Errorf("name %q, layers %+v, encoding %s", p.Name, p.Layers, p.Reading.Encoding)
			}
			if l := p.Layers[1]; l.Line != 11 || l.Column != 5 {
				t.Errorf("Vs at %d:%d, want 11:5", l.Line, l.Column)
			}
		})
	}
}

// The SHA-256 is that of the file: sha256sum of GNU coreutils 9.1 over small.
func TestReading(t *testing.T) {
	profiles, err := Read("dir/a.las", []byte(small), Options{})
	if err != nil {
		t.Fatal(err)
	}
	r := profiles[0].Reading
	if r.SHA256 != "8a19c34099cd0680d6d04ac1f7662f41986ada02283a7ee75241273e9bd1e408" || r.File != "dir/a.las" {
		t.Errorf("digest %s of %s", r.SHA256, r.File)
	}
	if r.Unit(profile.Vs) != "µs/m" || len(r.Rows) != 2 || r.Rows[1].Split()[1] != "4000" {
		t.Errorf("reading %+v", r)
	}
}

// Input that is too large, or made to exhaust, ends in one clear fault.
func TestLimits(t *testing.T) {
	const head = "~V\n~C\nDEPT.M :\nVS.M/S :\n~A\n"
	for _, c := range []struct {
		name, data, want string
	}{
		{"a long line", strings.Repeat("~", 8<<20), "x.las:1:1: the line is longer than 1 MiB"},
		{"a long row", head + strings.Repeat("1 ", 8<<20), "x.las:6:1: the line is longer than 1 MiB"},
		{"a row too wide", head + strings.Repeat("1 ", 100_000), "the log has one value of VS alone"},
		{"sections", strings.Repeat("~V\n", MaxSections+1), "more than 1000 sections"},
		{"curves", "~C\n" + strings.Repeat("A.M :\n", MaxCurves+1) + "~A\n1\n", "more than 1000 curves"},
		{"items", "~W\n" + strings.Repeat("A.M :\n", MaxMetadata+1), "more than 100000 lines stand above the data"},
		{"remarks", "~O\n" + strings.Repeat("a\n", MaxMetadata+1), "more than 100000 lines stand above the data"},
		{"rows", head + strings.Repeat("1 2\n", MaxRows+1), "more than 2000000 rows"},
		{"shear curves", "~C\nDEPT.M :\n" + strings.Repeat("VS.M/S :\n", 9) + "~A\n1 1 1 1 1 1 1 1 1 1\n", "9 curves may be Vs"},
		{"NULs", head + "1 2\x00", "x.las:6:4: NUL character"},
		{"blanks alone", strings.Repeat(" \n", 1<<20), "x.las: the file is empty"},
		{"letters that never end", head + "1 " + strings.Repeat("x", 1<<19), `VS "xxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxxx…" is not a number`},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("x.las", []byte(c.data), Options{})
			faults, ok := err.(profile.Faults)
			if !ok || len(faults) > profile.MaxFaults+2 || !strings.Contains(err.Error(), c.want) {
				t.Errorf("got  %.300v\nwant %s", err, c.want)
			}
		})
	}
	if _, err := Read("x.las", make([]byte, MaxBytes+1), Options{}); err == nil || err.Error() != "x.las: the file is larger than 64 MiB" {
		t.Errorf("a large file: %v", err)
	}
}

// big is a log of n samples.
func big(n int) []byte {
	var b bytes.Buffer
	b.WriteString("~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nNULL. -999.25 :\n~C\nDEPT.M :\nVS.M/S :\nVP.M/S :\nGR.GAPI :\n~A\n")
	for i := range n {
		fmt.Fprintf(&b, "%.3f %d.5 %d 40\n", float64(i)/100, 150+i%100, 600+i%50)
	}
	return b.Bytes()
}

// What is allocated grows with the samples, not faster.
func TestManySamples(t *testing.T) {
	const n = 100_000
	data := big(n)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	profiles, err := Read("x.las", data, Options{})
	runtime.ReadMemStats(&after)
	if err != nil || len(profiles[0].Layers) != n {
		t.Fatal(err)
	}
	if l := profiles[0].Layers[n-1]; l.Vs != 249.5 || int(l.Line) != n+11 {
		t.Errorf("the last layer is %+v", l)
	}
	perRow := float64(after.TotalAlloc-before.TotalAlloc) / n
	t.Logf("%.0f bytes a sample of %d bytes", perRow, len(data)/n)
	if perRow > 600 { // 144 of it are the layer
		t.Errorf("%.0f bytes allocated for each sample, want at most 600", perRow)
	}
}

// Many faults are twenty faults and a number.
func TestManyFaults(t *testing.T) {
	_, err := Read("x.las", []byte("~C\nDEPT.M :\nVS.M/S :\n~A\n"+strings.Repeat("x y\n", 5000)), Options{})
	faults, _ := err.(profile.Faults)
	if len(faults) != profile.MaxFaults+1 || faults[profile.MaxFaults].Text != "and 9980 more faults" {
		t.Errorf("%d faults, the last %v", len(faults), faults[len(faults)-1])
	}
}

func BenchmarkReadMillionSamples(b *testing.B) {
	data := big(1_000_000)
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Read("x.las", data, Options{Step: 1}); err != nil {
			b.Fatal(err)
		}
	}
}
