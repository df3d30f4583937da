package hazewright

import (
	"fmt"
	"strings"

	"hazewright/optics/greenhouse"
	"hazewright/settling"
)

// methods says how a study was computed: for each stage what is done, where it holds,
// and what is left out with the way that pushes.
func methods(p *planet) []Method {
	w := p.study.World
	return []Method{
		{
			Stage: "Optics",
			Text: "Spheres by the full Mie series, shells by the layered one. Rods by an antenna solver for the axial current (Chebyshev-Galerkin, with the metal's internal impedance and flat ends), plus the other orders of the long cylinder at oblique incidence; beyond 8 wavelengths, as in sunlight, the long cylinder with a term for the ends. " +
				"Thin metal rods scatter electrons at their surface; an oxide skin thins the metal. Averages are over random orientation, polarisation and the spread of sizes.",
			Validity: "Rods with length over diameter of 10 and more. The solver meets an independent one within 0.02 %; the model of a straight rod with flat ends is good to about 0.2 % from 20 diameters up and 1 to 2 % where the rod is as thick as a third of the wavelength. In sunlight iron is within 0.2 %, aluminium absorption within 3 % rms. Each value carries its own error estimate, the average over sizes included: single wavelengths of a spread lose a few per cent near sharp resonances, means over a spectrum under 0.5 %. Optical constants dominate: two published data sets for one metal differ by up to 30 %.",
			LeftOut: []string{
				"Bending, bundling, roughness and preferred orientation of rods: either way.",
				"Cold metal conducts better than at room temperature: either way, under 10 %.",
				"Rods as ice nuclei: either way.",
				"An oxide skin counts as empty: absorption by the oxide itself is left out.",
			},
			Source: "BohrenHuffman1983; AbramowitzStegun1964; Balanis2005; Dingle1950; and the optical data named beside each material",
		},
		{
			Stage: "Warming",
			Text: "A quick estimate, not a radiative-convective column: one layer for sunlight (natural dust and aerosol together, delta-Eddington), and per thermal band the lower of a radiative balance and a convective balance at the lapse limit, on a table of the unaided planet's emission. " +
				"A computed height profile counts as well mixed; \"held low\" puts the mass in the lowest 2 km.",
			Validity: "Estimate over an independent radiative-convective column: " + strings.Join(greenhouse.Accuracy(), "; ") + ".",
			LeftOut:  greenhouse.LeftOut(),
			Source:   "Goody1989; Meador1980; Joseph1976; Elsasser1942",
			Estimate: true,
		},
		{
			Stage: "Fall and fate",
			Text: fmt.Sprintf("Stokes drag with the Cunningham slip correction for spheres; for rods each axis joined between its continuum and free-molecular limits, fall at the mean over random orientations. "+
				"A steady column of gas at %s with eddy mixing, release at a height, exchange with the ground (lifting and burial), frost burial and the user's sinks, for new and lifted particles apart. "+
				"Agglomeration of each population with its own kind by the Fuchs kernel as one rate over the column, found together with the profile at the held burden.",
				FormatSI(w.AirTemperature, "K", 3)),
			Validity: "Any Knudsen number; Reynolds number below 0.1 unless flagged. Lifetimes with sticking are within a factor of about two of a height-resolved loss where mixing is slow.",
			LeftOut:  settling.LeftOut(),
			Source:   "Davies1945; Dahneke1973; Fuchs1964; SeinfeldPandis2006",
		},
		{
			Stage: "Supply and schedule",
			Text: "Sustaining production is the new airborne supply over what survives the release plume and the release. Ore by stoichiometry, grade and recovery; power over availability; plant and power plant by specific mass. Capacity grows as the launch windows land it. " +
				"Airborne and loose ground stores are followed in time, new and lifted mass apart; the warming follows the burden at once.",
			Validity: "Mass closes to 1e-9. Costs are not computed. The specific masses and energies are the study's inputs and most are assumptions.",
			LeftOut: []string{
				"Thermal inertia of ground and ice: warming and cooling are slower than shown.",
				"Wear of the plant during the build-up: the goal is reached later than shown.",
				"Production plant for the shipped route is at home and not counted.",
			},
			Source: "IUPAC2021; CRC2016",
		},
		{
			Stage: "Whole chain",
			Text:  "Whole planet, annual mean, one column. Feasibility grade.",
			LeftOut: []string{
				"Release of CO2 and water on warming: understates the warming (doubling the CO2 adds about 1 K).",
				"Daytime heating that stabilises the air and traps particles low (overstates the warming, up to half) or lofts them (understates the lifetime).",
				"Dark or bright metal on ground and frost: either way.",
				"Ultraviolet charging of particles: less clumping than computed.",
				"Seasons, latitudes and transport: not resolved.",
				"Ignored as small: photophoresis of metal rods, shear collisions, particle-gas temperature gap below 50 km, ultraviolet chemistry.",
			},
		},
	}
}
