package correlate

import (
	"math"
	"strconv"
	"strings"
)

const blowUnits = "N in blows per 0.3 m (per foot), Vs in m/s"

// blowCounts are the relations in N alone, and that in N and depth of Ohta &
// Goto (1978).
//
// The two equations of Ohta & Goto must not be mixed: 85.35·N^0.348 stands by
// itself, and the factor D^0.199 belongs to 68.79·N^0.171.
func blowCounts() []*Relation {
	return []*Relation{
		power("imai-1977", "Imai (1977)", "91 N^0.337", 91, 0.337, OneSource,
			"Imai (1977), P- and S-wave velocities of the ground in Japan, 9th ICSMFE, Tokyo", "all soils", nil, "Japan"),
		power("imai-tonouchi-1982", "Imai & Tonouchi (1982)", "97.0 N^0.314", 97.0, 0.314, OneSource,
			"Imai & Tonouchi (1982), Correlation of N value with S-wave velocity and shear modulus, 2nd ESOPT, Amsterdam", "all soils", nil, "Japan"),
		power("ohta-goto-1978", "Ohta & Goto (1978), N alone", "85.35 N^0.348", 85.35, 0.348, OneSource,
			ohtaGotoSource, "all soils", nil, "Japan"),
		ohtaGotoDepth("Holocene", "1", 1),
		ohtaGotoDepth("Pleistocene", "1.303", 1.303),
		power("seed-idriss-1981", "Seed & Idriss (1981)", "61.4 N^0.5", 61.4, 0.5, FromMemory,
			"Seed & Idriss (1981), Evaluation of liquefaction potential of sand deposits, ASCE preprint 81-544", "all soils", nil, ""),
		power("seed-idriss-arango-1983", "Seed, Idriss & Arango (1983)", "56.4 N^0.5", 56.4, 0.5, FromMemory,
			"Seed, Idriss & Arango (1983), Evaluation of liquefaction potential using field performance data, ASCE JGE 109(3)", "sand", []Soil{Sand}, ""),
		power("sykora-stokoe-1983", "Sykora & Stokoe (1983)", "100.5 N^0.29", 100.5, 0.29, FromMemory,
			"Sykora & Stokoe (1983), Correlations of in situ measurements in sands with shear wave velocity, University of Texas GR83-33",
			"granular soils", []Soil{Sand, Gravel}, ""),
	}
}

// power is a relation Vs = a·N^b.
func power(id, name, equation string, a, b float64, standing Standing, source, soils string, held []Soil, region string) *Relation {
	return &Relation{
		ID: id, Name: name, Family: Penetration, Equation: "Vs = " + equation, Units: blowUnits,
		Needs: []Quantity{BlowCount}, Source: source, For: soils, Soils: held, Region: region,
		Limits: NoLimits, SigmaNote: noSigma, Standing: standing,
		formula: func(in *Input) float64 { return a * math.Pow(in.of(BlowCount), b) },
	}
}

// noSigma is what is known of the sigma of nearly all relations.
const noSigma = "no sigma was seen in print"

const ohtaGotoSource = "Ohta & Goto (1978), Empirical shear wave velocity equations in terms of characteristic soil indexes, EESD 6:167–187"

// ohtaGotoDepth is the equation of Ohta & Goto (1978) in N and depth, from
// memory, with the factor of one age:
//
//	Vs = 68.79·N^0.171·D^0.199·E·F
//
// E is 1 for Holocene (alluvial) and 1.303 for Pleistocene (diluvial) ground; F
// is 1.000 in clay, 1.086 in fine, 1.066 in medium and 1.135 in coarse sand,
// 1.153 in sand and gravel, and 1.448 in gravel. Sand is taken to be fine here:
// medium sand is 2 % slower and coarse sand 5 % faster. There is no factor for
// silt.
func ohtaGotoDepth(age, printed string, e float64) *Relation {
	return &Relation{
		ID: "ohta-goto-1978-" + strings.ToLower(age), Name: "Ohta & Goto (1978), N and depth, " + age, Family: Penetration,
		Equation: "Vs = 68.79 N^0.171 D^0.199 E F, E = " + printed + ", F = 1 in clay, 1.086 in sand, 1.448 in gravel",
		Units:    "N in blows per 0.3 m, D in m, Vs in m/s",
		Needs:    []Quantity{BlowCount, Depth}, Source: ohtaGotoSource,
		For: age + " clay, sand and gravel", Soils: []Soil{Clay, Sand, Gravel}, Region: "Japan",
		Limits: NoLimits, SigmaNote: noSigma, Standing: FromMemory,
		Note: "sand is taken to be fine; medium sand has 1.066 and coarse sand 1.135",
		formula: func(in *Input) float64 {
			f := [...]float64{Clay: 1, Sand: 1.086, Gravel: 1.448}[in.Soil]
			return 68.79 * math.Pow(in.of(BlowCount), 0.171) * math.Pow(in.of(Depth), 0.199) * e * f
		},
	}
}

// blowCountsAndStress are the relations of Brandenberg, Bellana & Shantz (2010),
//
//	ln Vs = β₀ + β₁·ln N60 + β₂·ln σ'v
//
// The part of the scatter that is common to a site was seen for sand, 0.217 of
// ln Vs (one source); that of single tests was not, so a planning value stands
// for the whole.
func blowCountsAndStress() []*Relation {
	return []*Relation{
		brandenberg(Sand, 4.045, 0.096, 0.236, OneSource, "the part common to a site is 0.217; that of single tests was not seen"),
		brandenberg(Silt, 3.783, 0.178, 0.231, FromMemory, noSigma),
		brandenberg(Clay, 3.996, 0.230, 0.164, FromMemory, noSigma),
	}
}

func brandenberg(soil Soil, b0, b1, b2 float64, standing Standing, sigma string) *Relation {
	return &Relation{
		ID: "brandenberg-2010-" + soil.String(), Name: "Brandenberg, Bellana & Shantz (2010), " + soil.String(), Family: Penetration,
		Equation: "ln Vs = " + fixed(b0) + " + " + fixed(b1) + " ln N60 + " + fixed(b2) + " ln σ'v",
		Units:    "N60 in blows per 0.3 m, σ'v in kPa, Vs in m/s",
		Needs:    []Quantity{BlowCount60, EffectiveStress},
		Source:   "Brandenberg, Bellana & Shantz (2010), Shear wave velocity as function of SPT resistance and vertical effective stress at California bridge sites, SDEE 30(10)",
		For:      soil.String(), Soils: []Soil{soil}, Region: "bridge sites in California",
		Limits: NoLimits, SigmaNote: sigma, Standing: standing,
		formula: func(in *Input) float64 {
			return math.Exp(b0 + b1*math.Log(in.of(BlowCount60)) + b2*math.Log(in.of(EffectiveStress)))
		},
	}
}

func fixed(x float64) string { return strconv.FormatFloat(x, 'f', 3, 64) }
