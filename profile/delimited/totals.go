package delimited

import (
	"math"
	"slices"
	"strings"

	"shearbook/profile"
)

// Below a table of layers people write totals and averages. Read as a layer,
// such a row makes a survey of 20 m one of 40 m, so it is a fault.

// totalWords are labels of such rows, in the form of plain.
var totalWords = []string{
	"total", "totals", "grand total", "sub total", "subtotal", "sum", "σ", "∑", "average", "averages", "avg", "mean", "median",
	"weighted average", "weighted mean", "harmonic mean", "arithmetic mean", "time average", "time averaged", "overall",
	"total thickness", "total depth", "sum of thickness", "sum of thicknesses", "average vs", "mean vs", "vs average", "vs mean",
	"average velocity", "mean velocity", "vs30", "vs 30", "vs30 average", "average vs30",
	"summe", "gesamt", "mittel", "mittelwert", "durchschnitt", "totale", "somma", "media", "moyenne", "somme", "promedio", "suma",
}

// labels reports whether a cell is the label of a row of totals. Of a
// description of soil that has to be the whole text, elsewhere the first word is
// enough: "Average (0-30 m)".
func labels(text []byte, soil bool) bool {
	if len(text) < 2 || len(text) > longestHeading || strings.IndexByte("tsamvwhogdpTSAMVWHOGDP(\xce\xcf\xe2", text[0]) < 0 {
		return false // as nearly every cell, and soon
	}
	name := plain(string(text))
	if name == "" { // a sign alone: ∑
		return string(text) == "∑"
	}
	if slices.Contains(totalWords, name) {
		return true
	}
	base, _ := brackets(string(text))
	if name = plain(base); slices.Contains(totalWords, name) {
		return true
	}
	first, _, _ := strings.Cut(name, " ")
	return !soil && slices.Contains(totalWords, first)
}

// TotalsLabel reports whether the cell of a column that is not read says that
// its row holds totals or averages.
func TotalsLabel(cell []byte) bool { return labels(cell, false) }

const (
	hintTotals = "remove the row of totals"
	hintLayer  = "remove the row of totals, or give the layers tops and bottoms if it is a layer"
)

// totals tells of a row of totals or averages, and reports whether the present
// row is one.
func (r *reader) totals() bool {
	for i := range r.scan.cells {
		q := profile.Unknown
		if i < len(r.columns.list) {
			q = r.columns.list[i].quantity
		}
		text := r.scan.cells[i].text
		if q == profile.ProfileName || q == profile.Soil && string(text) == r.table.soil || !labels(text, q == profile.Soil) || (q == profile.Unknown || q == profile.Soil) && r.fits() {
			continue
		}
		r.fault(r.scan.place(i), hintTotals, "the row is labelled %s: it is no layer", quote(text))
		return true
	}
	if column, ok := r.totalled(); ok {
		r.fault(column, hintTotals, "this cell adds up those above it, or says that its row does: the row is no layer")
		return true
	}
	return false
}

// fits reports whether the present row states the top of a layer: then a word
// in its description, or in a column that is not read, says nothing, for the top
// must join the layer above.
func (r *reader) fits() bool {
	return r.has(profile.Top) && len(r.scan.cell(r.columns.index[profile.Top])) > 0
}

// totalled finds the cell of the present row whose formula adds up others.
func (r *reader) totalled() (spot, bool) {
	if r.scan.grid == nil || len(r.scan.grid.totals) == 0 || len(r.scan.cells) == 0 {
		return spot{}, false
	}
	row := r.scan.place(0).line
	column, ok := r.scan.grid.totals[int32(row)]
	return spot{row, int(column)}, ok
}

// namedTotals tells of a profile of one row whose name is that of a total: in
// a table with a column of names that is where the label stands.
func (r *reader) namedTotals(s *stack) {
	if s.faulty || s.last-s.first != 1 || !r.has(profile.ProfileName) || r.has(profile.Top) || !labels([]byte(s.name), false) {
		return
	}
	s.faulty = true
	r.fault(spot{r.table.rows[s.first].Line, r.columnOf(profile.ProfileName).column}, hintTotals, "the row is labelled %s: it is no layer", quote(s.name))
}

// summed tells of a last thickness that is the sum of those above it, where
// its Vs lies among theirs, as an average does, or is their sum. Of a table
// that gives thicknesses alone nothing else tells a total from a layer. Below a
// single layer it may well be another of the same thickness.
func (r *reader) summed(s *stack) {
	if s.faulty || r.has(profile.Top) || r.has(profile.Bottom) || !r.has(profile.Thickness) || s.last-s.first < 3 {
		return
	}
	layers := r.table.layers[s.first:s.last]
	last, above := &layers[len(layers)-1], layers[:len(layers)-1]
	depth := above[len(above)-1].Bottom
	if last.HalfSpace() || math.Abs(last.Thickness()-depth) > profile.Joint*float64(len(layers)) {
		return
	}
	low, high, sum := math.Inf(1), 0.0, 0.0
	for i := range above {
		low, high, sum = min(low, above[i].Vs), max(high, above[i].Vs), sum+above[i].Vs
	}
	const rounding = 0.5 // m/s, of an average
	if last.Vs < low-rounding || last.Vs > high+rounding && math.Abs(last.Vs-sum) > rounding {
		return
	}
	s.faulty = true
	r.fault(spot{int(last.Line), int(last.Column)}, hintLayer, "the last thickness, %s, is the sum of those above it, and its Vs lies among theirs: it looks like a row of totals",
		r.depth(profile.Thickness, depth))
}
