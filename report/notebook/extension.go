package notebook

import (
	"errors"
	"strings"

	"github.com/yuin/goldmark/ast"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30"
	"shearbook/vs30/extend"
)

var extendWorking = Working{
	Summary: "What a profile that ends above the averaging depth may average: every published relation side by side, the chosen one marked, the class under each.",
	Keys: []Key{ofKey,
		{"by", "the chosen relation, as boore-2004; the front matter's `extend` if left out. It holds for the profile in the whole notebook"},
		{"depth", "the averaging depth, as 30 m; the code's own if left out"},
	},
	Example:  "of: L1\ndepth: 60 m\n",
	evaluate: evaluateExtend,
}

func evaluateExtend(ev *evaluation, c call) []report.Block {
	m := ev.keys(c)
	sites := ev.of(&m)
	m.word("by", report.Extensions()) // taken by choices before anything was evaluated
	depth := m.value("depth", profile.Length, "30 m")
	m.rest()
	return ev.eachMeasured(sites, func(s *site) []report.Block {
		thickness := ev.averagingDepth(s, ev.code())
		if depth.Known {
			thickness = depth.Value
		}
		return ev.extensionBlocks(s, thickness)
	})
}

// choices takes the relations that extend workings choose before anything is
// evaluated, so that it does not matter where they stand.
func (ev *evaluation) choices(root ast.Node, source []byte) {
	_ = ast.Walk(root, func(n ast.Node, entering bool) (ast.WalkStatus, error) { // the walker returns no error
		fence, ok := n.(*ast.FencedCodeBlock)
		if !entering || !ok || fence.Info == nil || strings.TrimSpace(string(fence.Info.Segment.Value(source))) != "extend" {
			return ast.WalkContinue, nil
		}
		var body strings.Builder
		for i := range fence.Lines().Len() {
			segment := fence.Lines().At(i)
			body.Write(segment.Value(source))
		}
		// What is wrong with it is told when it is evaluated.
		m := parseMapping(&faultList{}, "working extend", body.String(), 0)
		by := m.word("by", report.Extensions())
		if by == "" {
			return ast.WalkContinue, nil
		}
		for _, s := range ev.of(&m) {
			s.extend = by
		}
		return ast.WalkContinue, nil
	})
}

// extensionBlocks is the relations side by side for one profile.
func (ev *evaluation) extensionBlocks(s *site, thickness float64) []report.Block {
	end := s.profile.Layers[len(s.profile.Layers)-1].Bottom
	if end >= s.datum+thickness-vs30.Touching {
		return one(para("Profile " + s.profile.Name + " reaches the averaging depth of " + ev.bothLengths(thickness) + " " + ev.below(s.datum) + "; nothing is extended."))
	}
	t := &report.Table{
		Caption: words("Averages of profile " + s.profile.Name + " over " + ev.bothLengths(thickness) + " " + ev.below(s.datum) +
			", of which it reaches " + ev.bothLengths(end)),
		Columns: []report.TableColumn{column("Relation", report.AlignLeft), column("Average ("+ev.system.velocity().Name+")", report.AlignDecimal),
			column("σ of ln", report.AlignDecimal), column("Class", report.AlignLeft), wide("Region, or why it does not hold"), column("Standing", report.AlignLeft)},
	}
	for _, r := range extend.All() {
		t.Rows = append(t.Rows, ev.relationRow(s, r, thickness))
	}
	t.Notes = append(t.Notes, words("An average that was not measured down to its depth is an estimate. σ is the scatter of the relation alone; the error of the survey comes on top. “–”: the source gives none."))
	if s.extend == "" {
		t.Notes = append(t.Notes, words("No relation is chosen."))
	}
	return one(t)
}

// relationRow is one relation.
func (ev *evaluation) relationRow(s *site, r *extend.Relation, thickness float64) report.TableRow {
	standing := string(r.Standing)
	e, err := r.Estimate(s.profile.Layers, s.datum, thickness)
	var refused *extend.Refusal
	if errors.As(err, &refused) {
		return row(r.Name, "–", "–", "–", string(refused.Reason)+": "+refused.Text, standing)
	}
	if err != nil {
		return row(r.Name, "–", "–", "–", err.Error(), standing)
	}
	sigma := "–"
	if e.SigmaLn > 0 {
		sigma = fixed(e.SigmaLn, 3)
	}
	out := row(r.Name, fixed(e.Velocity/ev.system.velocity().Factor, 1), sigma, ev.classBy(s, r.ID), r.Region, standing)
	if r.ID == s.extend {
		out.Marked = true
		out.Cells[0] = append(out.Cells[0], ev.refs(append([]profile.Note{e.Note}, e.Doubts...))...)
	}
	return out
}

// classBy is the class under the notebook's code with another relation.
func (ev *evaluation) classBy(s *site, relation string) string {
	code := ev.code()
	if code == nil {
		return "–"
	}
	facts := ev.facts(s)
	facts.Extend = relation
	d, err := report.Classify(s.profile, code, facts)
	if err != nil {
		return "–"
	}
	return d.Class
}
