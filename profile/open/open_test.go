package open

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"

	"shearbook/profile"
	"shearbook/profile/delimited"
)

const table = "top,bottom,vs\n0,10,600\n10,,900\n"

var feet = Options{Units: "ft, ft/s"}

// check compares what came of opening the table above.
func check(t *testing.T, name string, profiles []profile.Profile, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
	// 10 ft = 3.048 m.
	if len(profiles) != 1 || profiles[0].Name != name || profiles[0].Layers[0].Bottom != 10*profile.Foot {
		t.Errorf("got %+v", profiles)
	}
}

func TestOpen(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "line-1.csv")
	if err := os.WriteFile(path, []byte(table), 0o666); err != nil {
		t.Fatal(err)
	}
	profiles, err := File(path, feet)
	check(t, "line-1", profiles, err)
	profiles, err = Bytes("a/b.tsv", []byte(table), feet)
	check(t, "b", profiles, err)
	profiles, err = Reader("-", iotest.OneByteReader(strings.NewReader(table)), feet)
	check(t, "profile", profiles, err)
	root, err := os.OpenRoot(dir)
	if err != nil {
		t.Fatal(err)
	}
	defer root.Close()
	profiles, err = In(root, "line-1.csv", feet)
	check(t, "line-1", profiles, err)
}

func wantFault(t *testing.T, err error, want string) {
	t.Helper()
	var faults profile.Faults
	if !errors.As(err, &faults) || faults[0].Error() != want || faults[0].Hint == "" {
		t.Errorf("got  %v\nwant %s, and a hint", err, want)
	}
}

// Kinds of files that are not read are named.
func TestKinds(t *testing.T) {
	for _, c := range []struct{ begins, want string }{
		{"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", "a spreadsheet (XLS) or another file in the old Office format"},
		{"%PDF-1.7\n", "a PDF file"},
		{"\x1f\x8b\x08", "a gzip file"},
		{"\x89PNG\r\n\x1a\n", "a PNG picture"},
		{"\xff\xd8\xff\xe0", "a JPEG picture"},
		{"\"**PROJ\"\r\n", "an AGS file of edition 3 or older"},
	} {
		_, err := Bytes("f", []byte(c.begins), Options{})
		wantFault(t, err, "f: the file is "+c.want+", which this version does not read")
	}
}

// A zip file goes to the reader of spreadsheets, which tells whether it is one.
func TestZipped(t *testing.T) {
	_, err := Bytes("f", []byte("PK\x03\x04rest"), Options{})
	wantFault(t, err, "f: the file is damaged: as a zip file it has no list of its parts")
}

// No table of layers is taken for another kind of file.
func TestKindsNot(t *testing.T) {
	for _, begins := range []string{"", "~", "# method: MASW\n" + table, strings.Repeat("#\n", 500) + "~V", "group,top", "PK", "%", `"GROU`} {
		if k, ok := sniff([]byte(begins)); ok {
			t.Errorf("%.20q is taken for %s", begins, k.what)
		}
	}
}

func TestCannotOpen(t *testing.T) {
	dir := t.TempDir()
	inside := filepath.Join(dir, "inside")
	for _, d := range []string{inside, filepath.Join(inside, "sub")} {
		if err := os.Mkdir(d, 0o777); err != nil {
			t.Fatal(err)
		}
	}
	for name, data := range map[string]string{"outside.csv": table, "inside/empty.csv": "", "inside/blank.csv": " \n"} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(data), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	root, err := os.OpenRoot(inside)
	if err != nil {
		t.Fatal(err)
	}
	defer root.Close()
	for name, want := range map[string]string{
		"missing.csv":    "there is no such file",
		"sub":            "this is a folder",
		"empty.csv":      "the file is empty",
		"blank.csv":      "the file is empty",
		"../outside.csv": "the file lies outside the folder that may be read",
	} {
		_, err := In(root, name, feet)
		wantFault(t, err, name+": "+want)
		if strings.HasPrefix(name, "..") {
			continue
		}
		path := filepath.Join(inside, name)
		_, err = File(path, feet)
		wantFault(t, err, path+": "+want)
	}
}

func TestNotPermitted(t *testing.T) {
	err := cannotOpen("x.csv", &os.PathError{Op: "open", Path: "x.csv", Err: os.ErrPermission})
	wantFault(t, err, "x.csv: the file may not be read")
}

// A symbolic link out of the folder is not followed, a device not read.
func TestInside(t *testing.T) {
	dir := t.TempDir()
	if err := os.Symlink(os.DevNull, filepath.Join(dir, "link.csv")); err != nil {
		t.Fatal(err)
	}
	root, err := os.OpenRoot(dir)
	if err != nil {
		t.Fatal(err)
	}
	defer root.Close()
	_, err = In(root, "link.csv", feet)
	wantFault(t, err, "link.csv: the file lies outside the folder that may be read")
}

// endless counts what is read of it.
type endless struct{ n int64 }

func (e *endless) Read(p []byte) (int, error) {
	e.n += int64(len(p))
	clear(p) // NULs do as well as anything
	return len(p), nil
}

// No more is read than may be.
func TestReaderStops(t *testing.T) {
	var e endless
	_, err := Reader("-", &e, Options{})
	wantFault(t, err, "-: the file is larger than 64 MiB")
	if e.n != delimited.MaxBytes+1 {
		t.Errorf("%d bytes were read", e.n)
	}
	_, err = Reader("-", io.MultiReader(strings.NewReader(table), iotest.ErrReader(errors.New("the cable is cut"))), Options{})
	if err == nil || err.Error() != "-: reading failed: the cable is cut" {
		t.Errorf("got %v", err)
	}
}

// A file that is too large is refused before it is read.
func TestFileTooLarge(t *testing.T) {
	path := filepath.Join(t.TempDir(), "large.csv")
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := f.Truncate(1 << 40); err != nil {
		t.Fatal(err)
	}
	_, err = File(path, Options{})
	wantFault(t, err, path+": the file is larger than 64 MiB")
}
