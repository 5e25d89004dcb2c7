package extend

// boore2004 returns the relation of Boore (2004) between the average over d =
// 10 to 29 m and Vs30, with d the depth of the profile:
//
//	log Vs30 = a + b·log Vs_d
//
// It was fitted to 135 boreholes in California (Table 2 of the paper; one
// source). The sigma of the table is that of log Vs30. Depths between two rows
// are interpolated.
func boore2004() *Relation {
	return &Relation{
		ID:   "boore-2004",
		Name: "Boore (2004)",
		Source: "Boore (2004), Estimating Vs(30) (or NEHRP site classes) from shallow velocity models (depths < 30 m), " +
			"BSSA 94(2):591–597, doi:10.1785/0120030105, Table 2",
		Cite:        "Boore 2004, BSSA 94(2):591–597, doi:10.1785/0120030105",
		Region:      "California",
		AverageOnly: true,
		MinDepth:    10, MaxDepth: 29,
		MinVelocity: slowGround, MaxVelocity: hardRock,
		Limits:   "depths from the table of the paper; velocities are our own limits",
		Surface:  true,
		Over:     []float64{thirty, hundredFeet},
		Standing: OneSource,
		refuses:  true,
		estimate: fitted,

		//  d (m), a, b, –, sigma of log Vs30
		table: []row{
			{10, 0.042062, 1.0292, 0, 0.071260},
			{11, 0.022140, 1.0341, 0, 0.064722},
			{12, 0.012571, 1.0352, 0, 0.059353},
			{13, 0.014186, 1.0318, 0, 0.054754},
			{14, 0.012300, 1.0297, 0, 0.050086},
			{15, 0.013795, 1.0263, 0, 0.045925},
			{16, 0.013893, 1.0237, 0, 0.042219},
			{17, 0.019565, 1.0190, 0, 0.039422},
			{18, 0.024879, 1.0144, 0, 0.036365},
			{19, 0.025614, 1.0117, 0, 0.033233},
			{20, 0.025439, 1.0095, 0, 0.030181},
			{21, 0.025311, 1.0072, 0, 0.027001},
			{22, 0.026900, 1.0044, 0, 0.024087},
			{23, 0.022207, 1.0042, 0, 0.020826},
			{24, 0.016891, 1.0043, 0, 0.017676},
			{25, 0.011483, 1.0045, 0, 0.014691},
			{26, 0.0065646, 1.0045, 0, 0.011452},
			{27, 0.0025190, 1.0043, 0, 0.0083871},
			{28, 0.00077322, 1.0031, 0, 0.0055264},
			{29, 0.00043143, 1.0015, 0, 0.0027355},
		},
	}
}
