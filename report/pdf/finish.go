package pdf

import (
	"bytes"
	"cmp"
	"compress/zlib"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"sync"
)

// finish makes the file of what fpdf has written: the pages are packed, and
// the fonts, of which fpdf knows nothing, are added to the resources. fpdf
// would make a packer for every stream and read every face twice; that took
// three quarters of the time of a report.
func finish(plain []byte, fonts []embeddedFont) ([]byte, error) {
	objects, trailer, err := takeApart(plain)
	if err != nil {
		return nil, err
	}
	size := len(objects) + 1 + fontObjects*len(fonts)
	offsets := make([]int, size)
	out := bytes.NewBuffer(make([]byte, 0, len(plain)/3+32<<10*len(fonts)))
	out.Write(plain[:objects[0].start])
	for _, o := range objects {
		offsets[o.number] = out.Len()
		body := plain[o.start:o.end]
		switch {
		case o.number == resources:
			body = withFonts(body, fonts, len(objects)+1)
		case bytes.HasPrefix(body[bytes.IndexByte(body, '\n')+1:], []byte("<</Length ")):
			if body, err = packObject(o.number, body); err != nil {
				return nil, err
			}
		}
		out.Write(body)
	}
	n := len(objects) + 1
	for i := range fonts {
		for _, o := range fonts[i].objects(n) {
			offsets[n] = out.Len()
			fmt.Fprintf(out, "%d 0 obj\n%s\nendobj\n", n, o)
			n++
		}
	}
	xref := out.Len()
	fmt.Fprintf(out, "xref\n0 %d\n0000000000 65535 f \n", size)
	for _, at := range offsets[1:] {
		fmt.Fprintf(out, "%010d 00000 n \n", at)
	}
	fmt.Fprintf(out, "trailer\n<<\n/Size %d\n%s>>\nstartxref\n%d\n%%%%EOF\n", size, trailer, xref)
	return out.Bytes(), nil
}

// resources is the object of the resources that all pages share.
const resources = 2

// errLayout tells that fpdf writes other files than it did.
var errLayout = errors.New("pdf: the file that fpdf has written is not laid out as expected")

// plainObject is an object of fpdf's file.
type plainObject struct{ number, start, end int }

// takeApart finds the objects of fpdf's file, in their order, and what its
// trailer says beside the size.
func takeApart(plain []byte) ([]plainObject, string, error) {
	xref, err := xrefOf(plain)
	if err != nil {
		return nil, "", err
	}
	rows, rest, ok := bytes.Cut(plain[xref:], []byte("trailer\n<<\n"))
	_, rest, ok2 := bytes.Cut(rest, []byte("\n")) // the size
	trailer, _, ok3 := bytes.Cut(rest, []byte(">>\nstartxref\n"))
	lines := bytes.Split(bytes.TrimSuffix(rows, []byte("\n")), []byte("\n"))
	if !ok || !ok2 || !ok3 || len(lines) < 4 || string(lines[0]) != "xref" {
		return nil, "", errLayout
	}
	var objects []plainObject
	for i, l := range lines[3:] { // behind xref, the count and object 0
		at, err := strconv.Atoi(string(l[:min(10, len(l))]))
		if err != nil || at <= 0 || at >= xref {
			return nil, "", errLayout
		}
		objects = append(objects, plainObject{number: i + 1, start: at})
	}
	slices.SortFunc(objects, func(a, b plainObject) int { return cmp.Compare(a.start, b.start) })
	for i := range objects {
		objects[i].end = xref
		if i+1 < len(objects) {
			objects[i].end = objects[i+1].start
		}
	}
	return objects, string(trailer), nil
}

// xrefOf returns where the table of a file starts, from its last lines.
func xrefOf(file []byte) (int, error) {
	key := []byte("\nstartxref\n")
	i := bytes.LastIndex(file, key)
	if i < 0 {
		return 0, errLayout
	}
	number, _, _ := bytes.Cut(file[i+len(key):], []byte("\n"))
	at, err := strconv.Atoi(string(number))
	if err != nil || at < 0 || at > i {
		return 0, errLayout
	}
	return at, nil
}

// withFonts puts the fonts into the resources; n is the first object of the
// first font.
func withFonts(body []byte, fonts []embeddedFont, n int) []byte {
	var list bytes.Buffer
	list.WriteString("/Font <<\n")
	for i := range fonts {
		fmt.Fprintf(&list, "/%s %d 0 R\n", fonts[i].key, n+fontObjects*i)
	}
	return bytes.Replace(body, []byte("/Font <<\n"), list.Bytes(), 1)
}

// packObject packs a stream that stands in the file as it is.
func packObject(number int, body []byte) ([]byte, error) {
	_, data, ok := bytes.Cut(body, []byte(">>\nstream\n"))
	data, ok2 := bytes.CutSuffix(data, []byte("\nendstream\nendobj\n"))
	if !ok || !ok2 {
		return nil, errLayout
	}
	return fmt.Appendf(nil, "%d 0 obj\n%s\nendobj\n", number, streamObject("", data)), nil
}

// packers are kept, because a new one costs more than packing a page. They
// hold nothing of what they have packed.
var packers = sync.Pool{New: func() any { return zlib.NewWriter(nil) }}

// pack returns data packed by Flate.
func pack(data []byte) []byte {
	var b bytes.Buffer
	z := packers.Get().(*zlib.Writer)
	defer packers.Put(z)
	z.Reset(&b)
	_, err1 := z.Write(data)
	if err := errors.Join(err1, z.Close()); err != nil {
		panic(err) // a buffer takes what it is given
	}
	return b.Bytes()
}
