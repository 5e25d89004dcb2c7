package spread

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"shearbook/profile"
	"shearbook/vs30"
)

// Line is one of several profiles of a site.
type Line struct {
	Name    string
	Layers  []profile.Layer
	Basis   profile.Basis
	SigmaLn float64 // of ln of its average, as measured; 0 where not known
}

// Site is several profiles of one site put together.
type Site struct {
	From      float64 // m below ground level: the datum
	Thickness float64 // m

	Averages []float64 // m/s, of the lines in their order

	// Geometric is the geometric mean of the averages, exp of the mean of ln V:
	// the median of a lognormal velocity.
	Geometric float64 // m/s

	// Arithmetic is the plain mean of the averages, the average of averages.
	Arithmetic float64 // m/s

	// OfMeanSlowness is the average of the profile whose slowness at every
	// depth is the mean of that of the lines. As travel times add, it is the
	// harmonic mean of the averages, and never above the other two.
	OfMeanSlowness float64 // m/s

	// SigmaLn is the sample standard deviation of ln V, with n−1: what one line
	// differs from another. 0 for one line.
	SigmaLn float64

	// StandardError is that of the mean of ln V: SigmaLn/√n. 0 for one line.
	StandardError float64

	// Within is the part of SigmaLn that the errors of measurement explain, the
	// root mean square of the sigmas of the lines; Between is what is left for
	// differences of the ground, √(SigmaLn² − Within²), 0 where nothing is. Both
	// are 0 unless all lines state a sigma.
	Within, Between float64
}

// Combine puts the averages over thickness m below depth from of several lines
// together. It fails where one of them has none, and names it.
func Combine(lines []Line, from, thickness float64) (Site, error) {
	s := Site{From: from, Thickness: thickness}
	if len(lines) == 0 {
		return s, errors.New("there are no profiles to put together")
	}
	var ln, plain, slow float64
	for _, l := range lines {
		v, err := vs30.Average(l.Layers, from, thickness)
		if err != nil {
			return s, fmt.Errorf("%s: %w", l.Name, err)
		}
		if err := checkSigma(l.SigmaLn); err != nil {
			return s, fmt.Errorf("%s: %w", l.Name, err)
		}
		s.Averages = append(s.Averages, v)
		ln += math.Log(v)
		plain += v
		slow += 1 / v
	}
	n := float64(len(lines))
	s.Geometric, s.Arithmetic, s.OfMeanSlowness = math.Exp(ln/n), plain/n, n/slow
	s.SigmaLn = deviation(s.Averages, s.Geometric)
	s.StandardError = s.SigmaLn / math.Sqrt(n)
	s.divide(lines)
	return s, nil
}

// deviation returns the sample standard deviation of ln v about ln mean, 0 for
// one v.
func deviation(v []float64, mean float64) float64 {
	if len(v) < 2 {
		return 0
	}
	square := 0.0
	for _, x := range v {
		d := math.Log(x / mean)
		square += d * d
	}
	return math.Sqrt(square / float64(len(v)-1))
}

// divide divides the scatter between the measurements and the ground.
func (s *Site) divide(lines []Line) {
	square := 0.0
	for _, l := range lines {
		if l.SigmaLn == 0 {
			return
		}
		square += l.SigmaLn * l.SigmaLn / float64(len(lines))
	}
	s.Within = math.Sqrt(square)
	if len(lines) > 1 {
		s.Between = math.Sqrt(max(0, s.SigmaLn*s.SigmaLn-square))
	}
}

// Interval returns the velocities in m/s between which the site's own mean lies
// with a chance of level, 0 < level < 1:
//
//	exp(mean of ln V ± t·SigmaLn/√n)
//
// where t is the quantile (1+level)/2 of Student's distribution with n−1
// degrees of freedom, which is large for few lines. It returns false for one
// line, whose scatter is not known.
func (s *Site) Interval(level float64) (low, high float64, ok bool) {
	return s.around(level, 1/math.Sqrt(float64(len(s.Averages))))
}

// Another returns the velocities in m/s between which the average of one more
// line lies with a chance of level, as Interval does, with √(1 + 1/n) for 1/√n.
func (s *Site) Another(level float64) (low, high float64, ok bool) {
	return s.around(level, math.Sqrt(1+1/float64(len(s.Averages))))
}

func (s *Site) around(level, share float64) (low, high float64, ok bool) {
	n := len(s.Averages)
	if n < 2 || !(level > 0 && level < 1) {
		return 0, 0, false
	}
	d := StudentT(n-1, level) * s.SigmaLn * share
	return s.Geometric * math.Exp(-d), s.Geometric * math.Exp(d), true
}

// StudentT returns the half-width, in standard errors, of the interval that
// holds the part level of Student's distribution with freedom ≥ 1 degrees of
// freedom: its quantile (1+level)/2.
func StudentT(freedom int, level float64) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(freedom)}.Quantile((1 + level) / 2)
}

// Group is the lines of a site that were measured in one way.
type Group struct {
	Basis profile.Basis
	Name  string // of the basis, in words for a heading
	Lines []int  // indices of the lines
	Site  Site   // of these lines alone
}

// groupNames are the headings of the bases.
var groupNames = [...]string{
	profile.BasisNotStated: "basis not stated",
	profile.Measured:       "measured in the ground",
	profile.Inverted:       "inverted from measurements at the surface",
	profile.Correlated:     "correlated from other tests",
}

// Groups returns the lines by their basis: those measured in the ground (holes,
// cones), those inverted (surface waves, refraction), those correlated, those
// that state none. It fails as Combine does.
func Groups(lines []Line, from, thickness float64) ([]Group, error) {
	var groups []Group
	for _, b := range []profile.Basis{profile.Measured, profile.Inverted, profile.Correlated, profile.BasisNotStated} {
		g := Group{Basis: b, Name: groupNames[b]}
		var own []Line
		for i, l := range lines {
			if l.Basis == b {
				g.Lines, own = append(g.Lines, i), append(own, l)
			}
		}
		if own == nil {
			continue
		}
		var err error
		if g.Site, err = Combine(own, from, thickness); err != nil {
			return nil, err
		}
		groups = append(groups, g)
	}
	return groups, nil
}
