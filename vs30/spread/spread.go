// Package spread says how sure a time-averaged velocity is: it carries the
// errors of layers and boundaries into the average, by formula or by drawing
// many profiles, gives the chance of each class, says what would flip the
// class, and puts several profiles of one site together.
//
// Velocities are taken as lognormal (common practice; Toro 1995): a median in
// m/s and a standard deviation of ln V, the sigma of this package. For small
// sigmas it is the relative error; COV = √(exp(σ²) − 1).
//
// No sigma is assumed. One comes from the profile, from the user, or, where he
// takes up the offer, from Published; a missing one is an error.
//
// Depths are in m below ground level, velocities in m/s. The functions assume
// profiles that profile.Validate accepts, and change none that they are given.
// The same input gives the same result, however many cores there are.
package spread

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"shearbook/profile"
	"shearbook/vs30"
)

// Limits of what is looked at.
const (
	MaxSigma  = 2.0  // of ln V: a factor of 7.4 up and down
	MaxLayers = 5000 // inside the averaging depth
)

// Model is a profile with what is not sure about it.
type Model struct {
	Layers    []profile.Layer
	From      float64 // m below ground level: the datum
	Thickness float64 // m, > 0: the averaging depth

	// Sigmas are the standard deviations of ln Vs, one for each layer, from 0
	// to MaxSigma. Nil takes those that the layers state.
	Sigmas []float64

	// Boundaries are the standard errors in m of the depth of the bottom of
	// each layer, one for each layer; nil where the boundaries are sure. Those
	// that do not lie inside the averaging depth do not matter.
	Boundaries []float64

	// Correlation is that between the errors of the layers. A layer errs as a
	// whole: to split one is to say that its halves err apart, unless they are
	// correlated.
	Correlation Correlation

	// Layering, where it is not zero, replaces the boundaries of the profile by
	// random ones in every profile drawn. It needs Boundaries to be nil, and
	// has no closed form.
	Layering Layering
}

// part is the part of a layer that lies inside the averaging depth.
type part struct {
	layer       int
	top, bottom float64 // m
	time        float64 // s
	above       float64 // s/m, slowness at its top
	below       float64 // s/m, slowness at its bottom
	sigma       float64 // of ln Vs
	rho         float64 // correlation with the part above; 0 for the first
	boundary    float64 // m, standard error of its bottom; 0 where that is the averaging depth
}

// middle returns the depth in m of the middle of the part.
func (p *part) middle() float64 { return p.top + (p.bottom-p.top)/2 }

// parts returns the parts of the layers inside the averaging depth.
func (m *Model) parts() ([]part, error) {
	if err := m.check(); err != nil {
		return nil, err
	}
	w, err := vs30.Work(m.Layers, m.From, m.Thickness)
	if err != nil {
		return nil, err
	}
	if len(w.Rows) > MaxLayers {
		return nil, fmt.Errorf("there are %d layers inside the averaging depth, more than %d: join layers first", len(w.Rows), MaxLayers)
	}
	sigmas, err := m.sigmas(w.Rows)
	if err != nil {
		return nil, err
	}
	parts := make([]part, len(w.Rows))
	for i, row := range w.Rows {
		l := &m.Layers[row.Layer]
		parts[i] = part{layer: row.Layer, top: row.Top, bottom: row.Bottom, time: row.Time,
			above: 1 / l.VsAt(row.Top), below: 1 / l.VsAt(row.Bottom), sigma: sigmas[i]}
		if i > 0 {
			parts[i].rho = m.Correlation.between(parts[i-1].middle(), parts[i].middle())
		}
		if m.Boundaries != nil && i < len(w.Rows)-1 {
			parts[i].boundary = m.Boundaries[row.Layer]
		}
	}
	return parts, nil
}

// check returns an error where the numbers of the model are none.
func (m *Model) check() error {
	switch {
	case len(m.Layers) == 0:
		return errors.New("the profile has no layers")
	case !(m.From >= 0) || math.IsInf(m.From, 0):
		return fmt.Errorf("a datum of %v m is not a depth", m.From)
	case !(m.Thickness > 0) || math.IsInf(m.Thickness, 0):
		return fmt.Errorf("an averaging depth of %v m is not one", m.Thickness)
	case m.Sigmas != nil && len(m.Sigmas) != len(m.Layers):
		return fmt.Errorf("%d sigmas for %d layers: give one for each", len(m.Sigmas), len(m.Layers))
	case m.Boundaries != nil && len(m.Boundaries) != len(m.Layers):
		return fmt.Errorf("%d boundary errors for %d layers: give one for each", len(m.Boundaries), len(m.Layers))
	}
	for i, b := range m.Boundaries {
		if !(b >= 0 && b <= profile.MaxDepth) {
			return fmt.Errorf("the boundary error %v m of layer %d is not a length", b, i+1)
		}
	}
	return m.Correlation.check()
}

// sigmas returns the sigma of the layer of each row.
func (m *Model) sigmas(rows []vs30.Row) ([]float64, error) {
	sigmas := make([]float64, len(rows))
	missing := &MissingError{Layers: len(rows)}
	for i, row := range rows {
		l := &m.Layers[row.Layer]
		switch {
		case m.Sigmas != nil:
			sigmas[i] = m.Sigmas[row.Layer]
		case l.Has(profile.GivenSigma):
			sigmas[i] = l.SigmaLnVs
		default:
			missing.Missing = append(missing.Missing, row.Layer)
			continue
		}
		if err := checkSigma(sigmas[i]); err != nil {
			return nil, fmt.Errorf("layer %d: %w", row.Layer+1, err)
		}
	}
	if missing.Missing != nil {
		return nil, missing
	}
	return sigmas, nil
}

// checkSigma returns an error where s is no sigma.
func checkSigma(s float64) error {
	if !(s >= 0) {
		return fmt.Errorf("%v is not a standard deviation", s)
	}
	if s > MaxSigma {
		return fmt.Errorf("a sigma of ln Vs of %.4g is above %g, a factor of %.1f up and down: give that of the natural logarithm, not of Vs",
			s, MaxSigma, math.Exp(MaxSigma))
	}
	return nil
}

// MissingError reports layers inside the averaging depth whose sigma nobody
// states.
type MissingError struct {
	Missing []int // indices of the layers
	Layers  int   // how many there are inside the averaging depth
}

// Error names the layers.
func (e *MissingError) Error() string {
	if len(e.Missing) == e.Layers {
		return "the profile states no sigma of ln Vs: give one, or take a published range for the method"
	}
	const most = 5
	var names []string
	for _, i := range e.Missing[:min(most, len(e.Missing))] {
		names = append(names, fmt.Sprint(i+1))
	}
	text := strings.Join(names, ", ")
	if more := len(e.Missing) - most; more > 0 {
		text += fmt.Sprintf(" and %d more", more)
	}
	return fmt.Sprintf("no sigma of ln Vs is stated for layer %s: give one for every layer", text)
}

// Total returns the sigma of a product of independent lognormal factors, such
// as the error of a measurement, that of an extension, and what the ground
// varies over the site:
//
//	σ = √(σ₁² + σ₂² + …)
func Total(sigmas ...float64) float64 {
	square := 0.0
	for _, s := range sigmas {
		square += s * s
	}
	return math.Sqrt(square)
}
