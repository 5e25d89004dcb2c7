package correlate

import (
	"math"
	"strings"
)

// Atmosphere is the reference stress pa in kPa, as the relations from cone
// resistance take it.
const Atmosphere = 100.0

const coneUnits = "stresses in kPa, depth in m, Vs in m/s"

// cones are the relations from cone resistance that are for all soils.
//
// The power of fs in McGann et al. (2015) is 0.0832; 0.0823, which can also be
// read, is a slip. The sigma that the paper gives is that of Christchurch,
// where it was fitted: elsewhere it would promise too much, and is not used.
func cones() []*Relation {
	return []*Relation{
		{
			ID: "hegazy-mayne-1995", Name: "Hegazy & Mayne (1995)", Family: ConeTest,
			Equation: "Vs = (10.1 log qc − 11.4)^1.67 (100 fs/qc)^0.3", Units: coneUnits,
			Needs:  []Quantity{Tip, Sleeve},
			Source: "Hegazy & Mayne (1995), Statistical correlations between Vs and cone penetration data for different soil types, CPT '95, Linköping",
			For:    "all soils", Limits: "the equation itself ends at qc = 13.5 kPa", SigmaNote: noSigma, Standing: OneSource,
			formula: func(in *Input) float64 {
				return math.Pow(10.1*math.Log10(in.of(Tip))-11.4, 1.67) * math.Pow(100*in.of(Sleeve)/in.of(Tip), 0.3)
			},
		},
		{
			ID: "mayne-2006", Name: "Mayne (2006)", Family: ConeTest,
			Equation: "Vs = 118.8 log fs + 18.5", Units: coneUnits,
			Needs: []Quantity{Sleeve}, Source: "Mayne (2006), In-situ test calibrations for evaluating soil parameters, Singapore workshop",
			For: "all soils", Limits: "the equation itself ends at fs = 0.7 kPa", SigmaNote: noSigma, Standing: Checked,
			formula: func(in *Input) float64 { return 118.8*math.Log10(in.of(Sleeve)) + 18.5 },
		},
		{
			ID: "hegazy-mayne-2006", Name: "Hegazy & Mayne (2006)", Family: ConeTest,
			Equation: "Vs = 0.0831 Qtn (σ'v/pa)^0.25 exp(1.786 Ic)", Units: coneUnits + ", pa = 100 kPa",
			Needs:  []Quantity{NormalisedTip, EffectiveStress, BehaviourIndex},
			Source: "Hegazy & Mayne (2006), A global statistical correlation between shear wave velocity and cone penetration data, GeoShanghai",
			For:    "all soils", Limits: NoLimits, SigmaNote: noSigma, Standing: OneSource,
			Note: "Qtn and Ic are those of Robertson (2009)",
			formula: func(in *Input) float64 {
				return 0.0831 * in.of(NormalisedTip) * math.Pow(in.of(EffectiveStress)/Atmosphere, 0.25) * math.Exp(1.786*in.of(BehaviourIndex))
			},
		},
		andrus("Holocene", "2.27 qt^0.412 Ic^0.989 D^0.033", 2.27, 0.412, 0.989, 0.033, Checked),
		andrus("Pleistocene", "2.62 qt^0.395 Ic^0.912 D^0.124", 2.62, 0.395, 0.912, 0.124, FromMemory),
		{
			ID: "robertson-2009", Name: "Robertson (2009)", Family: ConeTest,
			Equation: "Vs = [10^(0.55 Ic + 1.68) (qt − σv)/pa]^0.5", Units: coneUnits + ", pa = 100 kPa",
			Needs:  []Quantity{CorrectedTip, TotalStress, BehaviourIndex},
			Source: "Robertson (2009), Interpretation of cone penetration tests – a unified approach, Canadian Geotechnical Journal 46:1337–1355",
			For:    "uncemented Holocene and Pleistocene soils", Limits: NoLimits, SigmaNote: noSigma, Standing: Checked,
			formula: func(in *Input) float64 {
				return math.Sqrt(math.Pow(10, 0.55*in.of(BehaviourIndex)+1.68) * (in.of(CorrectedTip) - in.of(TotalStress)) / Atmosphere)
			},
		},
		{
			ID: "mcgann-2015", Name: "McGann et al. (2015)", Family: ConeTest,
			Equation: "Vs = 18.4 qc^0.144 fs^0.0832 z^0.278", Units: coneUnits,
			Needs:  []Quantity{Tip, Sleeve, Depth},
			Source: "McGann, Bradley, Taylor, Wotherspoon & Cubrinovski (2015), Development of an empirical correlation for predicting shear wave velocity of Christchurch soils from cone penetration test data, SDEE 75",
			For:    "all soils, Holocene", Region: "Christchurch, New Zealand",
			Limits: NoLimits, SigmaNote: "its own sigma holds for Christchurch and is not used", Standing: Checked,
			formula: func(in *Input) float64 {
				return 18.4 * math.Pow(in.of(Tip), 0.144) * math.Pow(in.of(Sleeve), 0.0832) * math.Pow(in.of(Depth), 0.278)
			},
		},
		{
			ID: "zhang-tong-2017-holocene", Name: "Zhang & Tong (2017), Holocene", Family: ConeTest,
			Equation: "Vs = 10.915 qt^0.317 Ic^0.210 D^0.057 SF, SF = 0.92", Units: coneUnits,
			Needs:  []Quantity{CorrectedTip, BehaviourIndex, Depth},
			Source: "Zhang & Tong (2017); the title was not seen",
			For:    "all soils, Holocene", Limits: NoLimits, SigmaNote: noSigma, Standing: Checked,
			formula: func(in *Input) float64 {
				return 10.915 * math.Pow(in.of(CorrectedTip), 0.317) * math.Pow(in.of(BehaviourIndex), 0.210) * math.Pow(in.of(Depth), 0.057) * 0.92
			},
		},
	}
}

// andrus is a relation of Andrus et al. (2007). Their scaling factor for single
// formations is taken as 1.
func andrus(age, equation string, a, tip, index, depth float64, standing Standing) *Relation {
	return &Relation{
		ID: "andrus-2007-" + strings.ToLower(age), Name: "Andrus et al. (2007), " + age, Family: ConeTest,
		Equation: "Vs = " + equation + " SF, SF = 1", Units: coneUnits,
		Needs:  []Quantity{CorrectedTip, BehaviourIndex, Depth},
		Source: "Andrus, Mohanan, Piratheepan, Ellis & Holzer (2007), Predicting shear-wave velocity from cone penetration resistance, 4ICEGE, paper 1454",
		For:    "all soils, " + age, Limits: NoLimits, SigmaNote: noSigma, Standing: standing,
		Note: "the scaling factor of a formation is taken as 1",
		formula: func(in *Input) float64 {
			return a * math.Pow(in.of(CorrectedTip), tip) * math.Pow(in.of(BehaviourIndex), index) * math.Pow(in.of(Depth), depth)
		},
	}
}

// conesOfOneSoil are the relations from cone resistance for clay or for sand.
func conesOfOneSoil() []*Relation {
	return []*Relation{
		{
			ID: "baldi-1989-sand", Name: "Baldi et al. (1989), sand", Family: ConeTest,
			Equation: "Vs = 277 qt^0.13 σ'v^0.27", Units: "stresses in MPa, Vs in m/s",
			Needs:  []Quantity{CorrectedTip, EffectiveStress},
			Source: "Baldi, Bellotti, Ghionna, Jamiolkowski & Lo Presti (1989), Modulus of sands from CPT's and DMT's, 12th ICSMFE, Rio de Janeiro",
			For:    "uncemented silica sand", Soils: []Soil{Sand}, Limits: NoLimits, SigmaNote: noSigma, Standing: OneSource,
			formula: func(in *Input) float64 {
				return 277 * math.Pow(in.of(CorrectedTip)/1000, 0.13) * math.Pow(in.of(EffectiveStress)/1000, 0.27)
			},
		},
		{
			ID: "mayne-rix-1995-clay", Name: "Mayne & Rix (1995), clay", Family: ConeTest,
			Equation: "Vs = 1.75 qt^0.627", Units: coneUnits,
			Needs:  []Quantity{CorrectedTip},
			Source: "Mayne & Rix (1995), Correlations between shear wave velocity and cone tip resistance in natural clays, Soils and Foundations 35(2)",
			For:    "clay", Soils: []Soil{Clay}, Limits: NoLimits, SigmaNote: noSigma, Standing: Checked,
			formula: func(in *Input) float64 { return 1.75 * math.Pow(in.of(CorrectedTip), 0.627) },
		},
		{
			ID: "long-donohue-2010-clay", Name: "Long & Donohue (2010), clay", Family: ConeTest,
			Equation: "Vs = 1.961 qt^0.579 (1 + Bq)^1.202", Units: coneUnits,
			Needs:  []Quantity{CorrectedTip, PorePressureRatio},
			Source: "Long & Donohue (2010), Characterization of Norwegian marine clays with combined shear wave velocity and piezocone cone penetration test (CPTU) data, Canadian Geotechnical Journal 47",
			For:    "soft marine clay", Soils: []Soil{Clay}, Region: "Norway", Limits: NoLimits, SigmaNote: noSigma, Standing: OneSource,
			formula: func(in *Input) float64 {
				return 1.961 * math.Pow(in.of(CorrectedTip), 0.579) * math.Pow(1+in.of(PorePressureRatio), 1.202)
			},
		},
	}
}
