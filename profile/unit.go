package profile

import (
	"fmt"
	"strconv"
	"strings"
)

// Quantity is what a column or a number stands for.
type Quantity uint8

// The quantities of a table of layers.
const (
	Unknown Quantity = iota
	ProfileName
	Top
	Bottom
	Thickness
	Vs
	VsBottom
	VsLower
	VsUpper
	Vp
	Density
	SigmaLnVs
	BasisWord
	Soil
	N
	Su
	PI
	WaterContent
	RefusalWord
	Depth // of a reading, inside the layer that it becomes

	// Of the position of a profile:

	Latitude
	Longitude
	Easting
	Northing
	EPSG

	// Of the readings of a cone, which layers do not have:

	TipResistance
	SleeveFriction
	PorePressure
)

var quantityNames = [...]string{
	"unknown", "profile", "top", "bottom", "thickness", "Vs", "Vs at bottom",
	"lower Vs", "upper Vs", "Vp", "density", "sigma of ln Vs", "basis", "soil",
	"N", "su", "plasticity index", "water content", "refusal", "depth",
	"latitude", "longitude", "easting", "northing", "EPSG code",
	"tip resistance", "sleeve friction", "pore pressure",
}

// String returns the name of the quantity as messages and tables use it.
func (q Quantity) String() string { return quantityNames[q] }

// Dimension is the kind of a unit.
type Dimension uint8

// The dimensions of the quantities that shearbook reads.
const (
	Dimensionless Dimension = iota // no unit is expected
	Length
	Velocity
	MassDensity
	Stress
	Percent
	Blows
)

var dimensionNames = [...]string{"none", "length", "velocity", "density", "stress", "percent", "blow count"}

// String returns the name of the dimension.
func (d Dimension) String() string { return dimensionNames[d] }

// Dimension returns the dimension of the quantity.
func (q Quantity) Dimension() Dimension {
	switch q {
	case Top, Bottom, Thickness, Depth:
		return Length
	case Vs, VsBottom, VsLower, VsUpper, Vp:
		return Velocity
	case Density:
		return MassDensity
	case Su, TipResistance, SleeveFriction, PorePressure:
		return Stress
	case PI, WaterContent:
		return Percent
	case N:
		return Blows
	}
	return Dimensionless
}

// Foot is the international foot in m, exact (Barrow et al., Refinement of
// values for the yard and the pound, Federal Register 24, 1959).
const Foot = 0.3048

// Unit is a unit of measurement and its factor to the unit used inside.
type Unit struct {
	Name      string // as reports print it
	Dimension Dimension
	Factor    float64 // value in this unit × Factor = value in m, m/s, kg/m³, kPa, % or blows
}

// Units the reports print in.
var (
	Metre           = Unit{"m", Length, 1}
	FootUnit        = Unit{"ft", Length, Foot}
	MetrePerSecond  = Unit{"m/s", Velocity, 1}
	FootPerSecond   = Unit{"ft/s", Velocity, Foot}
	Kilopascal      = Unit{"kPa", Stress, 1}
	PoundPerSquareF = Unit{"psf", Stress, psf}
	KipPerSquareF   = Unit{"ksf", Stress, 1000 * psf}
)

// The factors below follow from the international foot and pound (0.45359237
// kg) and standard gravity (9.80665 m/s²), all exact by definition.
const (
	pound = 0.45359237                            // kg
	psf   = pound * 9.80665 / (Foot * Foot) / 1e3 // kPa
	pcf   = pound / (Foot * Foot * Foot)          // kg/m³
)

// units lists every unit that is read, under its accepted spellings in lower
// case.
var units = []struct {
	Unit
	spellings string // separated by |
}{
	{Metre, "m|metre|metres|meter|meters"},
	{FootUnit, "ft|foot|feet|'"},
	{Unit{"cm", Length, 0.01}, "cm"},
	{Unit{"mm", Length, 0.001}, "mm"},
	{MetrePerSecond, "m/s|m/sec|mps|m s-1|m·s-1|m.s-1|m s^-1|m s⁻¹|m·s⁻¹|ms-1|metres/second|meters/second"},
	{FootPerSecond, "ft/s|ft/sec|fps|feet/s|feet/sec|ft s-1|feet/second"},
	{Unit{"km/s", Velocity, 1000}, "km/s|km/sec|kmps|km s-1|km s⁻¹"},
	{Unit{"kg/m³", MassDensity, 1}, "kg/m3|kg/m³|kg/m^3|kg m-3"},
	{Unit{"g/cm³", MassDensity, 1000}, "g/cm3|g/cm³|g/cm^3|g/cc|t/m3|t/m³|t/m^3|mg/m3|mg/m³|mg/m^3"},
	{Unit{"pcf", MassDensity, pcf}, "pcf|lb/ft3|lb/ft³|lb/ft^3"},
	{Kilopascal, "kpa|kn/m2|kn/m²|kn/m^2"},
	{Unit{"MPa", Stress, 1000}, "mpa|mn/m2"},
	{PoundPerSquareF, "psf|lb/ft2|lb/ft²|lb/ft^2"},
	{KipPerSquareF, "ksf"},
	{Unit{"%", Percent, 1}, "%|percent|pct"},
	{Unit{"blows/0.3 m", Blows, 1}, "blows/0.3 m|blows/0.3m|blows/ft|blows/foot|blows/300 mm|blows/300mm|blows/30 cm|blows/30cm|blows|bpf"},
}

// ParseUnit returns the unit of dimension d that text spells, and false if it
// spells none. Case and outer spaces do not matter.
func ParseUnit(text string, d Dimension) (Unit, bool) {
	text = strings.ToLower(strings.TrimSpace(text))
	for _, u := range units {
		if u.Dimension != d {
			continue
		}
		for spelling := range strings.SplitSeq(u.spellings, "|") {
			if spelling == text {
				return u.Unit, true
			}
		}
	}
	return Unit{}, false
}

// UnitNames returns the names of the units of dimension d, for hints.
func UnitNames(d Dimension) []string {
	var names []string
	for _, u := range units {
		if u.Dimension == d {
			names = append(names, u.Name)
		}
	}
	return names
}

// ParseValue returns the value in SI of a number with its unit, such as
// "2.5 m" or "8.2ft". A number without a unit is an error unless it is zero.
func ParseValue(text string, d Dimension) (float64, error) {
	text = strings.TrimSpace(text)
	cut := strings.IndexFunc(text, func(r rune) bool {
		return !strings.ContainsRune("+-.0123456789", r)
	})
	number, unit := text, ""
	if cut >= 0 {
		number, unit = text[:cut], text[cut:]
	}
	v, err := strconv.ParseFloat(number, 64)
	if err != nil {
		return 0, fmt.Errorf("%q is not a number with its unit", text)
	}
	if strings.TrimSpace(unit) == "" {
		if v == 0 {
			return 0, nil
		}
		return 0, fmt.Errorf("%q states no unit (%s)", text, strings.Join(UnitNames(d), ", "))
	}
	u, ok := ParseUnit(unit, d)
	if !ok {
		return 0, fmt.Errorf("%q is not a unit of %s (%s)", strings.TrimSpace(unit), d, strings.Join(UnitNames(d), ", "))
	}
	return v * u.Factor, nil
}
