package siteclass

import (
	"errors"
	"fmt"
	"math"

	"shearbook/profile"
)

// Site is a profile with what the code must know beside the velocities.
type Site struct {
	Profile         *profile.Profile
	Layers          []profile.Layer  // those to average: the profile's, or an extension of them; nil for the profile's
	Datum           profile.Optional // m below ground level from which to average; where not known, ground level
	FoundationDepth profile.Optional // m below ground level of the underside of the foundation
	Extended        bool             // Layers go on below the profile
	Ground          Ground
	Route           string         // name of the code's route to go; "" for the code's own priority
	Blow            Blow           // kind of the layers' blow counts; where not stated, what their heading in the file says
	Notes           []profile.Note // about Layers, carried into the decision
}

// Ground is what is known of a site beside its velocities. What is not
// known is listed by every decision as not assessed.
type Ground struct {
	Liquefiable Answer // liquefiable soil
	Sensitive   Answer // quick or highly sensitive clay
	Collapsible Answer // collapsible, weakly cemented soil

	Peat           Deposit // peat or highly organic clay
	HighPlasticity Deposit // clay of very high plasticity; PI as stated
	SoftClay       Deposit // soft clay; PI, water content and strength as stated
	ThickClay      Deposit // soft to medium stiff clay
}

// Answer is yes, no, or not known.
type Answer uint8

// The answers. The zero value is NotKnown.
const (
	NotKnown Answer = iota
	No
	Yes
)

// Deposit is the total thickness of one kind of ground, with the properties
// that a code may ask for.
type Deposit struct {
	Thickness    profile.Optional // m, ≥ 0
	PI           profile.Optional // %
	WaterContent profile.Optional // %
	Su           profile.Optional // kPa
}

// layers returns the layers to average.
func (s *Site) layers() []profile.Layer {
	if s.Layers == nil && s.Profile != nil {
		return s.Profile.Layers
	}
	return s.Layers
}

// timed reports whether the layers state velocities. Those of a profile
// without velocities are 0 throughout.
func (s *Site) timed() bool {
	layers := s.layers()
	for i := range layers {
		if layers[i].Vs != 0 {
			return true
		}
	}
	return false
}

// estimated reports whether at least half of the velocities that a code
// averages, by thickness, are correlated from other tests. What was added below
// the profile to reach the code's depth does not count.
func (s *Site) estimated(c *Code) bool {
	if s.Profile == nil {
		return false
	}
	from, _ := c.DatumOf(*s)
	to := from + c.Depth
	if c.Depth == 0 {
		to = math.MaxFloat64
	}
	var all, correlated float64
	for i := range s.Profile.Layers {
		l := &s.Profile.Layers[i]
		d := min(l.Bottom, to) - max(l.Top, from)
		if !(d > 0) || l.Vs == 0 {
			continue
		}
		all += d
		if s.Profile.BasisOf(i) == profile.Correlated {
			correlated += d
		}
	}
	return correlated > 0 && 2*correlated >= all
}

// tested reports whether any of the layers states a blow count, a strength or
// refusal.
func (s *Site) tested() bool {
	layers := s.layers()
	for i := range layers {
		l := &layers[i]
		if l.Refusal || l.Given&(profile.GivenN|profile.GivenSu) != 0 {
			return true
		}
	}
	return false
}

// check returns an error where the site cannot be decided on: no layers, or a
// depth or property that is not a number from 0 up.
func (s *Site) check() error {
	if len(s.layers()) == 0 {
		return errors.New("the site has no layers")
	}
	if err := known("datum", s.Datum); err != nil {
		return err
	}
	if err := known("foundation depth", s.FoundationDepth); err != nil {
		return err
	}
	if s.Ground == (Ground{}) {
		return nil
	}
	for f := Peat; f <= ThickClay; f++ {
		for p := Thickness; p <= Strength; p++ {
			if err := known(p.String(), s.Ground.deposit(f).property(p)); err != nil {
				return fmt.Errorf("%s: %w", f, err)
			}
		}
	}
	return nil
}

// known returns an error where v is known and not a number from 0 up.
func known(name string, v profile.Optional) error {
	if v.Known && !(v.Value >= 0 && !math.IsInf(v.Value, 1)) {
		return fmt.Errorf("%s of %v is not a number from 0 up", name, v.Value)
	}
	return nil
}
