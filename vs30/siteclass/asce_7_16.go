package siteclass

// asce7_16 returns ASCE/SEI 7-16, chapter 20, whose text and Table 20.3-1 are
// those of 7-10.
func asce7_16() *Code {
	c := asce7_10()
	c.ID = "asce-7-16"
	c.Title = "Minimum Design Loads and Associated Criteria for Buildings and Other Structures"
	c.Edition = "ASCE/SEI 7-16 with Supplements 1 and 3"
	c.Region = "United States; IBC 2018 and IBC 2021"
	c.Source = "ASCE/SEI 7-10 Table 20.3-1, unchanged in 7-16; IBC 2009 §1613.5.5; US Army TI 809-51 (1999) Table B-1; UFC 3-310-03A; USGS design-map report tables"
	c.Default = "class D with the lower limits of 11.4.4 on the coefficients, unless the authority or the ground says E or F (11.4.3)"
	return c
}
