package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"testing"
	"time"

	"shearbook/templates"
)

// The benchmarks run the program as a process and report its processor time:
//
//	go test -run '^$' -bench Process ./cmd/shearbook
//
// The aim is under 150 ms for the demo's whole report and under 15 ms for
// one classify, on an otherwise idle machine.

// benchProcess times one command line of the built program.
func benchProcess(b *testing.B, args ...string) {
	dir := b.TempDir()
	program := filepath.Join(dir, "shearbook")
	if text, err := exec.Command("go", "build", "-o", program, ".").CombinedOutput(); err != nil {
		b.Fatalf("%v\n%s", err, text)
	}
	for name, text := range map[string]string{"notebook.md": templates.StarterNotebook, "line-1.csv": templates.StarterProfile} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			b.Fatal(err)
		}
	}
	var cpu time.Duration
	n := 0
	for b.Loop() {
		c := exec.Command(program, args...)
		c.Dir = dir
		if text, err := c.CombinedOutput(); err != nil {
			b.Fatalf("%v\n%s", err, text)
		}
		cpu += c.ProcessState.UserTime() + c.ProcessState.SystemTime()
		n++
	}
	b.ReportMetric(float64(cpu.Microseconds())/1e3/float64(n), "cpu-ms/op")
}

func BenchmarkReportProcess(b *testing.B) { benchProcess(b, "report", "notebook.md") }
func BenchmarkClassifyProcess(b *testing.B) {
	benchProcess(b, "classify", "line-1.csv", "--code", "asce-7-16")
}
func BenchmarkVersionProcess(b *testing.B) { benchProcess(b, "--version") }
