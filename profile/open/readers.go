package open

import (
	"shearbook/profile"
	"shearbook/profile/ags"
	"shearbook/profile/json"
	"shearbook/profile/las"
	"shearbook/profile/sitexml"
)

// readers are the readers of kinds of text, by how these begin.
var readers = map[string]func(name string, data []byte, opt Options) ([]profile.Profile, error){
	`"GROUP"`: readAGS,

	"~V": readLAS,
	"~W": readLAS,
	"~C": readLAS,
	"~A": readLAS,
	"<":  readSiteXML,
	"{":  readJSON,
	"[":  readJSON,
}

// readAGS reads a form that states its units.
func readAGS(name string, data []byte, opt Options) ([]profile.Profile, error) {
	return ags.Read(name, data, ags.Options{Map: opt.Map})
}

func readLAS(name string, data []byte, opt Options) ([]profile.Profile, error) {
	return las.Read(name, data, las.Options{Units: opt.Units, Map: opt.Map})
}

// readSiteXML reads a form whose units are fixed.
func readSiteXML(name string, data []byte, opt Options) ([]profile.Profile, error) {
	if len(opt.Map) > 0 {
		return nil, unmapped(name)
	}
	return sitexml.Read(name, data)
}

// readJSON reads a form whose units are fixed.
func readJSON(name string, data []byte, opt Options) ([]profile.Profile, error) {
	if len(opt.Map) > 0 {
		return nil, unmapped(name)
	}
	return json.Read(name, data)
}
