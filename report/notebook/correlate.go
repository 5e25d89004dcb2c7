package notebook

import (
	"slices"
	"strconv"
	"strings"

	"shearbook/profile"
	"shearbook/profile/correlate"
)

// correlation returns the keys of a profile that ask for estimates where it has
// no velocities: correlate, a list of IDs; unit weight, kN/m³; energy ratio, %.
// The water table is that of the survey.
func (m *mapping) correlation(waterTable profile.Optional) correlate.Options {
	o := correlate.Options{Relations: m.texts("correlate")}
	if text := m.text("unit weight"); text != "" {
		var err error
		if o.UnitWeight, err = correlate.ParseUnitWeight(text); err != nil {
			m.add(m.at(m.get("unit weight")), "write it with its unit, as `unit weight: 18 kN/m3`", "unit weight of %s: %v", m.what, err)
			return correlate.Options{}
		}
	}
	o.Drive.EnergyRatio = m.value("energy ratio", profile.Percent, "72 %").Value
	if len(o.Relations) == 0 {
		return correlate.Options{} // the others are of no use alone
	}
	o.WaterTable = waterTable
	if err := o.Check(); err != nil {
		m.add(m.at(m.get("correlate")), "`shearbook correlations` lists the relations, and what each needs", "correlate of %s: %v", m.what, err)
		return correlate.Options{}
	}
	return o
}

// correlationKeys are the keys that correlation reads, as a standard notebook
// writes them.
func correlationKeys(o *correlate.Options) string {
	if len(o.Relations) == 0 {
		return ""
	}
	text := ", correlate: [" + quoteAll(o.Relations) + "]"
	if o.UnitWeight != 0 {
		text += ", unit weight: " + plainNumber(o.UnitWeight) + " kN/m3"
	}
	if o.Drive.EnergyRatio != 0 {
		text += ", energy ratio: " + quote(plainNumber(o.Drive.EnergyRatio)+" %")
	}
	if o.WaterTable.Known {
		text += ", water table: " + metreText(o.WaterTable.Value)
	}
	return text
}

func plainNumber(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// estimatedBy names the relations that a profile's velocities are estimated by
// here, "" if they are not, or if the file has them so.
func (s *site) estimatedBy() string {
	if basisOf(s.profile) != profile.Correlated.String() {
		return ""
	}
	return strings.Join(s.entry.Read.Correlate.Relations, ", ")
}

// correlated reports whether any velocity of the profile is correlated from
// other tests, here or before it was written into its file.
func (s *site) correlated() bool {
	for i := range s.profile.Layers {
		if s.profile.BasisOf(i) == profile.Correlated {
			return true
		}
	}
	return false
}

// carrySigma gives the layer by which an estimated profile was extended the
// sigma of the lowest one that has any, and says whether there was one to give
// it to: the error of a correlation is common to all layers.
func (s *site) carrySigma(layers []profile.Layer) ([]profile.Layer, bool) {
	last := len(layers) - 1
	if !s.correlated() || last < 1 || layers[last].Has(profile.GivenSigma) || !layers[last-1].Has(profile.GivenSigma) {
		return layers, false
	}
	layers = slices.Clone(layers)
	layers[last].SigmaLnVs = layers[last-1].SigmaLnVs
	layers[last].Given |= profile.GivenSigma
	return layers, true
}
