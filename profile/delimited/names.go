package delimited

import (
	"strings"
	"unicode"

	"shearbook/profile"
)

// names are the headings that are read, in the form of plain.
var names = map[profile.Quantity][]string{
	profile.ProfileName: {
		"profile", "profile name", "profile id", "hole", "hole id", "borehole", "borehole id",
		"boring", "boring id", "bore", "line", "line id", "sounding", "sounding id", "location id", "id",
	},
	profile.Top: {
		"top", "from", "start", "depth top", "top depth", "depth from", "from depth", "depth to top",
		"depth start", "start depth", "top of layer", "depth to top of layer", "layer top", "z top", "ztop",
	},
	profile.Bottom: {
		"bottom", "to", "base", "end", "depth bottom", "bottom depth", "depth to", "to depth",
		"depth to bottom", "depth base", "base depth", "depth to base", "depth end", "end depth",
		"bottom of layer", "base of layer", "depth to base of layer", "depth to bottom of layer", "layer bottom", "layer base", "z bottom", "zbottom", "z base",
	},
	profile.Thickness: {"thickness", "thickness h", "layer thickness", "layer thickness h", "h", "thk", "thick"},
	profile.Vs: {
		"vs", "v s", "shear wave velocity", "shear velocity", "s wave velocity", "s velocity",
		"shear wave velocity vs", "shear velocity vs", "s wave velocity vs", "vs shear wave velocity",
		"vs interval", "interval vs", "vs top", "top vs", "vs at top",
	},
	profile.VsBottom: {"vs bottom", "bottom vs", "vs at bottom", "vs base", "base vs", "vs at base"},
	profile.VsLower: {
		"vs lower", "lower vs", "vs low", "low vs", "vs lower bound", "lower bound vs", "vs 16", "vs16", "vs p16",
	},
	profile.VsUpper: {
		"vs upper", "upper vs", "vs high", "high vs", "vs upper bound", "upper bound vs", "vs 84", "vs84", "vs p84",
	},
	profile.Vp: {
		"vp", "v p", "p wave velocity", "p velocity", "compression wave velocity", "compressional wave velocity",
		"p wave velocity vp", "compression wave velocity vp", "compressional wave velocity vp",
		"vp interval", "interval vp",
	},
	profile.Density: {"density", "rho", "ρ", "bulk density", "mass density", "density rho", "density ρ"},
	profile.SigmaLnVs: {
		"sigma ln vs", "sigma lnvs", "sigmalnvs", "sigma of ln vs", "σ ln vs", "σ lnvs", "σlnvs", "σln vs", "σ of ln vs",
		"std ln vs", "sd ln vs", "ln vs sigma", "standard deviation of ln vs", "standard deviation ln vs",
	},
	profile.BasisWord: {"basis", "vs basis", "basis of vs", "basis of velocity", "velocity basis"},
	profile.Soil: {
		"soil", "soil type", "soil description", "description", "layer description", "lithology", "material",
		"geology", "stratum", "stratigraphy",
	},
	profile.N: {
		"n", "n value", "n spt", "nspt", "spt", "spt n", "spt n value", "n60", "spt n60", "n60 spt",
		"blow count", "blows",
	},
	profile.Su: {"su", "s u", "cu", "c u", "undrained shear strength", "undrained shear strength su", "undrained strength"},
	profile.PI: {"pi", "ip", "i p", "plasticity index", "plasticity index pi", "plasticity index ip"},
	profile.WaterContent: {
		"w", "wn", "water content", "water content w", "natural water content", "moisture content",
	},
	profile.RefusalWord: {"refusal", "refused", "spt refusal", "refusal of penetration"},
	profile.Latitude:    {"latitude", "lat", "latitude deg", "lat deg", "latitude wgs84", "latitude wgs 84"},
	profile.Longitude:   {"longitude", "lon", "long", "longitude deg", "lon deg", "longitude wgs84", "longitude wgs 84"},
	profile.Easting:     {"easting", "easting m", "easting ft", "grid easting"},
	profile.Northing:    {"northing", "northing m", "northing ft", "grid northing"},
	profile.EPSG:        {"epsg", "epsg code"},
}

// bareDepths are headings that may mean the top or the bottom of a layer.
var bareDepths = []string{"depth", "z", "depth z", "depth below ground", "depth below ground level", "depth below surface", "depth bgl"}

// quantityOf finds the quantity under its headings.
var quantityOf = func() map[string]profile.Quantity {
	found := map[string]profile.Quantity{}
	for q, list := range names {
		for _, name := range list {
			found[name] = q
		}
	}
	return found
}()

// plain is a name without what does not matter: case, and which blanks,
// hyphens, underscores, brackets and other signs stand between its words.
func plain(name string) string {
	var b strings.Builder
	blank := false
	for _, r := range strings.ToLower(name) {
		switch r {
		case 'ₛ':
			r = 's'
		case 'ₚ':
			r = 'p'
		case 'ᵤ':
			r = 'u'
		}
		if !unicode.IsLetter(r) && !unicode.IsDigit(r) {
			blank = b.Len() > 0
			continue
		}
		if blank {
			b.WriteByte(' ')
			blank = false
		}
		b.WriteRune(r)
	}
	return b.String()
}
