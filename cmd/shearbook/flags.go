package main

import (
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"shearbook/profile"
	"shearbook/profile/open"
	"shearbook/report"
	"shearbook/vs30/siteclass"
)

// checkExtend is a misuse where the extension is not known.
func checkExtend(word string) error {
	for _, known := range report.Extensions() {
		if word == known {
			return nil
		}
	}
	return misuse("known: "+strings.Join(report.Extensions(), ", "), "extension %q is not known", word)
}

// depthFlag reads a flag that is a depth below ground level.
func depthFlag(name, text string) (profile.Optional, error) {
	if text == "" {
		return profile.Optional{}, nil
	}
	v, err := profile.ParseValue(text, profile.Length)
	switch {
	case err != nil:
		return profile.Optional{}, misuse("write it with its unit, as --"+name+" 2.5m", "--%s: %v", name, err)
	case v < 0:
		return profile.Optional{}, misuse("give the depth below ground level, as --"+name+" 2.5m", "--%s %s lies above the ground", name, text)
	}
	return profile.Known(v), nil
}

// readFlags are the flags that say how to read a profile file.
type readFlags struct {
	units                       string
	maps                        []string
	step, bounds, carryUp, base string
	n60, allHoles               bool
	correlate                   correlateFlags
}

// readFlagNames are their names.
var readFlagNames = append([]string{"units", "map", "step", "bounds", "carry-up", "log-datum", "n60", "all-holes"}, correlateFlagNames...)

func (f *readFlags) define(fl *pflag.FlagSet) {
	fl.StringVar(&f.units, "units", "", "`units` the file does not state: \"m, m/s\"")
	fl.StringArrayVar(&f.maps, "map", nil, "`name` of a column: \"Vs=DTS [us/ft]\"")
	fl.StringVar(&f.step, "step", "", "LAS: `thickness` of layers: 0.5m")
	fl.StringVar(&f.bounds, "bounds", "", "LAS: `depths` of their bounds: \"5m, 12m\"")
	fl.StringVar(&f.carryUp, "carry-up", "", "LAS, AGS4: `depth` of the first Vs at most: 6m")
	fl.StringVar(&f.base, "log-datum", "", "LAS: `height` above ground of depth 0: 0.6m")
	fl.BoolVar(&f.n60, "n60", false, "AGS4: take N60 where the file has it")
	fl.BoolVar(&f.allHoles, "all-holes", false, "AGS4: read holes without velocities too")
	f.correlate.define(fl)
}

// options reads the flags.
func (f *readFlags) options() (opt open.Options, err error) {
	opt = open.Options{Units: f.units, Map: f.maps, N60: f.n60, AllHoles: f.allHoles}
	if opt.Correlate, err = f.correlate.options(); err != nil {
		return opt, err
	}
	if opt.Step, err = lengthFlag("step", f.step, "0.5m"); err != nil {
		return opt, err
	}
	for text := range strings.FieldsFuncSeq(f.bounds, func(r rune) bool { return r == ',' || r == ';' }) {
		z, err := lengthFlag("bounds", text, `"5m, 12m"`)
		if err != nil {
			return opt, err
		}
		opt.Bounds = append(opt.Bounds, z)
	}
	if opt.CarryUp, err = lengthFlag("carry-up", f.carryUp, "6m"); err != nil {
		return opt, err
	}
	if f.base != "" {
		if opt.LogDatum, err = profile.ParseValue(f.base, profile.Length); err != nil {
			return opt, misuse("write it with its unit, as --log-datum 0.6m", "--log-datum: %v", err)
		}
	}
	return opt, nil
}

// lengthFlag reads a flag that is a length above zero; 0 if it is not given.
func lengthFlag(name, text, example string) (float64, error) {
	if text == "" {
		return 0, nil
	}
	v, err := profile.ParseValue(text, profile.Length)
	hint := "write it with its unit, as --" + name + " " + example
	switch {
	case err != nil:
		return 0, misuse(hint, "--%s: %v", name, err)
	case v <= 0:
		return 0, misuse(hint, "--%s %s is not above zero", name, strings.TrimSpace(text))
	}
	return v, nil
}

// completeWords lets the shell complete a flag with one of a few words.
func completeWords(c *cobra.Command, flag string, words ...string) {
	_ = c.RegisterFlagCompletionFunc(flag, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp)) // fails only for a flag that is not there
}

// completeCodes lets the shell complete --code.
func completeCodes(c *cobra.Command) {
	_ = c.RegisterFlagCompletionFunc("code", func(*cobra.Command, []string, string) ([]cobra.Completion, cobra.ShellCompDirective) {
		return codeIDs(), cobra.ShellCompDirectiveNoFileComp
	}) // fails only for a flag that is not there
}

func codeIDs() []string {
	var ids []string
	for _, code := range siteclass.All() {
		ids = append(ids, code.ID)
	}
	return ids
}
