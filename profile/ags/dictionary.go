package ags

// What is read of the dictionaries of AGS4 editions 4.0.4 (2022), 4.1, 4.1.1
// (2025) and 4.2 (2026): AGS Data Format Working Group, Electronic Transfer of
// Geotechnical and Geoenvironmental Data.

// editions are those that TRAN_AGS may state.
var editions = []string{"4.0", "4.0.1", "4.0.2", "4.0.3", "4.0.4", "4.1", "4.1.1", "4.2"}

// editionAssumed is taken where a file does not say which it is of, or says no
// more than 4 (common practice).
const editionAssumed = "4.1.1"

// headerGroups are the groups that are about no hole.
var headerGroups = []string{"PROJ", "TRAN", "ABBR", "DICT", "FILE"}

// usualUnits are the units that the dictionaries give for headings that are
// read, and whose UNIT row may therefore be blank. Depths under other headings
// are in m. Stresses of cone tests are not among them: files give MPa and kPa
// alike, and the velocity of the wrong one is believed.
var usualUnits = map[string]string{
	"LOCA_GL":   "m",
	"ISPT_ERAT": "%",
	"ISPT_PEN3": "mm", "ISPT_PEN4": "mm", "ISPT_PEN5": "mm", "ISPT_PEN6": "mm",
	"LLPL_LL": "%", "LLPL_PL": "%", "LLPL_PI": "%",
	"LNMC_MC":   "%",
	"LDEN_BDEN": "Mg/m3",
	"TRIT_CU":   "kPa", "TRET_CU": "kPa", "IVAN_IVAN": "kPa",
}

// laboratory are the headings of velocities measured on specimens, which are
// no profile of the ground.
var laboratory = []string{"LDYN_SWAV", "RESC_SWV", "CTRC_SWV"}

// parameter is what a code of WGPT_PARA stands for.
type parameter uint8

const (
	otherParameter parameter = iota
	shearVelocity
	shearSlowness
	compression
)

// parameters are the codes of WGPT_PARA that are read. The unit of a row says
// whether it is a velocity or a slowness.
var parameters = map[string]parameter{
	"PSL-SWV": shearVelocity, "FWS-SWV": shearVelocity, "FWS-DTS": shearSlowness,
	"PSL-PWV": compression, "FWS-PWV": compression, "FWS-DTP": compression,
}

// methods are the survey's methods behind the codes of WGPG_TOOL and
// ISTG_TYPE.
var methods = map[string]string{
	"PSL": "PS suspension logging", "FWS": "full-waveform sonic logging",
	"SCPT": "seismic cone", "SDMT": "seismic dilatometer", "DST": "downhole", "CST": "crosshole",
}

// methodWords tell the code that a method belongs to. The first that is in it
// counts.
var methodWords = []struct {
	word, code string
}{
	{"suspension", "PSL"}, {"sonic", "FWS"}, {"waveform", "FWS"},
	{"seismic cone", "SCPT"}, {"scpt", "SCPT"}, {"dilatometer", "SDMT"}, {"sdmt", "SDMT"},
	{"downhole", "DST"}, {"down-hole", "DST"}, {"crosshole", "CST"}, {"cross-hole", "CST"},
}

// wells are the codes of tools that are lowered down a hole; the others are
// of seismic tests.
var wells = []string{"PSL", "FWS"}
