package evidence_test

import (
	"bytes"
	"compress/zlib"
	"errors"
	"fmt"
	"runtime"
	"strings"
	"testing"
	"time"

	"shearbook/report/evidence"
)

// held reads a file within the bars for strangers' files: 512 MiB, 10 s,
// never a panic, and always a sentence.
func held(t testing.TB, name string, data []byte) (*evidence.Evidence, error) {
	t.Helper()
	runtime.GC()
	most, stop, stopped := uint64(0), make(chan bool), make(chan bool)
	go func() {
		defer close(stopped)
		for {
			var m runtime.MemStats
			runtime.ReadMemStats(&m)
			most = max(most, m.HeapInuse)
			select {
			case <-stop:
				return
			case <-time.After(20 * time.Millisecond):
			}
		}
	}()
	e, took, err := read(data)
	close(stop)
	<-stopped
	if took > 10*time.Second {
		t.Errorf("%s: %v", name, took)
	}
	if most > 512<<20 {
		t.Errorf("%s: %d MiB in use", name, most>>20)
	}
	told(t, name, err)
	return e, err
}

func read(data []byte) (*evidence.Evidence, time.Duration, error) {
	start := time.Now()
	e, err := evidence.Read(data)
	if err == nil {
		e.Check()
	}
	return e, time.Since(start), err
}

// told tells that an error is a sentence with a hint.
func told(t testing.TB, name string, err error) {
	t.Helper()
	var known *evidence.Error
	if err != nil && (!errors.As(err, &known) || known.Text == "" || known.Hint == "") {
		t.Errorf("%s: the error %q is no sentence with a hint", name, err)
	}
}

func TestTruncatedAtEveryLength(t *testing.T) {
	whole := sample(t)
	for n := range whole[:len(whole)-1] { // the last byte is the end of a line
		if _, err := evidence.Read(whole[:n]); err == nil {
			t.Fatalf("cut at %d of %d: no error", n, len(whole))
		}
	}
}

// A flipped bit is refused, found, or of no consequence: then the files, the
// manifest and the text are what they were.
func TestFlippedBits(t *testing.T) {
	whole := sample(t)
	sound, err := evidence.Read(whole)
	if err != nil {
		t.Fatal(err)
	}
	stride := 37
	if testing.Short() {
		stride = 997
	}
	count := map[string]int{}
	for bit := 0; bit < 8*len(whole); bit += stride {
		flipped := bytes.Clone(whole)
		flipped[bit/8] ^= 1 << (bit % 8)
		e, err := evidence.Read(flipped)
		switch {
		case err != nil:
			count["refused"]++
		case len(e.Check()) > 0:
			count["found"]++
		default:
			count["of no consequence"]++
			if textOf(e) != textOf(sound) || fmt.Sprint(e.Manifest) != fmt.Sprint(sound.Manifest) || fmt.Sprint(e.Files) != fmt.Sprint(sound.Files) {
				t.Fatalf("bit %d of byte %d changes the report unseen", bit%8, bit/8)
			}
			if int64(bit/8) < sound.Manifest.Pages.Size {
				t.Fatalf("bit %d of byte %d, in front of the attachments, is not found", bit%8, bit/8)
			}
		}
	}
	t.Log(count)
}

// zeros are a bomb: a GiB of zeros, packed.
func zeros() string {
	var z bytes.Buffer
	w, _ := zlib.NewWriterLevel(&z, zlib.BestSpeed)
	block := make([]byte, 1<<20)
	for range 1 << 10 {
		w.Write(block)
	}
	w.Close()
	return z.String()
}

func TestBombs(t *testing.T) {
	if testing.Short() {
		t.Skip("packs a GiB")
	}
	content := zeros()
	bomb := plain("/Filter/FlateDecode", content)
	for name, c := range map[string]struct {
		data []byte
		want string
	}{
		"page":       {carrying(bomb), "unpacks to more"},
		"font":       {carrying(plain("", "/F1 9 Tf"), "<</Type/Font/Subtype/Type0/ToUnicode 9 0 R>>", bomb), "unpacks to more"},
		"attachment": {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>", bomb), "unpack to more"},
		"many pages": {hand("", "<</Pages 2 0 R/Names<</EmbeddedFiles<</Names[(manifest.json) 3 0 R]>>>>>>",
			"<</Kids[4 0 R 5 0 R 6 0 R 7 0 R 8 0 R]>>", "<</F(manifest.json)/EF<</F 10 0 R>>>>",
			"<</Contents 9 0 R>>", "<</Contents 9 0 R>>", "<</Contents 9 0 R>>", "<</Contents 9 0 R>>", "<</Contents 9 0 R>>",
			packed("", bytes.Repeat([]byte("q Q\n"), 8<<20)), plain("", `{"schema":1}`)), "unpacks to more"},
	} {
		if _, err := held(t, name, c.data); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q", name, err, c.want)
		}
	}
	table := []byte("%PDF-1.7\n1 0 obj\n" + plain("/Type/XRef/W[1 2 1]/Size 300000000/Root 1 0 R/Filter/FlateDecode", content) + "\nendobj\nstartxref\n9\n%%EOF\n")
	if _, err := held(t, "table", table); err == nil {
		t.Error("table: no error")
	}
}

func TestMazes(t *testing.T) {
	deep := strings.Repeat("[", 1e6)
	deepDict := strings.Repeat("<</A", 1e6)
	for name, c := range map[string]struct {
		data []byte
		want string
	}{
		"empty":                  {nil, "not a PDF"},
		"no PDF":                 {[]byte("top,bottom,vs\n0,5,180\n"), "not a PDF"},
		"only a head":            {[]byte("%PDF-1.7\n"), "damaged or cut off"},
		"no manifest":            {hand("", "<</Type/Catalog>>"), "carries no manifest.json"},
		"encrypted":              {hand("/Encrypt<</Filter/Standard>>", "<</Type/Catalog>>"), "encrypted"},
		"tables in a circle":     {[]byte("%PDF-1.7\nxref\n0 1\n0000000000 65535 f \ntrailer\n<</Size 1/Root 1 0 R/Prev 9>>\nstartxref\n9\n%%EOF\n"), "circle"},
		"older table outside":    {hand("/Prev 99999999", "<<>>"), "outside the file"},
		"older table nowhere":    {hand("/Prev 3", "<<>>"), "damaged"},
		"table outside":          {[]byte("%PDF-1.7\nstartxref\n99999999\n%%EOF\n"), "outside the file"},
		"a table of a billion":   {[]byte("%PDF-1.7\nxref\n0 1000000000\n0000000000 65535 f \ntrailer\n<<>>\nstartxref\n9\n%%EOF\n"), "objects"},
		"a huge object number":   {[]byte("%PDF-1.7\nxref\n4294967295 1\n0000000000 65535 f \ntrailer\n<<>>\nstartxref\n9\n%%EOF\n"), "objects"},
		"lists in lists":         {hand("/X "+deep, "<<>>"), "trailer"},
		"dictionaries":           {hand("/X "+deepDict, "<<>>"), "trailer"},
		"lists on a page":        {carrying(plain("", deep)), "deep"},
		"states on a page":       {carrying(plain("", strings.Repeat("q ", 1e6))), "more work"},
		"operands on a page":     {carrying(plain("", strings.Repeat("1 ", 1e6))), "more work"},
		"a catalog that is it":   {hand("", "1 0 R"), "catalog"},
		"pages in a circle":      {hand("", "<</Pages 2 0 R/Names<</EmbeddedFiles<</Names[(manifest.json) 3 0 R]>>>>>>", "<</Kids[2 0 R]>>", "<</F(manifest.json)/EF<</F 4 0 R>>>>", plain("", `{"schema":1}`)), "circle"},
		"names in a circle":      {hand("", "<</Names<</EmbeddedFiles 2 0 R>>>>", "<</Kids[2 0 R]>>"), "circle"},
		"names nowhere":          {hand("", "<</Names<</EmbeddedFiles 7 0 R>>>>"), "missing"},
		"an attachment of none":  {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 9 0 R>>>>"), "missing"},
		"a length of itself":     {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>", "<</Length 3 0 R>>\nstream\n\nendstream"), "no length"},
		"a length too long":      {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>", "<</Length 99999999>>\nstream\n\nendstream"), "longer than the file"},
		"a filter not known":     {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>", plain("/Filter/JBIG2Decode", "x")), "not read here"},
		"not what it is packed":  {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>", plain("/Filter/FlateDecode", "x")), "attachment a"},
		"a manifest of no JSON":  {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(manifest.json)/EF<</F 3 0 R>>>>", plain("", "[1")), "cannot be read"},
		"another's manifest":     {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(manifest.json)/EF<</F 3 0 R>>>>", plain("", "{}")), "no schema"},
		"a newer manifest":       {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(manifest.json)/EF<</F 3 0 R>>>>", plain("", `{"schema":99}`)), "newer"},
		"a manifest of the deep": {hand("", "<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(manifest.json)/EF<</F 3 0 R>>>>", plain("", strings.Repeat(`{"files":[`, 1e5))), "cannot be read"},
		"an object stream in itself": {[]byte("%PDF-1.7\n1 0 obj\n" + plain("/Type/XRef/W[1 1 1]/Size 3/Root 2 0 R", "\x01\x09\x00\x01\x09\x00\x02\x02\x00") +
			"\nendobj\nstartxref\n9\n%%EOF\n"), "catalog"},
	} {
		if _, err := held(t, name, c.data); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q", name, err, c.want)
		}
	}
}

// lengthChain is a file whose every stream takes its length from the next.
func lengthChain(n int) []byte {
	objects := []string{"<</Names<</EmbeddedFiles<</Names[(a) 2 0 R]>>>>>>", "<</F(a)/EF<</F 3 0 R>>>>"}
	for i := range n {
		objects = append(objects, fmt.Sprintf("<</Length %d 0 R>>\nstream\n\nendstream", i+4))
	}
	return hand("", objects...)
}

// many is a file with n attachments of one small content.
func many(n int) []byte {
	var names strings.Builder
	for i := range n {
		fmt.Fprintf(&names, "(%06d)<</F(%06d)/EF<</F 2 0 R>>>>", i, i)
	}
	return hand("", "<</Names<</EmbeddedFiles<</Names["+names.String()+"]>>>>>>", plain("", "x"))
}

func TestManyOfSomething(t *testing.T) {
	if _, err := held(t, "lengths", lengthChain(100_000)); err == nil {
		t.Error("a chain of lengths: no error")
	}
	if _, err := held(t, "attachments", many(100_000)); err == nil || !strings.Contains(err.Error(), "more than 5000 attachments") {
		t.Errorf("attachments: %v", err)
	}
	// One large string, read through many objects at one place.
	long := "[" + strings.Repeat("("+strings.Repeat("x", 60_000)+")", 300) + "]"
	base := hand("", "<</Names<</EmbeddedFiles<</Names[(a)2 0 R]>>>>>>", long)
	at := bytes.Index(base, []byte("2 0 obj"))
	var rows strings.Builder
	for range 10_000 {
		fmt.Fprintf(&rows, "%010d 00000 n \n", at)
	}
	end := bytes.LastIndex(base, []byte("xref\n0"))
	crowd := append(bytes.Clone(base[:end]), fmt.Sprintf("xref\n0 3\n0000000000 65535 f \n0000000009 00000 n \n%010d 00000 n \n3 10000\n%strailer\n<</Root 1 0 R>>\nstartxref\n%d\n%%%%EOF\n", at, rows.String(), end)...)
	if _, err := held(t, "crowd", crowd); err == nil {
		t.Error("crowd: no error")
	}
	text := carrying(packed("", []byte(strings.Repeat("/F1 9 Tf(x)Tj ", 3_000_000))), "<</Type/Font/Subtype/Type1>>")
	if _, err := held(t, "text", text); err == nil || !strings.Contains(err.Error(), "more text") {
		t.Errorf("text: %v", err)
	}
}

func TestDoubledAttachments(t *testing.T) {
	e, err := held(t, "doubled", hand("", "<</Pages 6 0 R/Names<</EmbeddedFiles<</Names[(a) 2 0 R(b) 2 0 R(manifest.json) 4 0 R]>>>>>>",
		"<</F(a)/EF<</F 3 0 R>>>>", plain("", "x"), "<</F(manifest.json)/EF<</F 5 0 R>>>>", plain("", `{"schema":1}`), "<</Kids[]>>"))
	if err != nil || len(e.Doubled) != 1 || e.Doubled[0] != "a" || len(e.Files) != 1 {
		t.Fatalf("%+v, %v", e, err)
	}
	found := false
	for _, m := range e.Check() {
		found = found || m.Kind == evidence.Doubled && m.Name == "a"
	}
	if !found {
		t.Errorf("%+v", e.Check())
	}
}

func FuzzRead(f *testing.F) {
	f.Add(sample(f))
	f.Add(carrying(plain("", "BT /F1 9 Tf 10 20 Td (site class D) Tj ET"), "<</Type/Font/Subtype/Type1>>"))
	f.Add(carrying(packed("", []byte("q 1 0 0 1 3 4 cm BT /F1 9 Tf 1 0 0 1 5 6 Tm [(a)-120(b)]TJ T* (c)' ET Q")),
		"<</Type/Font/Subtype/Type0/DescendantFonts[<</DW 500/W[1[2 3]4 5 6]>>]/ToUnicode 9 0 R>>",
		plain("", "1 begincodespacerange<0000><FFFF>endcodespacerange 1 beginbfrange<0000><FFFF><0000>endbfrange 1 beginbfchar<0001><00660069>endbfchar")))
	f.Add(lengthChain(3))
	f.Add(many(3))
	f.Add([]byte("%PDF-1.7\n1 0 obj\n" + plain("/Type/XRef/W[1 1 1]/Size 3/Root 2 0 R", "\x01\x09\x00\x01\x09\x00\x02\x02\x00") + "\nendobj\nstartxref\n9\n%%EOF\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		e, took, err := read(data)
		if told(t, "fuzz", err); took > 10*time.Second {
			t.Error(took)
		}
		if err == nil && len(e.Manifest.Files) == 0 && len(e.Files) > 0 && len(e.Check()) == 0 {
			t.Error("attachments without a manifest pass")
		}
	})
}
