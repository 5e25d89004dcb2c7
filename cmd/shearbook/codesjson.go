package main

import (
	"encoding/json"
	"io"

	"shearbook/report"
	"shearbook/vs30/siteclass"
	"shearbook/vs30/siteclass/codefile"
)

// codesSchema is the version of what `codes --format json` writes.
const codesSchema = 1

// codeList is what `codes --format json` writes; the help of codes documents
// it.
type codeList struct {
	Schema       int         `json:"schema"`
	Confirmation string      `json:"confirmation"`
	Codes        []codeEntry `json:"codes"`
}

type codeEntry struct {
	ID           string       `json:"id"`
	Title        string       `json:"title"`
	Edition      string       `json:"edition"`
	Region       string       `json:"region"`
	Clause       string       `json:"clause"`
	Table        string       `json:"table"`
	Parameter    string       `json:"parameter"`
	Depth        string       `json:"depth"`   // as the code words it
	DepthSI      float64      `json:"depth_m"` // the largest where the code varies it
	Datum        string       `json:"datum"`
	Unit         string       `json:"unit"`          // of vs
	StrengthUnit string       `json:"strength_unit"` // of su; "" if the table has none
	Standing     string       `json:"standing"`
	OwnRule      bool         `json:"own_rule"`
	Classes      []classEntry `json:"classes"`
}

type classEntry struct {
	Class    string   `json:"class"`
	Name     string   `json:"name"`
	Vs       string   `json:"vs"`
	N        string   `json:"n"`
	Su       string   `json:"su"`
	Rules    []string `json:"rules"`
	Also     string   `json:"also"`
	Standing string   `json:"standing"`
}

// writeCodes writes codes as indented JSON with a final newline.
func writeCodes(w io.Writer, codes []*siteclass.Code) error {
	list := codeList{codesSchema, report.Caution, []codeEntry{}}
	for _, c := range codes {
		list.Codes = append(list.Codes, newCodeEntry(c))
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(list)
}

func newCodeEntry(c *siteclass.Code) codeEntry {
	e := codeEntry{
		ID: c.ID, Title: c.Title, Edition: c.Edition, Region: c.Region, Clause: c.Clause, Table: c.Table,
		Parameter: c.Parameter, Depth: c.DepthText, DepthSI: c.Depth, Datum: c.Datum.String(),
		Unit: c.Unit.Name, StrengthUnit: c.SuUnit.Name, Standing: c.Standing.String(), OwnRule: c.OwnRule(),
		Classes: []classEntry{},
	}
	for _, b := range c.Bands {
		e.Classes = append(e.Classes, classEntry{
			Class: b.Class, Name: b.Name, Vs: codefile.Range(b.Vs), N: codefile.Range(b.N), Su: codefile.Range(b.Su),
			Rules: append([]string{}, c.RulesOf(b.Class)...), Also: b.Also, Standing: b.Standing.String(),
		})
	}
	return e
}
