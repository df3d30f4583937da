package greenhouse

// Accuracy returns lines for the reader of a report on how the quick estimate compared with an independent calculation of
// the full radiative-convective column (30 to 40 layers, same dust and optics): the ratio estimate / column of the warming.
// The tests hold the estimate to these numbers.
func Accuracy() []string {
	return []string{
		"rods and shells, well mixed, solar optical depth up to 1.5 (11 cases): 0.91 to 1.09, median 0.98; beyond, up to 13 (6 cases): 0.96 to 1.15",
		"rods and shells held low, mass density falling with 2 km, solar depth up to 1.5 (11 cases): 0.73 to 1.06, median 0.93; beyond (6 cases): 0.91 to 2.0",
		"rods and shells in a layer 0-5 km (11 cases): 0.78 to 1.02; 10-20 km (11 cases): 0.81 to 1.32; 25-35 km (11 cases): 0.84 to 2.4, the worst being thin iron shells that absorb sunlight",
		"ice of 5 and 10 um, solar depth up to 1.5: well mixed (3 cases) 0.95 to 1.12, in layers from 10 km up (6 cases) 0.80 to 0.86; low, where it does little (8 cases), within 0.6 K",
		"soot-like graphite, well mixed (2 cases): 0.73 to 0.76 of the cooling; held low or in layers within 7.3 K of it; salt spheres that scatter sunlight (5 cases): within 1.1 K",
		"largest warming of a well-mixed design: aluminium rods 75.7 K at 1.1 g/m2 against 74.4 K at 1.0 g/m2, iron rods 80.7 K at 4.3 g/m2 against 83.7 K at 4.2 g/m2, aluminium shells 21.7 K at 0.38 g/m2 against 20.8 K at 0.32 g/m2",
		"forcing at fixed ground temperature, rods and shells up to solar depth 1.5: 0.91 to 1.15 well mixed, 0.76 to 1.02 held low",
	}
}

// LeftOut returns lines for the reader of a report on what the estimate leaves out or simplifies, and which way each
// pushes the warming.
func LeftOut() []string {
	return []string{
		"one column for the whole planet, annual mean: no day and night, seasons, latitudes, caps or transport (either way; four latitude columns without transport changed the full column's warming by 1%)",
		"air has no temperatures of its own: inversions that cut the ground off from air heated by the Sun are caught only on average (overstates absorbing aerosol in high layers, by up to 2.4 times for thin iron shells)",
		"height is prescribed, not computed from the heating: daytime heating may lift the particles (understates) or trap them near the ground (overstates, up to half)",
		"no feedback: CO2 or water released by the warming is not counted (understates; doubling CO2 adds about 1 K)",
		"baseline emission held from a table for 610 Pa of CO2, bands from memory of the textbook values (moves the baseline by about 2 K, the warming little)",
		"natural dust from a rough table, not changed by the aerosol (switching it off moves the warming by rods at 160 mg/m2 by 0.2 to 1.5 K)",
		"CO2's own absorption of sunlight, about 0.5% of it, is left to the ground (slightly overstates)",
		"two-stream radiation in the thermal and the solar (either way, about 2 K)",
		"sunlight in one well-mixed layer whatever the placement (either way for absorbing aerosol in layers)",
		"the Sun as a 5772 K black body; the Bond albedo is an input that sets the ground albedo, not a result",
		"particles at the temperature of the air, randomly oriented, unclumped (clumping lowers the warming per mass)",
		"no frost, no snow, no change of the ground albedo by deposited particles (either way)",
	}
}
