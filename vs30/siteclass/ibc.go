package siteclass

import "strings"

// The International Building Codes have no site-class table of their own:
// they send the reader to chapter 20 of the edition of ASCE/SEI 7 that they
// adopt.

// ibc2012 returns the International Building Code of 2012.
func ibc2012() *Code { return ibc("2012", "1613.3", asce7_10(), Checked) }

// ibc2015 returns the International Building Code of 2015.
func ibc2015() *Code { return ibc("2015", "1613.3", asce7_10(), Checked) }

// ibc2018 returns the International Building Code of 2018.
func ibc2018() *Code { return ibc("2018", "1613.2.2", asce7_16(), OneSource) }

// ibc2021 returns the International Building Code of 2021.
func ibc2021() *Code { return ibc("2021", "1613.2.2", asce7_16(), FromMemory) }

// ibc2024 returns the International Building Code of 2024.
func ibc2024() *Code { return ibc("2024", "1613.2", asce7_22(), OneSource) }

func ibc(year, clause string, table *Code, s Standing) *Code {
	edition, _, _ := strings.Cut(table.Edition, " with ")
	c := adopted(table, "IBC "+year+" ("+clause+") takes its site classes from "+edition+", chapter 20; that table decides", s)
	c.ID = "ibc-" + year
	c.Title = "International Building Code"
	c.Edition = "IBC " + year
	c.Clause = clause
	c.Region = "United States and others, where adopted"
	return c
}

// adopted returns the code of a table under another name. It stands no better
// than the table, nor than the adoption.
func adopted(table *Code, how string, s Standing) *Code {
	c := *table
	c.Adopts, c.Adoption, c.AdoptionStanding = table.ID, how, s
	c.Standing = max(c.Standing, s)
	edition, _, _ := strings.Cut(table.Edition, " with ")
	c.Table = table.Table + " of " + edition
	c.ready = nil
	return &c
}
