package ags

// kindWords are the TYPE codes that are written, in the order of the list.
var kindWords = [][2]string{
	{"ID", "Identifier that is the only one of its kind"},
	{"X", "Text"},
	{"PA", "Code that the ABBR group lists"},
	{"PT", "Code that the TYPE group lists"},
	{"PU", "Code that the UNIT group lists"},
	{"DT", "Date"},
	{"DMS", "Degrees, minutes and seconds"},
	{"1DP", "Number with 1 decimal"},
	{"2DP", "Number with 2 decimals"},
	{"U", "Number of any format"},
	{"YN", "Y for yes, N for no"},
}

// unitWords are the units that are written, in the order of the list.
var unitWords = [][2]string{
	{"m", "metre"},
	{"m/s", "metre per second"},
	{"kg/m3", "kilogram per cubic metre"},
	{"kPa", "kilopascal"},
	{"%", "percent"},
	{"yyyy-mm-dd", "year, month and day"},
}

// codeWords are the codes that are written, by heading.
var codeWords = [][3]string{
	{"WGPG_TOOL", "PSL", "PS suspension logger"},
	{"WGPG_TOOL", "FWS", "Full waveform sonic"},
	{"WGPT_PARA", "PSL-SWV", "Shear wave velocity by suspension logging"},
	{"WGPT_PARA", "PSL-PWV", "Compression wave velocity by suspension logging"},
	{"WGPT_PARA", "FWS-SWV", "Shear wave velocity by sonic logging"},
	{"WGPT_PARA", "FWS-PWV", "Compression wave velocity by sonic logging"},
	{"ISTG_TYPE", "SCPT", "Seismic cone penetration test"},
	{"ISTG_TYPE", "SDMT", "Seismic dilatometer test"},
	{"ISTG_TYPE", "DST", "Downhole seismic test"},
	{"ISTG_TYPE", "CST", "Crosshole seismic test"},
	{"ISTA_WVTY", "S", "Shear wave"},
	{"ISTA_WVTY", "P", "Compression wave"},
	{"DICT_TYPE", "GROUP", "Group"},
	{"DICT_TYPE", "HEADING", "Heading"},
	{"DICT_STAT", "KEY", "Key of the row"},
	{"DICT_STAT", "OTHER", "Neither key nor required"},
}

// ownTexts describe the headings of VSPG and VSPL beside the quantities.
var ownTexts = map[string]string{
	"LOCA_ID":   "Location identifier",
	headingRun:  "Profile identifier within its location",
	"VSPG_METH": "Method of the survey",
	"VSPG_DATE": "Date of the survey",
	"VSPG_CONT": "Who made the survey",
	"VSPG_BASI": "Basis of the velocities: measured, inverted or correlated",
	"VSPG_REAC": "Depth that the survey reached",
	"VSPG_WAT":  "Depth of the water table",
	"VSPL_TOP":  "Depth of the top of the layer",
	"VSPL_BASE": "Depth of the base of the layer, blank for a half-space",
	"VSPL_VS":   "Shear wave velocity; at the top, where it changes with depth",
	"VSPL_REF":  "Penetration was refused in the layer",
	"VSPL_BASI": "Basis of the velocity, where it is not that of the survey",
	"VSPL_SOIL": "Description of the soil",
}
