package extend

// boore2011 returns the relation of Boore, Thompson & Cadet (2011) between the
// average over z = 5 to 29 m and Vs30, with z the depth of the profile:
//
//	log Vs30 = c₀ + c₁·log Vs_z + c₂·(log Vs_z)²
//
// It was fitted to the KiK-net holes of Japan (one source), which were drilled
// on rock-like ground and grow stiffer with depth than those of California,
// Turkey or Europe: for the same shallow average it gives more than
// boore2004. The sigma of the table is that of log Vs30. Depths between two
// rows are interpolated.
func boore2011() *Relation {
	return &Relation{
		ID:   "boore-2011",
		Name: "Boore, Thompson & Cadet (2011)",
		Source: "Boore, Thompson & Cadet (2011), Regional correlations of Vs30 and velocities averaged over depths " +
			"less than and greater than 30 m, BSSA 101(6):3046–3059",
		Cite:        "Boore, Thompson & Cadet 2011, BSSA 101(6):3046–3059",
		Region:      "Japan (KiK-net, rock-like sites)",
		AverageOnly: true,
		MinDepth:    5, MaxDepth: 29,
		MinVelocity: slowGround, MaxVelocity: hardRock,
		Limits:   "depths from the table of the paper; velocities are our own limits",
		Surface:  true,
		Over:     []float64{thirty, hundredFeet},
		Standing: OneSource,
		refuses:  true,
		estimate: fitted,

		//  z (m), c₀, c₁, c₂, sigma of log Vs30
		table: []row{
			{5, 0.2046, 1.318, -0.1174, 0.119},
			{6, -0.06072, 1.482, -0.1423, 0.111},
			{7, -0.2744, 1.607, -0.1600, 0.103},
			{8, -0.3723, 1.649, -0.1634, 0.097},
			{9, -0.4941, 1.707, -0.1692, 0.090},
			{10, -0.5438, 1.715, -0.1667, 0.084},
			{11, -0.6006, 1.727, -0.1649, 0.078},
			{12, -0.6082, 1.707, -0.1576, 0.072},
			{13, -0.6322, 1.698, -0.1524, 0.067},
			{14, -0.6118, 1.659, -0.1421, 0.062},
			{15, -0.5780, 1.611, -0.1303, 0.056},
			{16, -0.5430, 1.565, -0.1193, 0.052},
			{17, -0.5282, 1.535, -0.1115, 0.047},
			{18, -0.4960, 1.494, -0.1020, 0.043},
			{19, -0.4552, 1.447, -0.09156, 0.038},
			{20, -0.4059, 1.396, -0.08064, 0.035},
			{21, -0.3827, 1.365, -0.07338, 0.030},
			{22, -0.3531, 1.331, -0.06585, 0.027},
			{23, -0.3158, 1.291, -0.05751, 0.023},
			{24, -0.2736, 1.250, -0.04896, 0.019},
			{25, -0.2227, 1.202, -0.03943, 0.016},
			{26, -0.1768, 1.159, -0.03087, 0.013},
			{27, -0.1349, 1.120, -0.02310, 0.009},
			{28, -0.09038, 1.080, -0.01527, 0.006},
			{29, -0.04612, 1.040, -0.007618, 0.003},
		},
	}
}
