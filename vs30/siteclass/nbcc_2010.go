package siteclass

import "strings"

// nbcc2010 returns the National Building Code of Canada 2010, Division B,
// Article 4.1.8.4. Its class table went unchanged into the edition of 2015.
func nbcc2010() *Code {
	c := nbcc2015()
	c.ID = "nbcc-2010"
	c.Edition = "NBCC 2010, Division B"
	c.Table = "Table 4.1.8.4.A"
	c.Source = "NBCC 2010 Article 4.1.8.4., whose limits went unchanged into 2015; Ontario's Building Code of 2012 (O. Reg. 332/12) for what goes before what"
	c.Parameter = "V̄s"
	c.DatumNote = "the text says top 30 m and no more; the commentary was not seen"
	c.Standing = OneSource
	for i := range c.Bands {
		c.Bands[i].Standing = OneSource
	}
	for i := range c.Conditions {
		k := &c.Conditions[i]
		k.Clause = strings.ReplaceAll(k.Clause, "Table 4.1.8.4.-A", c.Table)
		k.Standing = OneSource
		if k.Kind == Barred {
			k.Standing = FromMemory
		}
	}
	c.Routes = threeWays("4.1.8.4.", OneSource)
	c.Averaging.Standing = OneSource
	c.Notes = append(c.Notes, "that the average over the softer material takes the place of that over 30 m where A or B is barred is read in the text of 2015")
	return c
}
