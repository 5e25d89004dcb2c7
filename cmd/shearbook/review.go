package main

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/folder"
	"shearbook/report/review"
	"shearbook/vs30/siteclass"
)

// reviewFlags are the flags of review.
type reviewFlags struct {
	code, rules, out, format string
	codeFiles                []string
	list                     bool

	profile, claimedClass, claimedAverage, claimedCode, claimedDepth string
	claimedExtension, datum, foundation                              string
	by, date                                                         string
	read                                                             readFlags
}

func newReview(s streams) *cobra.Command {
	var f reviewFlags
	c := &cobra.Command{
		Use:   "review SUBMISSION",
		Short: "Recompute what a submission claims, and say what does not follow",
		Long: `review takes a site folder, a report.pdf, a table of claims (CSV with file,
code, class and average) or a profile file with --claimed-… flags. It never
evaluates the applicant's notebook: it takes the data, applies the code of
--code, and says whether the claims follow. With --out it writes a memo. --list
prints every rule, its weight, source and limits; --rules takes a department's
own. Exit status: 0 where everything agrees, 3 where not.`,
		Example: `  shearbook review ferry-road --code asce-7-16 --out memo
  shearbook review claims.csv --code ec8-2004
  shearbook review line-1.csv --claimed-class D --claimed-average 287m/s \
    --claimed-code asce-7-16
  shearbook review --list`,
		Args: func(c *cobra.Command, args []string) error {
			if f.list && len(args) == 0 {
				return nil
			}
			return arguments(1, 1, "one submission")(c, args)
		},
		RunE: func(_ *cobra.Command, args []string) error {
			if f.list {
				return listRules(s, f)
			}
			return reviewSubmission(s, f, args[0])
		},
	}
	fl := c.Flags()
	fl.StringVar(&f.code, "code", "", "`ID` of the code to apply; else the claimed one")
	fl.StringVar(&f.out, "out", "", "`folder` to write the memo into")
	fl.StringVar(&f.format, "format", "text", "`text or json`")
	fl.StringVar(&f.rules, "rules", "", "`FILE` of a department's weights and limits")
	fl.BoolVar(&f.list, "list", false, "print the rules")
	fl.StringVar(&f.claimedClass, "claimed-class", "", "`class` of a profile file")
	fl.StringVar(&f.claimedAverage, "claimed-average", "", "`velocity` with its unit: 287m/s")
	fl.StringVar(&f.claimedCode, "claimed-code", "", "`ID` of the code it is claimed under")
	fl.StringVar(&f.claimedDepth, "claimed-depth", "", "`depth` it is averaged over: 30m")
	fl.StringVar(&f.claimedExtension, "claimed-extension", "", "`rule` said to carry it on")
	fl.StringVar(&f.datum, "claimed-datum", "", "`depth` it is averaged from: 1.5m")
	fl.StringVar(&f.foundation, "foundation-depth", "", "`depth` of the foundation: 1.5m")
	fl.StringVar(&f.profile, "profile", "", "`name` of the one that is meant")
	f.read.define(fl)
	fl.StringVar(&f.by, "prepared-by", "", "`name` of the reviewer, for the memo")
	fl.StringVar(&f.date, "date", "", "`date` of the memo")
	codeFilesFlag(c, &f.codeFiles)
	completeCodes(c)
	completeWords(c, "format", "text", "json")
	completeWords(c, "claimed-extension", report.Extensions()...)
	return c
}

// reviewSubmission is the whole of `shearbook review`.
func reviewSubmission(s streams, f reviewFlags, name string) error {
	desk, err := f.desk()
	if err != nil {
		return err
	}
	opt, err := f.options()
	if err != nil {
		return err
	}
	sub, err := review.Open(name, opt)
	if err != nil {
		return hinted{err, review.Hint(err)}
	}
	r := review.Examine(sub, desk)
	if err := f.write(s, r); err != nil {
		return err
	}
	if r.Outcome != review.Agrees {
		return errLook
	}
	return nil
}

// desk reads the flags of the reviewer's side.
func (f reviewFlags) desk() (desk review.Desk, err error) {
	if f.format != "text" && f.format != "json" {
		return desk, misuse("it is text or json", "format %q is not known", f.format)
	}
	own, err := readCodeFiles(f.codeFiles)
	if err != nil {
		return desk, err
	}
	for _, o := range own {
		desk.Own = append(desk.Own, o.code)
	}
	switch {
	case f.code != "":
		desk.Code, err = findCode(f.code, own)
	case len(own) == 1:
		desk.Code = own[0].code
	case len(own) > 1:
		err = misuse("add --code with the id of one of them", "--code-file names %d tables, and a review applies one", len(own))
	}
	if err != nil {
		return desk, err
	}
	desk.Rules, err = f.ruleset()
	return desk, err
}

// ruleset reads --rules.
func (f reviewFlags) ruleset() (review.Ruleset, error) {
	if f.rules == "" {
		return review.Ruleset{}, nil
	}
	data, err := readRegular(f.rules, review.MaxRulesFile)
	if err != nil {
		return review.Ruleset{}, hinted{fmt.Errorf("%s cannot be read: %w", f.rules, profile.FileError(err)), "check the name"}
	}
	return review.ReadRules(f.rules, data)
}

// options reads the flags of what is claimed.
func (f reviewFlags) options() (opt review.Options, err error) {
	if opt.Read, err = f.read.options(); err != nil {
		return opt, err
	}
	c := &opt.Claim
	c.Profile, c.Class, c.Code = f.profile, f.claimedClass, review.CodeID(f.claimedCode)
	if c.Average, err = claimFlag("claimed-average", f.claimedAverage, profile.Velocity, "287m/s"); err != nil {
		return opt, err
	}
	if c.Depth, err = claimFlag("claimed-depth", f.claimedDepth, profile.Length, "30m"); err != nil {
		return opt, err
	}
	if c.Stated.Datum, err = depthFlag("claimed-datum", f.datum); err != nil {
		return opt, err
	}
	if c.Stated.Foundation, err = depthFlag("foundation-depth", f.foundation); err != nil {
		return opt, err
	}
	if c.Stated.Extend = f.claimedExtension; f.claimedExtension != "" {
		if err := checkExtend(f.claimedExtension); err != nil {
			return opt, err
		}
	}
	if c.Code != "" {
		var unknown *siteclass.UnknownError
		if _, err := siteclass.Find(c.Code); errors.As(err, &unknown) && len(f.codeFiles) == 0 {
			return opt, usageError{err, "`shearbook codes` lists them"}
		}
	}
	return opt, nil
}

// claimFlag reads a flag that is a positive number with its unit.
func claimFlag(name, text string, d profile.Dimension, example string) (review.Number, error) {
	if text == "" {
		return review.Number{}, nil
	}
	n, err := review.ParseNumber(text, d, profile.Unit{})
	switch {
	case err != nil:
		return n, misuse("write it with its unit, as --"+name+" "+example, "--%s: %v", name, err)
	case !(n.Value > 0):
		return n, misuse("write it as --"+name+" "+example, "--%s %s is not positive", name, text)
	}
	return n, nil
}

// write prints the review, and writes the memo where --out asks for it.
func (f reviewFlags) write(s streams, r *review.Review) error {
	if f.out != "" {
		if err := f.memo(r); err != nil {
			return err
		}
	}
	if f.format == "json" {
		return review.WriteJSON(s.out, r)
	}
	_, err := io.WriteString(s.out, s.reviewText(r, f.out))
	return err
}

// reviewText lays a review out for the terminal: the outcome first.
func (s streams) reviewText(r *review.Review, out string) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s: %s\n", report.Visible(r.Submission.Name), s.bold(r.Outcome.String()))
	line := func(label, text string) {
		fmt.Fprintf(&b, "  %s%s\n", pad(label, 11), wrap(report.Visible(text), width-13, strings.Repeat(" ", 13)))
	}
	line("submission", r.Submission.Kind.String())
	line("code", codeText(r))
	line("claims", claimsText(r))
	if len(r.Desk.Rules.Changes) > 0 {
		line("rules", rulesText(r.Desk.Rules))
	}
	for _, c := range r.Cases {
		if len(r.Cases) <= maxToldCases {
			line(pad("", 0), caseText(&c))
		}
	}
	b.WriteByte('\n')
	last := review.Off
	for i, found := range r.Findings {
		if i == maxToldFindings {
			fmt.Fprintf(&b, "and %d more findings: --out and --format json hold up to %d\n", len(r.Findings)-i, review.MaxFindings)
			break
		}
		if found.Weight != last {
			fmt.Fprintf(&b, "%s\n", s.bold(found.Weight.String()))
			last = found.Weight
		}
		writeFinding(&b, found)
	}
	if r.More > 0 {
		fmt.Fprintf(&b, "and %d more findings that were not kept\n", r.More)
	}
	if out != "" {
		fmt.Fprintf(&b, "%s\n", report.Visible(out))
	}
	b.WriteString(wrap(report.Caution, width, "") + "\n")
	return b.String()
}

// maxToldCases is how many claims are told one by one on the terminal.
const maxToldCases = 12

// maxToldFindings is how many findings are told on the terminal.
const maxToldFindings = 200

// writeFinding lays one finding out.
func writeFinding(b *strings.Builder, f review.Finding) {
	put := func(indent int, text string) {
		fmt.Fprintf(b, "%s%s\n", strings.Repeat(" ", indent), wrap(report.Visible(text), width-indent-2, strings.Repeat(" ", indent+2)))
	}
	put(2, "- "+f.Where()+": "+f.Text)
	if f.Claimed != "" {
		put(4, "claimed: "+f.Claimed)
	}
	if f.Found != "" {
		put(4, "found: "+f.Found)
	}
	for i, c := range f.Causes {
		put(4, f.CauseLabel(i)+c.Words())
	}
	put(4, "rule "+f.Rule+": "+f.Behind())
}

// codeText says which code is applied.
func codeText(r *review.Review) string {
	if c := r.Desk.Code; c != nil {
		return c.ID + ": " + c.Edition + ", as the reviewer names"
	}
	return "that of each claim; the reviewer names none"
}

func claimsText(r *review.Review) string {
	return fmt.Sprintf("%d on %s", len(r.Cases), profile.Plural(len(r.Submission.Profiles), "profile"))
}

// caseText is one claim beside what was found.
func caseText(c *review.Case) string {
	text := c.Name() + ": claimed " + c.Claimed()
	return text + "; found " + c.Found()
}

func rulesText(set review.Ruleset) string {
	var parts []string
	for _, c := range set.Changes {
		parts = append(parts, c.String())
	}
	by := set.Department
	if by == "" {
		by = set.File
	}
	return "of " + by + ": " + strings.Join(parts, "; ")
}

// listRules prints every rule.
func listRules(s streams, f reviewFlags) error {
	if f.format != "text" && f.format != "json" {
		return misuse("it is text or json", "format %q is not known", f.format)
	}
	set, err := f.ruleset()
	if err != nil {
		return err
	}
	if f.format == "json" {
		return review.WriteRules(s.out, set)
	}
	var b strings.Builder
	for _, rule := range set.Rules() {
		fmt.Fprintf(&b, "%s: %s\n", s.bold(rule.ID), rule.Weight)
		put := func(text string) {
			fmt.Fprintf(&b, "    %s\n", wrap(report.Visible(text), width-4, "    "))
		}
		put(rule.Summary)
		put("source: " + rule.Behind())
		for _, l := range rule.Limits {
			put("limit: " + l.String() + ": " + l.Meaning)
		}
	}
	_, err = io.WriteString(s.out, b.String())
	return err
}

// memo writes the memo's folder.
func (f reviewFlags) memo(r *review.Review) error {
	files, err := review.Files(r, review.Memo{PreparedBy: f.by, Date: f.date, Version: versionText()})
	if err != nil {
		return err
	}
	if err := folder.Write(f.out, files); err != nil {
		return hinted{err, "choose another folder with --out"}
	}
	return nil
}
