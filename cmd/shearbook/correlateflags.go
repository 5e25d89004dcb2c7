package main

import (
	"github.com/spf13/pflag"

	"shearbook/profile"
	"shearbook/profile/correlate"
)

// correlateFlags are the flags that ask for estimates where there are no
// velocities.
type correlateFlags struct {
	relations                           []string
	unitWeight, waterTable, energyRatio string
}

// correlateFlagNames are their names.
var correlateFlagNames = []string{"correlate", "unit-weight", "water-table", "energy-ratio"}

func (f *correlateFlags) define(fl *pflag.FlagSet) {
	fl.StringSliceVar(&f.relations, "correlate", nil, "`ID`s of relations, where Vs is not measured")
	fl.StringVar(&f.unitWeight, "unit-weight", "", "`weight` of ground, for --correlate: 18kN/m3")
	fl.StringVar(&f.waterTable, "water-table", "", "`depth` of the water, for --correlate: 2m")
	fl.StringVar(&f.energyRatio, "energy-ratio", "", "`percent` of the hammer, for --correlate: 72%")
}

// options reads the flags.
func (f *correlateFlags) options() (o correlate.Options, err error) {
	if len(f.relations) == 0 {
		if f.unitWeight+f.waterTable+f.energyRatio != "" {
			return o, misuse("add --correlate imai-tonouchi-1982, or others of `shearbook correlations`",
				"--unit-weight, --water-table and --energy-ratio are for correlations, and none is named")
		}
		return o, nil
	}
	o.Relations = f.relations
	if f.unitWeight != "" {
		if o.UnitWeight, err = correlate.ParseUnitWeight(f.unitWeight); err != nil {
			return o, misuse("write it with its unit, as --unit-weight 18kN/m3", "--unit-weight: %v", err)
		}
	}
	if o.WaterTable, err = depthFlag("water-table", f.waterTable); err != nil {
		return o, err
	}
	if f.energyRatio != "" {
		if o.Drive.EnergyRatio, err = profile.ParseValue(f.energyRatio, profile.Percent); err != nil {
			return o, misuse("write it with its unit, as --energy-ratio 72%", "--energy-ratio: %v", err)
		}
	}
	if err := o.Check(); err != nil {
		return o, misuse("`shearbook correlations` lists the relations, and what each needs", "--correlate: %v", err)
	}
	return o, nil
}
