package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/profile/ags"
	"shearbook/profile/delimited"
	"shearbook/profile/json"
	"shearbook/profile/sitexml"
	"shearbook/profile/spreadsheet"
	"shearbook/report"
)

// convertFlags are the flags of convert.
type convertFlags struct {
	to, date, edition string
	force             bool
	read              readFlags
}

func newConvert(s streams) *cobra.Command {
	var f convertFlags
	c := &cobra.Command{
		Use:   "convert IN OUT",
		Short: "Write the profiles of a file in another format",
		Long: `convert reads the profiles of a file of any kind and writes them as CSV, TSV,
XLSX, our own JSON, SiteXML or AGS4: by the ending of OUT (.csv, .tsv, .xlsx,
.json, .xml, .ags) or as --to says. - is standard input or output. What the
format has no place for is said on standard error; JSON keeps most.`,
		Example: `  shearbook convert line-1.xlsx line-1.csv
  shearbook convert site.ags profiles.json
  shearbook convert line-1.csv line-1.ags --date 2026-03-31
  shearbook convert - - --to json < log.las > log.json`,
		Args: arguments(2, 2, "a file to read and a file to write"),
		RunE: func(_ *cobra.Command, args []string) error { return convert(s, f, args[0], args[1]) },
	}
	fl := c.Flags()
	fl.StringVar(&f.to, "to", "", "`format`: "+strings.Join(formatNames(), ", "))
	fl.BoolVar(&f.force, "force", false, "replace OUT if it is there")
	fl.StringVar(&f.date, "date", "", "`date` of an AGS4 issue or SiteXML: 2026-03-31")
	fl.StringVar(&f.edition, "edition", "", "`edition` of AGS4: 4.0.4, 4.1, 4.1.1 or 4.2")
	f.read.define(fl)
	completeWords(c, "to", formatNames()...)
	completeWords(c, "edition", editions...)
	return c
}

// editions are those of AGS4 that are written.
var editions = []string{"4.0.4", "4.1", "4.1.1", "4.2"}

// isDate reports whether text is a date as files of AGS4 and SiteXML write it.
func isDate(text string) bool {
	_, err := time.Parse(time.DateOnly, text)
	return err == nil
}

// convert is the whole of `shearbook convert`.
func convert(s streams, f convertFlags, in, out string) error {
	to, err := f.format(out)
	if err != nil {
		return err
	}
	opt, err := f.read.options()
	if err != nil {
		return err
	}
	if out != "-" && !f.force {
		if err := mustBeNew(out); err != nil {
			return err
		}
	}
	profiles, err := openProfiles(s.in, in, opt)
	if err != nil {
		return err
	}
	if out == "-" {
		var text bytes.Buffer
		if err := to.write(&text, profiles, f); err != nil {
			return cannotWrite(to, "the profiles", err)
		}
		_, err = s.out.Write(text.Bytes())
	} else if err = writeWhole(out, f.force, func(w io.Writer) error { return to.write(w, profiles, f) }); err != nil {
		return cannotWrite(to, out, err)
	}
	if err != nil {
		return err
	}
	s.tellLosses(to, profiles)
	return nil
}

// format is a format that convert writes.
type format struct {
	name    string
	endings []string
	write   func(w io.Writer, profiles []profile.Profile, f convertFlags) error
	lost    func(profiles []profile.Profile) []loss
}

// loss is what is lost of one profile.
type loss struct{ profile, what string }

var formats = []format{
	{"csv", []string{".csv"}, func(w io.Writer, p []profile.Profile, _ convertFlags) error { return delimited.Write(w, p) }, each(delimited.Losses)},
	{"tsv", []string{".tsv", ".tab"}, func(w io.Writer, p []profile.Profile, _ convertFlags) error { return delimited.WriteTabs(w, p) }, each(delimited.Losses)},
	{"xlsx", []string{".xlsx"}, func(w io.Writer, p []profile.Profile, _ convertFlags) error { return spreadsheet.Write(w, p) }, each(delimited.Losses)},
	{"json", []string{".json"}, func(w io.Writer, p []profile.Profile, _ convertFlags) error { return json.Write(w, p) }, each(json.Losses)},
	{"sitexml", []string{".xml", ".sitexml"}, func(w io.Writer, p []profile.Profile, f convertFlags) error {
		return sitexml.Write(w, p, sitexml.Publication{Created: f.date})
	}, each(sitexml.Losses)},
	{"ags4", []string{".ags", ".ags4"}, func(w io.Writer, p []profile.Profile, f convertFlags) error {
		return ags.Write(w, p, ags.WriteOptions{Edition: f.edition, Date: f.date})
	}, func(profiles []profile.Profile) []loss {
		var list []loss
		for i := range profiles {
			for _, n := range ags.Lost(profiles[i : i+1]) {
				list = append(list, loss{profiles[i].Name, strings.TrimPrefix(n.Text, "profile "+profiles[i].Name+": ")})
			}
		}
		return list
	}},
}

// each is the losses of one profile after another.
func each(losses func(*profile.Profile) []string) func([]profile.Profile) []loss {
	return func(profiles []profile.Profile) []loss {
		var list []loss
		for i := range profiles {
			for _, what := range losses(&profiles[i]) {
				list = append(list, loss{profiles[i].Name, what})
			}
		}
		return list
	}
}

func formatNames() []string {
	var names []string
	for _, each := range formats {
		names = append(names, each.name)
	}
	return names
}

// format is the format of OUT, by its ending or by --to, which must agree.
func (f convertFlags) format(out string) (*format, error) {
	ending := strings.ToLower(filepath.Ext(out))
	byName := slices.IndexFunc(formats, func(each format) bool { return each.name == strings.ToLower(f.to) })
	byEnding := slices.IndexFunc(formats, func(each format) bool { return slices.Contains(each.endings, ending) })
	known := "it is one of: " + strings.Join(formatNames(), ", ")
	switch {
	case f.to != "" && byName < 0:
		return nil, misuse(known, "format %q is not known", f.to)
	case f.to == "" && byEnding < 0:
		return nil, misuse("add --to; "+known, "%s does not say by its ending which format to write", out)
	case f.to == "":
		byName = byEnding
	case byEnding >= 0 && byEnding != byName:
		return nil, misuse("leave --to out, or name the file otherwise", "%s ends as %s, but --to is %s", out, formats[byEnding].name, f.to)
	}
	to := &formats[byName]
	switch {
	case f.edition != "" && to.name == "ags4" && !slices.Contains(editions, f.edition):
		return nil, misuse("it is one of: "+strings.Join(editions, ", "), "--edition %q is no edition of AGS4 that is written", f.edition)
	case f.date != "" && !isDate(f.date):
		return nil, misuse("write it as year, month and day: --date 2026-03-31", "--date %q is not a date", f.date)
	case f.edition != "" && to.name != "ags4":
		return nil, misuse("leave it out", "--edition is of AGS4; the format is %s", to.name)
	case f.date != "" && to.name != "ags4" && to.name != "sitexml":
		return nil, misuse("leave it out", "--date is of AGS4 and SiteXML; the format is %s", to.name)
	}
	return to, nil
}

// cannotWrite says what to do where a format cannot hold the profiles.
func cannotWrite(to *format, out string, err error) error {
	var told hinted
	var path *fs.PathError
	hint := "write JSON, which holds every profile"
	switch {
	case errors.As(err, &told):
		return err
	case to.name == "json" || errors.As(err, &path):
		hint = ""
	case strings.Contains(err.Error(), " date "):
		hint = "add --date 2026-03-31, the date of the file"
	}
	return hinted{fmt.Errorf("%s cannot be written as %s: %w", out, to.name, err), hint}
}

// ofFile is how the losses of tables call what no format but JSON keeps.
const ofFile = "statements of its file that are no part of a profile"

// tellLosses says what the format has no place for, each loss once with the
// profiles that it is of.
func (s streams) tellLosses(to *format, profiles []profile.Profile) {
	lost := to.lost(profiles)
	for i := range profiles {
		energy := loss{profiles[i].Name, "the energy ratio of its blow counts"}
		if slices.ContainsFunc(profiles[i].Layers, func(l profile.Layer) bool { return l.EnergyRatio != 0 }) && !slices.Contains(lost, energy) {
			lost = append(lost, energy)
		}
		said := loss{profiles[i].Name, ofFile}
		if to.name != "json" && slices.Contains(delimited.Losses(&profiles[i]), ofFile) && !slices.Contains(lost, said) {
			lost = append(lost, said)
		}
	}
	if to.name != "json" {
		for i := range profiles {
			l := loss{profiles[i].Name, "columns that were not read"}
			if r := profiles[i].Reading; r != nil && r.Index(profile.Unknown) >= 0 && !slices.Contains(lost, l) {
				lost = append(lost, l)
			}
		}
	}
	var order []string
	of := map[string][]string{}
	for _, l := range lost {
		if of[l.what] == nil {
			order = append(order, l.what)
		}
		of[l.what] = append(of[l.what], report.Visible(l.profile))
	}
	const most = 5
	for i, what := range order {
		names := of[what]
		if more := len(names) - most; more > 0 {
			names = append(names[:most:most], fmt.Sprintf("%d more", more))
		}
		hint := ""
		if i+1 == len(order) && to.name != "json" {
			hint = "JSON keeps most"
		}
		say(s.err, to.name+" does not keep "+what+" ("+strings.Join(names, ", ")+")", hint)
	}
}
