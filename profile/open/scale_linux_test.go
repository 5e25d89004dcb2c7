package open

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime/debug"
	"strings"
	"syscall"
	"testing"

	"shearbook/profile/delimited"
	"shearbook/profile/spreadsheet"
)

// scaleFile names, to a child process, the file that it reads to see how much
// memory that takes.
const scaleFile = "SHEARBOOK_TEST_SCALE_FILE"

// TestScaleChild is the child process. It collects garbage as the command does.
func TestScaleChild(t *testing.T) {
	path := os.Getenv(scaleFile)
	if path == "" {
		return // run as a test of its own there is nothing to read
	}
	debug.SetGCPercent(300)
	debug.SetMemoryLimit(256 << 20)
	profiles, err := File(path, Options{})
	if err != nil {
		t.Fatal(err)
	}
	layers := 0
	for i := range profiles {
		layers += len(profiles[i].Layers)
	}
	var used syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &used); err != nil {
		t.Fatal(err)
	}
	fmt.Printf("read %d layers, %d bytes, %d ms\n", layers, peak(t), used.Utime.Nano()/1e6)
}

// peak is the most memory in bytes that the process has held. (What getrusage
// says includes that of its parent, from before the program was loaded.)
func peak(t *testing.T) int64 {
	status, err := os.ReadFile("/proc/self/status")
	if err != nil {
		t.Fatal(err)
	}
	_, after, _ := strings.Cut(string(status), "VmHWM:")
	var kB int64
	if _, err := fmt.Sscan(after, &kB); err != nil {
		t.Fatal(err)
	}
	return kB * 1024
}

// mostMemory is the peak that no file may exceed, in bytes.
const mostMemory = 300e6

// The largest files of each kind, a million rows where so many fit into the
// size that is read, and files of a thousand columns take bounded memory.
func TestScale(t *testing.T) {
	if testing.Short() {
		t.Skip("reads files of up to 64 MiB")
	}
	for _, c := range []struct {
		name string
		rows int
		make func(b *bytes.Buffer, rows int)
	}{
		{"long.csv", 1e6, longCSV}, {"long.xlsx", 1e6, longXLSX}, {"long.ags", 1e6, longAGS}, {"long.las", 1e6, longLAS},
		{"long.json", 1e6, longJSON}, {"long.xml", 270e3, longSiteXML},
		{"wide.csv", 5e3, wideCSV}, {"wide.xlsx", 5e3, wideXLSX}, {"wide.ags", 5e3, wideAGS}, {"wide.las", 5e3, wideLAS},
	} {
		t.Run(c.name, func(t *testing.T) {
			var b bytes.Buffer
			c.make(&b, c.rows)
			if b.Len() > delimited.MaxBytes {
				t.Fatalf("%d bytes are more than is read", b.Len())
			}
			path := filepath.Join(t.TempDir(), c.name)
			if err := os.WriteFile(path, b.Bytes(), 0o666); err != nil {
				t.Fatal(err)
			}
			child := exec.Command(os.Args[0], "-test.run=^TestScaleChild$")
			child.Env = append(os.Environ(), scaleFile+"="+path)
			out, err := child.CombinedOutput()
			var layers, memory, ms int
			if n, _ := fmt.Sscanf(string(out), "read %d layers, %d bytes, %d ms", &layers, &memory, &ms); err != nil || n != 3 {
				t.Fatalf("%v\n%.2000s", err, out)
			}
			t.Logf("%d bytes, %d layers: peak %d MB, %d ms of processor time", b.Len(), layers, memory/1e6, ms)
			if layers != c.rows || memory > mostMemory {
				t.Errorf("%d layers in %d MB; want %d in at most %d", layers, memory/1e6, c.rows, int(mostMemory)/1e6)
			}
		})
	}
}

func longCSV(b *bytes.Buffer, rows int) {
	b.WriteString("top_m,bottom_m,vs_mps\n")
	for i := range rows {
		fmt.Fprintf(b, "%.2f,%.2f,%d\n", float64(i)/20, float64(i+1)/20, 200+i%500)
	}
}

func longXLSX(b *bytes.Buffer, rows int) {
	w := spreadsheet.NewWriter(b)
	w.Sheet("A", []spreadsheet.Column{{Heading: "top_m"}, {Heading: "bottom_m"}, {Heading: "vs_mps"}})
	for i := range rows {
		w.Row(spreadsheet.Number(float64(i)/20), spreadsheet.Number(float64(i+1)/20), spreadsheet.Number(float64(200+i%500)))
	}
	w.Close()
}

func longAGS(b *bytes.Buffer, rows int) {
	b.WriteString("\"GROUP\",\"WGPT\"\r\n\"HEADING\",\"LOCA_ID\",\"WGPG_ID\",\"WGPT_PARA\",\"WGPT_UNIT\",\"WGPT_DPTH\",\"WGPT_RDNG\"\r\n" +
		"\"UNIT\",\"\",\"\",\"\",\"\",\"m\",\"\"\r\n\"TYPE\",\"ID\",\"X\",\"PA\",\"PU\",\"2DP\",\"U\"\r\n")
	for i := range rows {
		fmt.Fprintf(b, "\"DATA\",\"A\",\"1\",\"PSL-SWV\",\"m/s\",\"%.2f\",\"%d\"\r\n", float64(i)/20+0.05, 200+i%500)
	}
}

func longLAS(b *bytes.Buffer, rows int) {
	b.WriteString("~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nNULL. -999.25 :\n~C\nDEPT.M :\nVS.M/S :\n~A\n")
	for i := range rows {
		fmt.Fprintf(b, "%.2f %d\n", float64(i)/20+0.05, 200+i%500)
	}
}

func longJSON(b *bytes.Buffer, rows int) {
	b.WriteString(`{"shearbook profiles": 1, "profiles": [{"name": "A", "layers": [`)
	for i := range rows {
		if i > 0 {
			b.WriteByte(',')
		}
		fmt.Fprintf(b, "{\"top_m\":%.2f,\"bottom_m\":%.2f,\"vs_mps\":%d}\n", float64(i)/20, float64(i+1)/20, 200+i%500)
	}
	b.WriteString(`]}]}`)
}

func longSiteXML(b *bytes.Buffer, rows int) {
	b.WriteString(`<SERA_quakeml schemaVersion="1.3"><velocityProfile publicID="x/A">`)
	for i := range rows {
		fmt.Fprintf(b, "<velocityProfileData><velocityS><value>%d</value></velocityS><layerThickness><layerTopDepth><value>%.2f</value></layerTopDepth>"+
			"<layerBottomDepth><value>%.2f</value></layerBottomDepth></layerThickness></velocityProfileData>\n", 200+i%500, float64(i)/20, float64(i+1)/20)
	}
	b.WriteString(`</velocityProfile></SERA_quakeml>`)
}

// The columns of wide files beside depth and Vs are not read.
const columns = 998

func wideCSV(b *bytes.Buffer, rows int) {
	b.WriteString("thickness_m,vs_mps")
	for k := range columns {
		fmt.Fprintf(b, ",extra %d", k)
	}
	for i := range rows {
		fmt.Fprintf(b, "\n0.5,%d%s", 200+i%500, strings.Repeat(",7.25", columns))
	}
}

func wideXLSX(b *bytes.Buffer, rows int) {
	w := spreadsheet.NewWriter(b)
	list := []spreadsheet.Column{{Heading: "thickness_m"}, {Heading: "vs_mps"}}
	row := []spreadsheet.Cell{spreadsheet.Number(0.5), {}}
	for k := range columns {
		list = append(list, spreadsheet.Column{Heading: fmt.Sprintf("extra %d", k)})
		row = append(row, spreadsheet.Number(7.25))
	}
	w.Sheet("A", list)
	for i := range rows {
		row[1] = spreadsheet.Number(float64(200 + i%500))
		w.Row(row...)
	}
	w.Close()
}

func wideAGS(b *bytes.Buffer, rows int) {
	head := [3]string{`"HEADING","LOCA_ID","WGPG_ID","WGPT_PARA","WGPT_UNIT","WGPT_DPTH","WGPT_RDNG"`, `"UNIT","","","","","m",""`, `"TYPE","ID","X","PA","PU","2DP","U"`}
	const more = columns - 5
	for k := range more {
		head[0] += fmt.Sprintf(`,"WGPT_%c%03d"`, 'A'+k/900, k)
		head[1] += `,""`
		head[2] += `,"X"`
	}
	b.WriteString("\"GROUP\",\"WGPT\"\r\n" + strings.Join(head[:], "\r\n") + "\r\n")
	for i := range rows {
		fmt.Fprintf(b, "\"DATA\",\"A\",\"1\",\"PSL-SWV\",\"m/s\",\"%.2f\",\"%d\"%s\r\n", float64(i)/2+0.25, 200+i%500, strings.Repeat(`,"7.25"`, more))
	}
}

func wideLAS(b *bytes.Buffer, rows int) {
	b.WriteString("~V\nVERS. 2.0 :\nWRAP. NO :\n~W\nNULL. -999.25 :\n~C\nDEPT.M :\nVS.M/S :\n")
	for k := range columns {
		fmt.Fprintf(b, "X%d.API :\n", k)
	}
	b.WriteString("~A\n")
	for i := range rows {
		fmt.Fprintf(b, "%.2f %d%s\n", float64(i)/2+0.25, 200+i%500, strings.Repeat(" 7.25", columns))
	}
}
