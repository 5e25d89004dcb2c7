package siteclass

// Measure is what a column of a class table is held against.
type Measure uint8

// The measures.
const (
	AverageVs  Measure = iota // velocity by travel time, of all layers
	AverageN                  // blow count, of all layers
	AverageNch                // blow count, of the cohesionless layers alone
	AverageSu                 // undrained strength, of the cohesive layers alone
)

var measureWords = [...]string{"velocity", "N", "Nch", "su"}

// String returns the name of the measure, which is also that of a route that
// asks for nothing else.
func (m Measure) String() string { return measureWords[m] }

// Route is one way from the data of a profile to a class: a column of the
// table, or more of them, of whose classes the softest governs.
//
// Where the data allow several routes, those of the lowest Rank go first;
// among routes of one rank the softest class governs. The others are shown.
// A velocity that is correlated, and so comes of N or su itself, goes behind the
// routes that take those as they are; one that was measured keeps its rank.
type Route struct {
	Name     string    // "velocity", "N", "Nch and su"
	Measures []Measure // what is averaged and held against the table
	Rank     int       // from 1
	Clause   string
	Standing Standing // of the rule that this route may be gone

	// decide replaces the ordinary rule of the route where the code's own is
	// another.
	decide func(*Code, Site) (Decision, error)
}

// has reports whether the route averages m.
func (r *Route) has(m Measure) bool {
	for _, own := range r.Measures {
		if own == m {
			return true
		}
	}
	return false
}

// velocityRoute is the route of a code that names none.
var velocityRoute = Route{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1}

// routes returns the code's routes.
func (c *Code) routes() []Route {
	if len(c.Routes) == 0 {
		return []Route{velocityRoute}
	}
	return c.Routes
}

// threeWays are the routes of the NEHRP provisions and the codes that follow
// them: the velocity; else N over all layers, or N over the cohesionless and
// su over the cohesive layers. The provisions set the last two side by side;
// here the softer class of them governs.
func threeWays(clause string, s Standing) []Route { return ways(clause, s, s) }

// ways are the three ways where the last, by Nch and su, has a standing of
// its own.
func ways(clause string, s, both Standing) []Route {
	return []Route{
		{Name: "velocity", Measures: []Measure{AverageVs}, Rank: 1, Clause: clause, Standing: s},
		{Name: "N", Measures: []Measure{AverageN}, Rank: 2, Clause: clause, Standing: s},
		{Name: "Nch and su", Measures: []Measure{AverageNch, AverageSu}, Rank: 2, Clause: clause, Standing: both},
	}
}

// Blow is the kind of blow count that a code asks for, or that the data
// state. All are blows per 0.3 m.
type Blow uint8

// The kinds of blow count.
const (
	BlowUnstated  Blow = iota
	BlowField          // as measured, not corrected
	BlowN60            // corrected for energy to 60 %
	BlowN1             // normalised to an overburden of 100 kPa (1 kgf/cm²)
	BlowCorrected      // corrected, without a word how
)

var blowWords = [...]string{"not stated", "as measured", "corrected for energy (N60)", "normalised to overburden (N1)", "corrected"}

// String returns the words of the kind.
func (b Blow) String() string { return blowWords[b] }

// Averaging is how a code averages N and su. Both averages are harmonic,
//
//	N̄ = Σd / Σ(d/N),   s̄u = Σd / Σ(d/su)
//
// over the layers that they are taken of, each with the thickness of those
// layers alone.
type Averaging struct {
	N, Nch, Su string // symbols as printed: "N̄", "N̄ch", "s̄u"

	Blow  Blow    // which blow count the code asks for
	NCap  float64 // blows per 0.3 m above which none counts; 0 if none is printed
	SuCap float64 // in Code.SuUnit, above which no strength counts; 0 if none is printed

	// By the plasticity index, in %; empty where the code does not say.
	Cohesive     Range
	Cohesionless Range

	Clause   string
	Standing Standing
	Unstated bool // the code prints no formula, and the harmonic mean is ours
}
