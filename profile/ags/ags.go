// Package ags reads shear-wave velocities, soil and test results from files
// in the AGS4 data format of the Association of Geotechnical and
// Geoenvironmental Specialists (editions 4.0.4, 4.1, 4.1.1 and 4.2), and
// writes profiles as such files.
//
// An AGS4 file is lines of quoted fields. A group of them begins with the
// rows GROUP, HEADING, UNIT and TYPE; its DATA rows follow:
//
//	"GROUP","WGPT"
//	"HEADING","LOCA_ID","WGPG_ID","WGPG_TOOL","WGPT_PARA","WGPT_UNIT","WGPT_DPTH","WGPT_RDNG"
//	"UNIT","","","","","","m",""
//	"TYPE","ID","X","PA","PA","PU","2DP","U"
//	"DATA","H1","H1-PS","PSL","PSL-SWV","m/s","1.50","165"
//
// # Velocities
//
// Each run of one tool, each seismic test and each group of the user's own
// gives one profile of its hole:
//
//   - WGPT: the parameters PSL-SWV and FWS-SWV, and FWS-DTS where its run has
//     no FWS-SWV; a parameter of the user's own that ABBR describes as the
//     velocity or slowness of shear waves. P waves at the same depths become
//     Vp. Measured.
//   - ISTA (4.2): rows of S waves that are not marked as invalid. Measured.
//   - CPTP_VS1 and DMTP_VS (4.2), which are estimated. Correlated.
//   - any heading of the user's own with a unit of velocity or slowness whose
//     description in DICT speaks of shear waves, or whose name ends in VS,
//     VSH, SVEL, SWV or SWVL; and any heading or parameter that Options.Map
//     names. Its basis is what the words of DICT say, or not stated.
//   - VSPG and VSPL, the groups of their own in which Write puts what AGS has
//     no group for.
//
// Headings of the laboratory (LDYN_SWAV, RESC_SWV, CTRC_SWV) give no profile.
//
// # From readings to layers
//
// A reading at a depth stands for the ground to midway to its neighbours. An
// interval stands for itself; where two intervals leave a gap or overlap, the
// boundary lies midway, and a note says so. The last reading at a depth
// stands for the ground below it as far as for that above, but for no more
// than EndReach; the first one upward likewise. Nothing is measured above it:
// there its velocity is carried up to ground level, with a note, over
// MaxCarry at most, or what Options.CarryUp says. A hole whose first reading
// lies deeper gives no profile.
//
// # Soil and tests
//
// The soil of a layer is the GEOL stratum that holds most of it. Tests are
// those of ISPT, LLPL, LNMC, LDEN, TRIT, TRET and IVAN, at their top depth or,
// from a sample, at that of the specimen. Of the tests inside a layer
//
//   - N is the harmonic mean, as codes average N over a depth (Σd/Σ(d/N));
//   - su is the lowest, for what a specimen has lost it does not regain;
//   - plasticity index, water content and density are arithmetic means.
//
// A layer in which no test falls takes the one nearest to its middle in the
// same stratum, the upper of two as near. These rules are ours; a note on the
// profile states them. A test that cannot be read is left out and noted. A
// bound such as ">80" is read as its number, with a note. A penetration test
// is refused if 50 blows or more drove it 150 mm or less, one increment of ASTM
// D1586 (from memory); a layer is refused if all tests in it are.
//
// # Positions
//
// LOCA_LAT and LOCA_LON give the latitude and longitude, LOCA_NATE and LOCA_NATN
// the easting and northing, as numbers in the unit of the file. LOCA_GREF gives
// an EPSG code where it, or what ABBR says of it, names one as such, as
// "EPSG:27700"; the name of a grid alone is not turned into one.
//
// # Holes without velocities
//
// Where a file has velocities, its other holes give no profile, and a note
// names those with tests: a site has many borings, and few that are as deep as
// a code needs. If it has none, or Options asks for them, each hole that has
// tests of N, or else of su, gives a profile without velocities. Each of these
// tests stands for the ground to midway to its neighbours, or to the boundary
// of a stratum between them. ReadHoles returns the tests themselves, and cone
// tests, of all holes.
//
// # What is let pass, and noted
//
// UTF-8 or Windows-1252, any end of line, blanks around fields, fields without
// quotes, quotes not doubled inside a field, a field broken over lines, rows
// too short, a group that comes twice, and values with other decimals than
// their TYPE. The UNIT row is believed, whatever a heading's usual unit;
// where it is blank the usual one is assumed and noted, but for velocities,
// whose unit must be stated.
package ags

import (
	"shearbook/profile"
)

// Limits of what Read takes in. Beyond them it says so and stops.
const (
	MaxBytes    = 64 << 20  // of a file
	MaxRows     = 2_000_000 // of the groups that are read
	MaxField    = 64 << 10  // bytes of a field
	MaxColumns  = 1000      // headings of a group
	MaxHeadings = 200_000   // of the groups that are read
	MaxGroups   = 10_000
	MaxHoles    = 100_000
	MaxProfiles = 100_000
	MaxReadings = 2_000_000 // velocities
	MaxEntries  = 2_000_000 // strata and tests, counted once for each profile of their hole
)

// EndReach is how far in m the first and the last reading at a depth stand
// for the ground beyond them: half the metre between the receivers of a
// suspension logger (common practice).
const EndReach = 0.5

// MaxCarry is how far in m the first velocity of a hole is carried up to
// ground level where Options does not say. It is our choice: a tool in a
// casing cannot measure the uppermost metres, but more than that is another
// soil.
const MaxCarry = 5.0

// Options says how to read a file. The zero value reads what the file states.
type Options struct {
	// Map names headings and WGPT parameters that would not be recognised,
	// each as "Vs=MASW_VEL [m/s]": a quantity, = and a heading or a parameter.
	// The unit is for what the file states none for; where the file states
	// another, that is a fault. Quantities are Vs, Vp, top, bottom, depth, N,
	// su, PI, water content and density.
	Map []string

	// N60 takes the blow counts corrected to 60 % of the energy, ISPT_N60, where
	// a hole has them. Otherwise those of a hole are as measured, ISPT_NVAL,
	// where it has them.
	N60 bool

	// Untimed adds the holes without velocities to those of a file that has
	// velocities. A file that has none gives them in any case.
	Untimed bool

	// CarryUp is how far in m the first velocity may be carried up to ground
	// level; 0 means MaxCarry.
	CarryUp float64
}

func (o *Options) carryUp() float64 {
	if o.CarryUp > 0 {
		return o.CarryUp
	}
	return MaxCarry
}

// Read returns the profiles of a file, those of a hole side by side and the
// holes in the order of LOCA. A profile has the name of its hole, or where the hole has several, that with
// the run or test behind it: "H1/H1-PS". The name of the file is used in
// messages. An error is a profile.Faults: everything that is wrong, as
// profile.Collector keeps it. Each profile has passed profile.Validate and
// carries the notes of profile.Doubts after its own:
//
//   - edition-assumed: TRAN states no edition that is known.
//   - let-pass: what breaks the rules of AGS4 and was read all the same.
//   - units-assumed: headings whose UNIT is blank.
//   - mapped: headings read as Options.Map says.
//   - heading-not-read: velocities that are not known to be of shear waves.
//   - holes-without-velocity: holes with tests, but no profile.
//   - no-velocity: the rule by which a hole without velocities got layers.
//   - hole-left-out: holes whose first reading lies too deep.
//   - readings-to-layers: the rule by which readings became layers.
//   - intervals-to-layers: that intervals leave gaps, or overlap.
//   - top-not-measured: how far the first velocity was carried up.
//   - readings-apart: gaps between readings that are wider than is usual in
//     the hole.
//   - readings-left-out: rows without a reading, or marked as invalid.
//   - tests-to-layers: the rules by which layers got N, su and the others.
//   - not-read, unit-not-read: numbers left out, such as results of tests.
//   - blow-count, cone: which blow counts were taken, and by what.
//   - test-bound, test-incomplete: results read as their bound, or of
//     penetration tests that did not reach their depth.
//   - layers-cross-strata, strata-overlap: what the soil does not tell.
//   - position-not-read, position-datum: of LOCA_LAT and LOCA_LON.
func Read(file string, data []byte, opt Options) ([]profile.Profile, error) {
	r := newReader(file, opt)
	_ = r.open(data) && r.readHoles() && r.readTests() && r.readVelocities() && r.assemble()
	if err := r.Err(); err != nil {
		return nil, err
	}
	return r.profiles, nil
}

// reader is the state of reading one file.
type reader struct {
	profile.Collector
	opt       Options
	text      []byte
	reading   profile.Reading // what the readings of all profiles share
	groups    []*group        // in the order of the file
	oddities  oddities
	header    header
	maps      []mapping
	assumed   []string       // headings whose usual unit was taken
	unitNotes []profile.Note // on headings whose unit is not read
	holes     []*hole
	byID      map[string]*hole
	sets      []*set
	p         map[run]*set // velocities of P waves
	unread    []unread     // velocities of unknown waves
	leftOut   []leftOut
	empty     int     // sets without a reading
	again     cursor  // over rows that are read a second time
	entries   []entry // room for those of an appendix
	profiles  []profile.Profile
	each      *apart // nil where a fault is the whole file's
}

func newReader(file string, opt Options) *reader {
	return &reader{Collector: profile.Collector{File: file}, opt: opt, byID: map[string]*hole{}}
}

// open runs from the bytes to the index of groups and what holds for the
// whole file. Each step that returns false has told why the next makes no
// sense.
func (r *reader) open(data []byte) bool {
	return r.decode(data) && r.index() && r.readHeader() && r.readMap()
}
