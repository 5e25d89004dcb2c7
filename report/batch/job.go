package batch

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// Job is what Run is to do.
type Job struct {
	Inputs []string // files, folders, globs; see Run
	Out    string   // the folder that is written
	Codes  []*siteclass.Code
	Facts  report.Facts
	Read   open.Options
	Near   float64 // %, the margin up to which an average counts as near a bound; 0 is Near, below 0 none

	Shard   Shard
	Resume  bool // go on with what an earlier run left in Out
	Workers int  // that classify at the same time; 0 for as many as there are processors

	Reports Which // profiles that MakeReport is called for
	// MakeReport makes the report of a profile in a folder. It is called by
	// several workers at the same time.
	MakeReport func(Reported) error

	FaultsAlone bool // faults.csv holds the faults and no notes, which are neither counted nor worded; what they flag is flagged all the same

	Derive  DeriveOptions // what is made from the tables at the end
	Version string        // of the program, which a batch that is resumed must share
	Tables  []string      // what else the codes depend on: the digests of tables of their own

	Progress func(Progress)          // is called from time to time; nil for none
	Say      func(text, hint string) // tells what should be known while it goes on; nil for nothing

	ordinary bool // every profile goes the ordinary way; for tests
}

// Which profiles get a report of their own.
type Which uint8

// The choices.
const (
	NoReports      Which = iota
	FlaggedReports       // those with a flag under any of the codes
	AllReports
)

// Reported is a profile that a report is asked for.
type Reported struct {
	Profile *profile.Profile
	Name    string // of the file, without its folder
	Data    []byte // of the file; of a table with several profiles, its top and the rows of this one
	Extract bool   // Data is such a part of the file
	Codes   []*siteclass.Code
	Facts   report.Facts
	Dir     string // that the report is to be written into; its parent is there
}

// Shard is one part of a batch that is spread over several runs. Of the units
// in the order of the input, shard I of N takes the I-th, the (I+N)-th and so
// on. The zero value takes all.
type Shard struct {
	I, N int // 1 ≤ I ≤ N
}

// takes reports whether the unit with an ordinal from 0 is in the shard.
func (s Shard) takes(ordinal int) bool { return s.N < 2 || ordinal%s.N == s.I-1 }

// Progress is how far a run is.
type Progress struct {
	Units   int   // that are done
	Bytes   int64 // of the input that are done
	Total   int64 // bytes of the input; 0 where it is not known
	Reports int   // made
}

// Outcome is what a run found.
type Outcome struct {
	Tally
	Out        string
	Unfinished bool // the run was interrupted; Resume goes on
	Reused     int  // units that an earlier run had done
	Reports    int  // folders in Reports
}

// Tally counts units.
type Tally struct {
	Units   int
	Failed  int     // profiles and files for which at least one code gave no class
	Flagged int     // units with a flag, the failed among them
	Classes []Count // by code, in the order of the codes, and class, in the order of their tables; class "" for failed
}

// Count is how many units are in a class of a code.
type Count struct {
	Code, Class string
	N           int
}

// add counts n more units in a class.
func (t *Tally) add(code, class string, n int) {
	for i := range t.Classes {
		if c := &t.Classes[i]; c.Class == class && c.Code == code {
			c.N += n
			return
		}
	}
	t.Classes = append(t.Classes, Count{code, class, n})
}

// join adds the counts of another tally.
func (t *Tally) join(other *Tally) {
	t.Units += other.Units
	t.Failed += other.Failed
	t.Flagged += other.Flagged
	for _, c := range other.Classes {
		t.add(c.Code, c.Class, c.N)
	}
}

// digest is the SHA-256 of everything that the rows depend on beside the
// content of the files.
func (j *Job) digest() string {
	sum := sha256.New()
	line := func(key string, value any) { fmt.Fprintf(sum, "%s %q\n", key, fmt.Sprint(value)) }
	line("version", j.Version)
	for _, in := range j.Inputs {
		line("input", in)
	}
	for _, c := range j.Codes {
		line("code", c.ID)
	}
	for _, t := range j.Tables {
		line("table", t)
	}
	line("facts", j.Facts)
	line("read", fmt.Sprintf("%+v", j.Read))
	line("near", j.near())
	line("reports", j.Reports)
	d := &j.Derive
	line("pages", []any{d.Title, d.Project, d.PreparedBy, d.Date, d.Letter, d.US})
	line("faults alone", j.FaultsAlone)
	return hex.EncodeToString(sum.Sum(nil))
}

func (j *Job) near() float64 { return near(j.Near) }

// near is the margin in percent that an option means.
func near(option float64) float64 {
	if option == 0 {
		return Near
	}
	return max(option, 0)
}

func (j *Job) say(hint, format string, args ...any) {
	if j.Say != nil {
		j.Say(fmt.Sprintf(format, args...), hint)
	}
}
