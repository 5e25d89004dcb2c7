package spread

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/stat/distuv"

	"shearbook/profile"
)

// Significance is the chance below which a difference is taken for more than
// the sigmas allow.
const Significance = 0.05

// Disagreement is how the differences between the lines of a site compare with
// their sigmas.
type Disagreement struct {
	// Why the lines were not judged: there is one, or not all of them state a
	// sigma. "" where they were.
	Why string

	// ChiSquare is Σ (ln Vₖ − m)²/σₖ² about the mean m of ln V weighted by
	// 1/σ², which for lines that differ by their errors alone follows the
	// chi-square distribution with Freedom = n−1 degrees of freedom; Chance is
	// that of as much or more.
	ChiSquare float64
	Freedom   int
	Chance    float64

	Beyond           bool    // Chance < Significance: the sigmas do not allow for it
	Slowest, Fastest int     // indices of the lines with the lowest and the highest average
	Ratio            float64 // of their averages, ≥ 1

	Partings []Parting    // where the velocities themselves differ, from the top down
	Note     profile.Note // says so where Beyond; zero where not
}

// Parting is a range of depth over which the velocities of the lines differ by
// more than their sigmas allow.
type Parting struct {
	Top, Bottom      float64 // m below ground level
	Slowest, Fastest int     // indices of the lines where they differ most
	Ratio            float64 // of their velocities there, > 1
}

// Disagree compares the averages of the lines over thickness m below depth
// from, and their velocities at every depth, with the sigmas. At a depth a line
// has the sigma that its layer states, or else that of its average. That one is
// mostly the smaller, so that a parting shows where to look and proves nothing;
// Beyond rests on the averages alone. It fails as Combine does.
func Disagree(lines []Line, from, thickness float64) (Disagreement, error) {
	s, err := Combine(lines, from, thickness)
	if err != nil {
		return Disagreement{}, err
	}
	var d Disagreement
	d.Slowest, d.Fastest = extremes(s.Averages)
	d.Ratio = s.Averages[d.Fastest] / s.Averages[d.Slowest]
	if d.Why = notJudged(lines); d.Why != "" {
		return d, nil
	}
	sigmas := make([]float64, len(lines))
	for i := range lines {
		sigmas[i] = lines[i].SigmaLn
	}
	d.ChiSquare, d.Freedom = chiSquare(s.Averages, sigmas)
	d.Chance = survival(d.ChiSquare, d.Freedom)
	d.Beyond = d.Chance < Significance
	d.Partings = partings(lines, from, from+thickness)
	if d.Beyond {
		d.Note = d.note(lines)
	}
	return d, nil
}

// notJudged returns why the lines cannot be judged, "" where they can.
func notJudged(lines []Line) string {
	if len(lines) < 2 {
		return "there is one profile"
	}
	var without []string
	for _, l := range lines {
		if l.SigmaLn == 0 {
			without = append(without, l.Name)
		}
	}
	if without == nil {
		return ""
	}
	return "no sigma is stated for " + strings.Join(without, ", ")
}

// extremes returns the indices of the smallest and the largest number.
func extremes(v []float64) (low, high int) {
	for i := range v {
		if v[i] < v[low] {
			low = i
		}
		if v[i] > v[high] {
			high = i
		}
	}
	return low, high
}

// chiSquare returns the sum of squares of ln v about their weighted mean, in
// sigmas, and its degrees of freedom. Velocities of 0 do not count.
func chiSquare(v, sigmas []float64) (sum float64, freedom int) {
	var weight, mean float64
	for i := range v {
		if v[i] > 0 {
			w := 1 / (sigmas[i] * sigmas[i])
			weight += w
			mean += w * math.Log(v[i])
			freedom++
		}
	}
	mean /= weight
	for i := range v {
		if v[i] > 0 {
			x := (math.Log(v[i]) - mean) / sigmas[i]
			sum += x * x
		}
	}
	return sum, freedom - 1
}

// survival returns the chance that chi-square is sum or more.
func survival(sum float64, freedom int) float64 {
	if freedom < 1 {
		return 1
	}
	return distuv.ChiSquared{K: float64(freedom)}.Survival(sum)
}

// partings returns the ranges of depth over which the velocities differ by
// more than their sigmas allow.
func partings(lines []Line, from, to float64) []Parting {
	var list []Parting
	const step = 0.5 // m, of the cuts through gradient layers
	sigmas := make([]float64, len(lines))
	eachSlice(lines, from, to, step, func(top, bottom float64, v []float64, layers []*profile.Layer) {
		for i, l := range layers {
			sigmas[i] = lines[i].SigmaLn
			if l != nil && l.Has(profile.GivenSigma) {
				sigmas[i] = l.SigmaLnVs
			}
		}
		if survival(chiSquare(v, sigmas)) >= Significance {
			return
		}
		p := Parting{Top: top, Bottom: bottom}
		p.Slowest, p.Fastest = extremesKnown(v)
		p.Ratio = v[p.Fastest] / v[p.Slowest]
		if n := len(list); n > 0 && list[n-1].Bottom == top {
			last := &list[n-1]
			last.Bottom = bottom
			if p.Ratio > last.Ratio {
				last.Slowest, last.Fastest, last.Ratio = p.Slowest, p.Fastest, p.Ratio
			}
			return
		}
		list = append(list, p)
	})
	return list
}

// extremesKnown is extremes for the velocities that are not 0, of which there
// is one.
func extremesKnown(v []float64) (low, high int) {
	low, high = -1, -1
	for i := range v {
		if v[i] > 0 && (low < 0 || v[i] < v[low]) {
			low = i
		}
		if v[i] > 0 && (high < 0 || v[i] > v[high]) {
			high = i
		}
	}
	return low, high
}

// note says that the lines differ by more than their sigmas allow, and where.
func (d *Disagreement) note(lines []Line) profile.Note {
	text := fmt.Sprintf("the averages of the profiles differ by more than their sigmas allow: %s is a factor of %.3g faster than %s, "+
		"and a difference like this one has a chance of %.2g (chi-square %.3g with n−1 = %d)",
		lines[d.Fastest].Name, d.Ratio, lines[d.Slowest].Name, d.Chance, d.ChiSquare, d.Freedom)
	const most = 3
	var where []string
	for _, p := range d.Partings[:min(most, len(d.Partings))] {
		where = append(where, fmt.Sprintf("from %.4g to %.4g m by up to a factor of %.3g", p.Top, p.Bottom, p.Ratio))
	}
	switch more := len(d.Partings) - most; {
	case where == nil:
		text += "; no range of depth stands out"
	case more > 0:
		text += "; the velocities part " + strings.Join(where, ", ") + fmt.Sprintf(", and over %d more ranges", more)
	default:
		text += "; the velocities part " + strings.Join(where, ", ")
	}
	return profile.Note{ID: "profiles-disagree", Text: text}
}
