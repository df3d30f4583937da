package hazewright

// FigureDef is one named result. JSON, CSV, report, catalogue and limits all read
// this table, so they cannot disagree.
type FigureDef struct {
	ID         string // lower_snake, stable
	Unit       string // SI unit of the value; "1" for a ratio
	Shown      string // unit it is shown in, as a study file would write it
	Title      string // plain words
	Definition string
	Better     int // -1 less is better, +1 more is better, 0 neither

	// get reads the value from what the engine found out, or says why there is none.
	get func(*facts) (float64, string)
}

// Figures returns the table of figures in the order in which they are shown.
func Figures() []FigureDef { return append([]FigureDef(nil), figureTable...) }

// FigureByID returns one row of the table of figures.
func FigureByID(id string) (FigureDef, bool) {
	for _, f := range figureTable {
		if f.ID == id {
			return f, true
		}
	}
	return FigureDef{}, false
}

// figureTable is the table itself.
var figureTable = []FigureDef{
	{"warming", "K", "K", "Warming", "annual-mean surface warming of the whole planet at the design's burden", +1, (*facts).warming},
	{"warming_low_held", "K", "K", "Warming if held low", "warming at the same burden held low: mass density falling with height as exp(-z/2 km)", +1, (*facts).warmingLowHeld},
	{"burden", "kg/m2", "mg/m2", "Burden", "airborne column mass that the goal needs", -1, (*facts).burden},
	{"burden_low_held", "kg/m2", "mg/m2", "Burden if held low", "burden that the goal needs held low: mass density falling with height as exp(-z/2 km)", -1, (*facts).burdenLowHeld},
	{"inventory", "kg", "Mt", "Inventory", "burden times the planet's area", -1, (*facts).inventory},
	{"ground_store", "kg/m2", "mg/m2", "Loose on the ground", "particles on the ground that wind can lift again, at steady state", -1, (*facts).groundStore},
	{"optical_depth_thermal", "1", "1", "Thermal optical depth", "vertical extinction optical depth, Planck mean at the baseline surface temperature", 0, (*facts).depthThermal},
	{"optical_depth_solar", "1", "1", "Solar optical depth", "vertical extinction optical depth, mean over a 5772 K Sun", -1, (*facts).depthSolar},
	{"sunlight_loss", "1", "%", "Sunlight lost at the ground", "1 - downward solar flux at the ground with / without the aerosol, natural dust in both", -1, (*facts).sunlightLoss},
	{"forcing", "W/m2", "W/m2", "Forcing", "change of the energy balance at fixed surface temperature", +1, (*facts).forcing},
	{"kappa_thermal", "m2/kg", "m2/kg", "Thermal absorption per mass", "Planck-mean absorption at the baseline surface temperature, share-weighted", +1, (*facts).kappaThermal},
	{"kappa_thermal_ext", "m2/kg", "m2/kg", "Thermal extinction per mass", "Planck-mean extinction at the baseline surface temperature, share-weighted", +1, (*facts).kappaThermalExt},
	{"thermal_to_solar", "1", "1", "Thermal to solar", "kappa_thermal over the solar-mean extinction", +1, (*facts).thermalToSolar},
	{"bound_share", "1", "%", "Share of the sum-rule cap", "Planck-mean extinction over the largest that the extinction sum rule allows for this shape and mass", +1, (*facts).boundShare},
	{"fall_speed", "m/s", "mm/s", "Fall speed", "at the ground, mass-weighted over sizes and share-weighted over populations", -1, (*facts).fallSpeed},
	{"fall_time", "s", "yr", "Fall time", "residence from release to first touching the ground; harmonic for a mix", +1, (*facts).fallTime},
	{"lifetime", "s", "yr", "Lifetime", "airborne inventory over new supply at steady state; time on the ground, and outside a fixed layer, not counted", +1, (*facts).lifetime},
	{"residence_total", "s", "yr", "Total residence", "airborne inventory and loose ground store over new supply", 0, (*facts).residenceTotal},
	{"cycles", "1", "1", "Lift cycles", "mass lifted again over new supply", 0, (*facts).cycles},
	{"agglomeration_time", "s", "yr", "Agglomeration time", "airborne mass over the rate at which meetings remove it", +1, (*facts).agglomerationTime},
	{"sublimation_time", "s", "s", "Sublimation time", "time in which a particle of median size sublimes in dry air at the temperature of the air column", +1, (*facts).sublimationTime},
	{"number_density", "1/m3", "1/cm3", "Number density", "particles per volume at the ground", 0, (*facts).numberDensity},
	{"layer_field", "V/m", "kV/m", "Field of the charged layer", "charge of the column over the vacuum permittivity, counter-ions absent", -1, (*facts).layerField},
	{"release_survival", "1", "%", "Survives the plume", "share of the supply that would leave its plumes single at the study's own release points; 0 where no rate would do. Under 90 % production is sized for release_points_needed", +1, (*facts).releaseSurvival},
	{"release_points_needed", "1", "1", "Release points needed", "separate release points for 90 % to survive the plume", -1, (*facts).releasePointsNeeded},
	{"production_rate", "kg/s", "t/d", "Production", "sustaining rate at the factory gate", -1, (*facts).productionRate},
	{"capacity", "kg/s", "t/d", "Capacity", "production rate with the overbuild", -1, (*facts).capacity},
	{"volume_rate", "m3/s", "L/s", "Solid volume rate", "production rate over the material's density", -1, (*facts).volumeRate},
	{"number_rate", "1/s", "1/s", "Particle rate", "particles made per second at the production rate", -1, (*facts).numberRate},
	{"ore_rate", "kg/s", "t/d", "Ore", "raw ore for the production rate", -1, (*facts).oreRate},
	{"energy_per_kg", "J/kg", "MJ/kg", "Energy per kilogram", "all steps from ore to release", -1, (*facts).energyPerKg},
	{"power", "W", "MW", "Installed power", "for the capacity, over the availability", -1, (*facts).power},
	{"plant_mass", "kg", "kt", "Plant mass", "production plant for the capacity, without its power plant", -1, (*facts).plantMass},
	{"landed_mass", "kg", "kt", "Landed mass", "local: plant and power plant for the capacity; shipped: particles to fill the inventory once, and the power plant of the release", -1, (*facts).landedMass},
	{"landed_per_window_after", "kg", "t", "Landed per window after", "spares and replacement, or shipped particles, per launch window once the goal is held", -1, (*facts).landedPerWindowAfter},
	{"flights", "1", "1", "Flights", "for the landed mass, losses included", -1, (*facts).flights},
	{"windows", "1", "1", "Launch windows", "that those flights fill", -1, (*facts).windows},
	{"time_to_goal", "s", "yr", "Time to goal", "from now until the warming is within 1 % of the goal", -1, (*facts).timeToGoal},
	{"half_loss_time", "s", "yr", "Half-loss time", "from the end of supply at the goal until half of the warming is gone", 0, (*facts).halfLossTime},
	{"radio_loss_uhf", "dB", "dB", "Radio loss, UHF", "one-way zenith loss at 0.4 GHz", -1, radioLoss(0)},
	{"radio_loss_s", "dB", "dB", "Radio loss, S band", "one-way zenith loss at 2.3 GHz", -1, radioLoss(1)},
	{"radio_loss_x", "dB", "dB", "Radio loss, X band", "one-way zenith loss at 8.4 GHz", -1, radioLoss(2)},
	{"radio_loss_ka", "dB", "dB", "Radio loss, Ka band", "one-way zenith loss at 32 GHz", -1, radioLoss(3)},
}
