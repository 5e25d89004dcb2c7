package las

import (
	"math"
	"slices"

	"shearbook/profile"
)

// layers makes the layers and the profile.
func (r *reader) layers() bool {
	cells := r.cells()
	layers := cells
	if r.opt.Step > 0 || len(r.opt.Bounds) > 0 {
		bounds, ok := r.bounds(cells[len(cells)-1].Bottom)
		if !ok {
			return false
		}
		layers = averaged(cells, bounds)
		r.averagedNote(cells, layers)
	} else {
		r.note("samples-as-layers", r.samples[0].at, "%d samples became as many layers, with bounds halfway between them", len(cells))
	}
	return r.assemble(layers)
}

// cells are the layers that the samples stand for: each reaches halfway to
// its neighbours, the first up to ground level, the last as far down as up.
func (r *reader) cells() []profile.Layer {
	n := len(r.samples)
	cells := make([]profile.Layer, n)
	top := 0.0
	for i := range r.samples {
		s := &r.samples[i]
		bottom := s.z + r.halfBelow(i)
		cells[i] = profile.Layer{Top: top, Bottom: bottom, Vs: s.vs, Line: s.at.line, Column: s.at.column}
		if !math.IsNaN(s.vp) {
			cells[i].Vp = s.vp
			cells[i].Given |= profile.GivenVp
		}
		if !math.IsNaN(s.rho) {
			cells[i].Density = s.rho
			cells[i].Given |= profile.GivenDensity
		}
		top = bottom
	}
	return cells
}

// halfBelow is how far sample i reaches down, in m.
func (r *reader) halfBelow(i int) float64 {
	if i+1 < len(r.samples) {
		return (r.samples[i+1].z - r.samples[i].z) / 2
	}
	return (r.samples[i].z - r.samples[i-1].z) / 2
}

// bounds are the lower bounds of the layers to average onto, down to the end
// of the log.
func (r *reader) bounds(end float64) ([]float64, bool) {
	var bounds []float64
	if step := r.opt.Step; step > 0 {
		if end/step > MaxRows {
			return nil, r.stop(spot{}, "choose a larger one", "a step of %v m makes more than %d layers", step, MaxRows)
		}
		for i := 1.0; i*step < end-profile.Joint; i++ {
			bounds = append(bounds, i*step)
		}
	}
	for _, z := range r.opt.Bounds {
		if z < end-profile.Joint {
			bounds = append(bounds, z)
		}
	}
	return append(bounds, end), true
}

// averaged is the layers between bounds, each with the travel time and the
// mass of the cells inside it.
func averaged(cells []profile.Layer, bounds []float64) []profile.Layer {
	layers := make([]profile.Layer, 0, len(bounds))
	top, first := 0.0, 0
	for _, bottom := range bounds {
		for first < len(cells)-1 && cells[first].Bottom <= top {
			first++
		}
		layers = append(layers, average(cells[first:], top, bottom))
		top = bottom
	}
	return layers
}

// average is one layer, from top to bottom, over the cells that begin with
// the one in which its top lies:
//
//	Vs = h / Σ(hᵢ/Vsᵢ),  Vp = h / Σ(hᵢ/Vpᵢ),  ρ = Σ(hᵢρᵢ) / h
//
// Vp and density are given if every cell gives them.
func average(cells []profile.Layer, top, bottom float64) profile.Layer {
	out := profile.Layer{Top: top, Bottom: bottom, Line: cells[0].Line, Column: cells[0].Column, Given: profile.GivenVp | profile.GivenDensity}
	var s, p, mass float64
	for i := range cells {
		c := &cells[i]
		if c.Top >= bottom {
			break
		}
		h := min(c.Bottom, bottom) - max(c.Top, top)
		if h <= 0 {
			continue
		}
		s += h / c.Vs
		out.Given &= c.Given
		if out.Has(profile.GivenVp) {
			p += h / c.Vp
		}
		if out.Has(profile.GivenDensity) {
			mass += h * c.Density
		}
	}
	h := bottom - top
	out.Vs = h / s
	if out.Has(profile.GivenVp) {
		out.Vp = h / p
	}
	if out.Has(profile.GivenDensity) {
		out.Density = mass / h
	}
	return out
}

// averagedNote says how much detail the averages hide.
func (r *reader) averagedNote(cells, layers []profile.Layer) {
	worst, at := 0.0, 0
	k := 0
	for i := range cells {
		for k < len(layers)-1 && layers[k].Bottom <= cells[i].Top {
			k++
		}
		for j := k; j < len(layers) && layers[j].Top < cells[i].Bottom; j++ {
			if apart := math.Abs(cells[i].Vs/layers[j].Vs - 1); apart > worst {
				worst, at = apart, i
			}
		}
	}
	place := spot{cells[at].Line, cells[at].Column}
	r.note("samples-averaged", place, "%d samples were averaged by travel time onto %s; a sample differs from its layer by up to %.2g %%, at %.4g m",
		len(cells), profile.Plural(len(layers), "layer"), 100*worst, r.samples[at].z)
	if b := r.opt.Bounds; len(b) > 0 && b[len(b)-1] > layers[len(layers)-1].Bottom+profile.Joint {
		r.note("samples-averaged", place, "the log ends at %.4g m, above the last bound of %.4g m", layers[len(layers)-1].Bottom, b[len(b)-1])
	}
}

// assemble makes the profile.
func (r *reader) assemble(layers []profile.Layer) bool {
	p := &r.profile
	*p = profile.Profile{Layers: layers, Reading: &r.reading}
	r.describe(p)
	r.columnsRead()
	r.dataNotes()
	if faults := profile.Validate(p); len(faults) > 0 {
		r.Add(faults)
		return false
	}
	slices.SortStableFunc(r.notes, func(a, b profile.Note) int { return a.Place.Line - b.Place.Line })
	p.Notes = append(r.notes, profile.Doubts(p)...)
	return true
}

// columnsRead marks the columns that were read.
func (r *reader) columnsRead() {
	for _, c := range []struct {
		*curve
		profile.Quantity
	}{{r.index, profile.Depth}, {r.vs, profile.Vs}, {r.vp, profile.Vp}, {r.rho, profile.Density}} {
		if c.curve != nil {
			r.reading.Columns[c.column].Quantity = c.Quantity
		}
	}
}
