package notebook

import (
	"shearbook/profile"
	"shearbook/report"
	"shearbook/vs30/spread"
)

func (ev *evaluation) densityFigure(*site, *spread.Sample, spread.Lognormal, spread.Classes, profile.Place) []report.Block {
	return nil
}
func (ev *evaluation) flipFigure(*site, []profile.Layer, []spread.Share, *spread.Flip, *spread.Flip, profile.Place) []report.Block {
	return nil
}
func (ev *evaluation) bandFigure([]*site, []spread.Line, float64, profile.Place) []report.Block {
	return nil
}
