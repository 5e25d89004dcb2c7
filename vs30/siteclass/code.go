// Package siteclass holds the site-classification tables of published
// building codes and applies them to a velocity profile.
//
// One file holds one standard. Its table is a literal that reads like the
// printed page: the bands in the printed order, each bound with the printed
// operator and in the printed unit, the clause beside each rule. Where a rule
// is not a band (type E of EN 1998-1, the substrate depth of NTC 2018) it is
// an ordinary function beside the table, with its limits in the table.
//
// A velocity is compared in the code's own unit and over the code's own
// depth. A value within one part in 10⁹ of a bound is the bound. Then the
// printed operators decide. Where the print gives the value to two classes or
// to none, the softer class is taken and a note says so.
//
// Where a code also has columns of blow counts and strengths, they are routes
// of their own: N averaged over all layers, N over the cohesionless and su
// over the cohesive, each with the thickness of its own layers. A Route says
// what goes before what; what another route would give is shown.
//
// A decision looks first at the ground that no average settles (liquefiable
// soil, peat, soft clay …), then at the average, then at whether a rock class
// may stand on so much soil. Every comparison is a Step. What is not known of
// the ground is listed as not assessed.
package siteclass

import "shearbook/profile"

// Standing is how well a table or rule is known to agree with the print.
// The order is from strong to weak.
type Standing uint8

// The standings.
const (
	Checked    Standing = iota + 1 // two independent published sources agree, or the issuing body's own text was read
	OneSource                      // one published source
	FromMemory                     // not checked against a source
)

var standingWords = [...]string{"unknown", "checked", "one source", "from memory"}

// String returns the words that every report prints for the standing.
func (s Standing) String() string { return standingWords[s] }

// MarshalText writes the words.
func (s Standing) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// Band is one row of a class table.
type Band struct {
	Class      string // as printed: "C", "BC", "ZD"
	Name       string // what the ground is, in our words
	Vs         Range  // in Code.Unit; empty for a class that is not given by velocity
	N          Range  // blows per 0.3 m (per foot)
	Su         Range  // in Code.SuUnit
	Also       string // what the row asks beside the bounds; "" if nothing
	Improving  bool   // the row asks for properties that improve with depth
	Indicative bool   // the bounds are shown beside the class and do not give it
	Standing   Standing
}

// Datum is where a code measures its averaging depth from.
type Datum uint8

// The datums.
const (
	DatumUnstated   Datum = iota // the code does not say; ground level is taken and noted
	DatumGround                  // the ground surface
	DatumFoundation              // the underside of the foundation (pile head, pile cap)
)

var datumWords = [...]string{"not stated (ground surface taken)", "ground surface", "underside of foundation"}

// String returns the words of the datum.
func (d Datum) String() string { return datumWords[d] }

// Code is one published classification. The codes that All and Find return
// are shared: they are to be read and not changed.
type Code struct {
	ID         string  // "asce-7-16"
	Title      string  // "Minimum Design Loads …"
	Edition    string  // "ASCE/SEI 7-16 with Supplements 1 and 3"
	Region     string  // where it is used
	Clause     string  // of the classification: "ch. 20"
	Table      string  // "Table 20.3-1"
	Source     string  // where the table was carried over from
	Parameter  string  // "v̄s", as printed
	Depth      float64 // m over which the velocity is averaged; the largest if the code varies it; 0 if it sets none
	DepthText  string  // as the code words it: "100 ft", "30 m", "H, at most 30 m"
	Datum      Datum
	DatumNote  string       // what the code says of the datum beyond Datum; "" if nothing
	Unit       profile.Unit // of the velocity bounds, as printed
	SuUnit     profile.Unit // of the strength bounds, as printed; zero if the table has none
	Length     profile.Unit // of depths and thicknesses, as printed
	Standing   Standing     // of the table as a whole: the weakest of its rows, and of its adoption
	Bands      []Band       // in the printed order, stiffest first
	Outside    string       // class of a velocity that no row covers, softer than all; "" if there is none
	Conditions []Condition  // in the order in which they are looked at
	Notes      []string     // what the print leaves open, in our words
	Short      string       // what the code says of a profile that ends above the depth, in our words
	Correlated string       // what the code says of velocities that were not measured, in our words
	Twin       Twin         // the same table printed in another unit
	Rules      []Rule       // of a table that is no single column of velocities, in the order in which they are looked at
	Terms      []Term       // figures that the code's own rule rests on
	Own        *Own         // set where the table is a jurisdiction's own; nil for a published code

	Routes    []Route   // from the data to a class, in the printed order; nil where there is only the velocity
	Needs     int       // routes that the code asks for at least; 0 for one
	Averaging Averaging // of N and su

	Default      string // what the code takes where data are lacking, in our words; "" if it says nothing
	DefaultClass string // the class it names for that; "" if it names none, or more than one
	Several      string // what the code says of several profiles of one site, in our words; "" if nothing
	WorstOf      bool   // the worst of several profiles of one site governs; see Governing

	Adopts           string   // ID of the code whose table this one takes for its own; "" if it has one
	Adoption         string   // how it takes it, in our words
	AdoptionStanding Standing // of that
	Superseded       string   // by what and when the code is replaced, in our words; "" if it is not known to be

	// decide replaces the ordinary rule of the velocity route where the code's
	// own is not bands.
	decide func(*Code, Site) (Decision, error)

	// bandsAlone says of a decide that it is the ordinary rule where the layers
	// are the profile's own and not correlated.
	bandsAlone bool

	ready *prepared // what prepare found; nil if it was not called
}

// Twin is the print of the same velocity bounds in another unit. The two
// prints are no conversions of each other: 1,200 ft/s is 365.76 m/s, and the
// metric print has 360.
type Twin struct {
	Unit   profile.Unit // zero if there is no twin
	Bounds []float64    // as many as the table has, from stiff to soft
	Source string
}
