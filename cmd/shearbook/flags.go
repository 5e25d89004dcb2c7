package main

import (
	"strings"

	"github.com/spf13/cobra"

	"shearbook/profile"
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
