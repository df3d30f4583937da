package hazewright

import (
	"slices"

	"hazewright/logistics"
	"hazewright/optics/material"
)

// The kinds of input.
const (
	KindQuantity    = "quantity"    // number with a unit
	KindTemperature = "temperature" // number with K or degC
	KindNumber      = "number"      // plain number, or %
	KindFraction    = "fraction"    // plain number from 0 to 1, or %
	KindWhole       = "whole"       // whole number
	KindText        = "text"        // free text
	KindName        = "name"        // text that paths can name: designs[NAME]
	KindChoice      = "choice"      // one of Choices
	KindFlag        = "flag"        // on or off
	KindPath        = "path"        // path of another input: fate.burial_time
	KindValue       = "value"       // number or quantity; the unit is that of the figure or input it belongs to
	KindList        = "list"        // list; rows with [] describe its items
	KindMap         = "map"         // section; rows below its path describe its keys
)

// Where the value of an input comes from if the study does not give it.
const (
	assumption = "assumption"
	byStudy    = "given by the study" // there is no default
	factSheet  = "[MarsFactSheet] (value from memory)"
)

// Input is one row of the table of inputs. Loading, the catalogue and the report all
// read this table.
type Input struct {
	Path     string   // pattern: "fate.burial_time", "designs[].particles[].diameter"
	Kind     string   // one of the Kind constants
	Unit     string   // SI unit; "1" for plain numbers, "" where there is none
	Default  string   // as a study file would write it; "" = none
	Unset    string   // what happens if there is neither value nor default; "" = the key is of no concern then
	Required bool     // must be given where its section is
	Low      string   // smallest value allowed, in a unit that people use; "" = no bound
	High     string   // largest value allowed
	Example  string   // a value as a study file would write it, where the default does not show it
	Choices  []string // of a choice; for a list or map the words that may stand in its place
	Vary     Vary     // range that `uncertain: defaults` uses; zero = not varied
	Source   string   // of the default: keys of the references, or "assumption"
	Title    string   // what it is
}

// Vary is the probability law that `uncertain: defaults` gives an input.
type Vary struct {
	Law       string // "uniform", "loguniform" or "lognormal"; "" = none
	Low, High string // of uniform and loguniform
	Median    string // of lognormal
	Spread    string // geometric standard deviation of lognormal
}

// numeric reports whether an input is a number that can be swept or uncertain.
func (in Input) numeric() bool {
	switch in.Kind {
	case KindQuantity, KindTemperature, KindNumber, KindFraction, KindWhole:
		return true
	}
	return false
}

// example returns a value of the input as a study file would write it, "" where any
// text would do.
func (in Input) example() string {
	return firstOf(in.Example, in.Default, in.Low)
}

// InputTable returns the table of inputs in the order in which studies, resolved
// studies and reports show them. A design's fate and supply take the same keys as the
// study's and are not repeated.
func InputTable() []Input {
	var table []Input
	for _, part := range [][]Input{
		studyInputs, worldInputs, goalInputs, designInputs, benchmarkInputs, fateInputs, supplyInputs(), limitInputs,
		modelInputs, uncertainInputs, sweepInputs, sourceInputs,
	} {
		table = append(table, part...)
	}
	for i := range table {
		table[i].Choices = slices.Clone(table[i].Choices)
	}
	return table
}

var studyInputs = []Input{
	{Path: "study", Kind: KindText, Required: true, Source: byStudy, Title: "title of the study"},
}

// The planet. Defaults are those of the world "mars".
var worldInputs = []Input{
	{Path: "world", Kind: KindMap, Default: "mars", Choices: []string{"mars"}, Source: assumption,
		Title: "planet: a known world, or a map with base and what differs from it"},
	{Path: "world.name", Kind: KindText, Source: byStudy, Title: "name of a changed world"},
	{Path: "world.base", Kind: KindChoice, Default: "mars", Choices: []string{"mars"}, Source: assumption,
		Title: "known world that this one starts from"},
	{Path: "world.radius", Kind: KindQuantity, Unit: "m", Default: "3389.5 km", Low: "100 km", High: "20000 km", Source: factSheet,
		Title: "volumetric mean radius"},
	{Path: "world.gravity", Kind: KindQuantity, Unit: "m/s2", Default: "3.71 m/s2", Low: "1.4 m/s2", High: "10 m/s2", Source: factSheet,
		Title: "gravity at the ground"},
	{Path: "world.surface_pressure", Kind: KindQuantity, Unit: "Pa", Default: "610 Pa", Low: "100 Pa", High: "3000 Pa",
		Source: "[MarsFactSheet] gives 636 Pa at the mean radius; 610 Pa is the customary mean (values from memory)",
		Title:  "mean pressure at the ground"},
	{Path: "world.gas", Kind: KindList, Default: "[{species: CO2, share: 95.1 %}, {species: N2, share: 2.59 %}, {species: Ar, share: 1.94 %}]",
		Source: factSheet + "; the rest, 0.4 %, is left out and the shares are scaled to 100 %", Title: "gases of the air that particles fall through; the warming estimate counts carbon dioxide only"},
	{Path: "world.gas[].species", Kind: KindChoice, Required: true, Choices: []string{"CO2", "N2", "Ar", "air"}, Source: byStudy, Title: "gas"},
	{Path: "world.gas[].share", Kind: KindFraction, Unit: "1", Required: true, Low: "0.01 %", High: "100 %", Example: "95 %", Source: byStudy,
		Title: "mole fraction; all must sum to 100 % within 1 %"},
	{Path: "world.air_temperature", Kind: KindTemperature, Unit: "K", Default: "210 K", Low: "80 K", High: "400 K", Source: factSheet,
		Title: "temperature of the isothermal air that particles fall through"},
	{Path: "world.sunlight", Kind: KindQuantity, Unit: "W/m2", Default: "586.2 W/m2", Low: "150 W/m2", High: "1500 W/m2", Source: factSheet,
		Title: "mean sunlight at the planet, on a surface that faces it"},
	{Path: "world.bond_albedo", Kind: KindFraction, Unit: "1", Default: "0.25", Low: "0.02", High: "0.7", Source: factSheet,
		Title: "share of sunlight that the planet sends back, natural dust included"},
	{Path: "world.emissivity", Kind: KindFraction, Unit: "1", Default: "0.95", Low: "0.6", High: "1", Source: assumption,
		Title: "thermal emissivity of the ground"},
	{Path: "world.dust_optical_depth", Kind: KindNumber, Unit: "1", Default: "0.4", Low: "0", High: "1", Source: assumption,
		Title: "visible optical depth of natural dust, annual mean"},
	{Path: "world.lapse_limit", Kind: KindQuantity, Unit: "K/m", Default: "2.5 K/km", Low: "0.5 K/km", High: "20 K/km", Source: assumption,
		Title: "steepest fall of temperature with height before the air overturns"},
	{Path: "world.warm_season_maximum", Kind: KindTemperature, Unit: "K", Default: "293 K", Low: "100 K", High: "400 K",
		Source: assumption + ": low-latitude ground about midday in summer, about 20 degC (value from memory)",
		Title:  "warmest ground temperature of the present year, for the planetary-protection gate"},
}

var goalInputs = []Input{
	{Path: "goal", Kind: KindMap, Required: true, Source: byStudy, Title: "what is to be reached, whole planet and annual mean: exactly one of warming, burden and optical_depth"},
	{Path: "goal.warming", Kind: KindQuantity, Unit: "K", Low: "0.1 K", High: "500 K", Example: "25 K", Source: byStudy, Title: "annual-mean surface warming wanted"},
	{Path: "goal.burden", Kind: KindQuantity, Unit: "kg/m2", Low: "0.001 mg/m2", High: "10 kg/m2", Example: "85 mg/m2", Source: byStudy, Title: "airborne column mass wanted"},
	{Path: "goal.optical_depth", Kind: KindNumber, Unit: "1", Low: "0.0001", High: "50", Example: "0.5", Source: byStudy, Title: "vertical extinction optical depth wanted, where `at` says"},
	{Path: "goal.at", Kind: KindText, Example: "thermal", Source: byStudy, Title: "where the optical depth holds: thermal, solar or a wavelength (10 um)"},
}

var designInputs = []Input{
	{Path: "designs", Kind: KindList, Required: true, Source: byStudy, Title: "candidates, each with its particles"},
	{Path: "designs[].name", Kind: KindName, Required: true, Source: byStudy, Title: "name of the design"},
	{Path: "designs[].particles", Kind: KindList, Required: true, Source: byStudy, Title: "particle populations of the design"},
	{Path: "designs[].particles[].shape", Kind: KindChoice, Required: true, Choices: []string{"rod", "sphere", "shell"}, Source: byStudy, Title: "shape: a rod, a full sphere, or a shell (a sphere with a wall of the material, hollow or around a core)"},
	{Path: "designs[].particles[].radius", Kind: KindQuantity, Unit: "m", Low: "1 nm", High: "10 mm", Example: "12 um", Source: byStudy, Title: "radius of a sphere, outer radius of a shell (median)"},
	{Path: "designs[].particles[].wall", Kind: KindQuantity, Unit: "m", Low: "1 nm", High: "100 um", Example: "20 nm", Source: byStudy, Title: "thickness of a shell's wall, below its radius; the same for every size of a spread"},
	{Path: "designs[].particles[].core", Kind: KindChoice, Choices: append([]string{"hollow"}, material.Names()...), Unset: "hollow", Source: assumption, Title: "what is inside a shell's wall: hollow or a built-in material"},
	{Path: "designs[].particles[].length", Kind: KindQuantity, Unit: "m", Low: "0.1 um", High: "100 um", Example: "8 um", Source: byStudy, Title: "length of a rod (median)"},
	{Path: "designs[].particles[].diameter", Kind: KindQuantity, Unit: "m", Low: "2 nm", High: "10 um", Example: "80 nm", Source: byStudy, Title: "diameter of a rod, at most a tenth of its length"},
	{Path: "designs[].particles[].material", Kind: KindMap, Required: true, Choices: material.Names(), Source: byStudy,
		Title: "a built-in material, or a map with an optical table"},
	{Path: "designs[].particles[].material.table", Kind: KindText, Required: true, Source: byStudy,
		Title: "optical table beside the study: CSV wavelength_um,n,k, or YAML with DATA of type tabulated nk"},
	{Path: "designs[].particles[].material.density", Kind: KindQuantity, Unit: "kg/m3", Required: true, Low: "1 kg/m3", High: "25000 kg/m3", Example: "2260 kg/m3", Source: byStudy,
		Title: "density of the table's material"},
	{Path: "designs[].particles[].material.extend", Kind: KindFlag, Default: "off", Source: assumption,
		Title: "hold the end values outside the table's wavelengths, with a warning, instead of refusing a table that does not cover 0.2 um to 1000 um"},
	{Path: "designs[].particles[].spread", Kind: KindNumber, Unit: "1", Default: "1", Low: "1", High: "2.5", Source: assumption,
		Title: "geometric standard deviation of airborne number, by outer radius (rods: by length); 1 = one size"},
	{Path: "designs[].particles[].oxide", Kind: KindQuantity, Unit: "m", Unset: "the material's own default", Low: "0 nm", High: "1 um", Example: "3 nm", Source: assumption,
		Title: "thickness of the oxide skin, which thins the optical core; more than half the thickness of the particle, and of a rod 2 nm, must be left"},
	{Path: "designs[].particles[].surface_scattering", Kind: KindFlag, Default: "on", Source: assumption,
		Title: "electrons scatter at the surface of thin metal rods; no effect on spheres"},
	{Path: "designs[].particles[].share", Kind: KindFraction, Unit: "1", Low: "0.001 %", High: "100 %", Example: "40 %", Source: "a single population has it all",
		Title: "share of the design's airborne mass; 100 % for a single population"},
	{Path: "designs[].fate", Kind: KindMap, Source: byStudy, Title: "what this design's fate changes; keys as in fate"},
	{Path: "designs[].supply", Kind: KindMap, Source: byStudy, Title: "what this design's supply changes; keys as in supply"},
	{Path: "designs[].given", Kind: KindMap, Source: byStudy, Title: "values used instead of computed ones"},
	{Path: "designs[].given.lifetime", Kind: KindQuantity, Unit: "s", Low: "1 h", High: "1e6 yr", Example: "10 yr", Source: byStudy, Title: "lifetime aloft"},
	{Path: "designs[].given.kappa_thermal", Kind: KindQuantity, Unit: "m2/kg", Low: "0.001 m2/kg", High: "1e7 m2/kg", Example: "900 m2/kg", Source: byStudy,
		Title: "thermal absorption per mass; all thermal optics are scaled to it"},
	{Path: "designs[].given.burden", Kind: KindQuantity, Unit: "kg/m2", Low: "0.001 mg/m2", High: "10 kg/m2", Example: "85 mg/m2", Source: byStudy, Title: "burden at the goal"},
}

var benchmarkInputs = []Input{
	{Path: "benchmarks", Kind: KindList, Source: byStudy, Title: "published numbers to hold figures against"},
	{Path: "benchmarks[].design", Kind: KindText, Required: true, Source: byStudy, Title: "name of the design that is compared"},
	{Path: "benchmarks[].figure", Kind: KindText, Required: true, Source: byStudy, Title: "figure that is compared"},
	{Path: "benchmarks[].value", Kind: KindValue, Required: true, Source: byStudy, Title: "published value"},
	{Path: "benchmarks[].source", Kind: KindText, Required: true, Source: byStudy, Title: "where it was published"},
}

var fateInputs = []Input{
	{Path: "fate", Kind: KindMap, Source: assumption, Title: "what happens to particles once released"},
	{Path: "fate.release_height", Kind: KindQuantity, Unit: "m", Default: "2 km", Low: "0 km", High: "80 km", Source: assumption, Title: "height of release above the ground"},
	{Path: "fate.lift_height", Kind: KindQuantity, Unit: "m", Default: "1 km", Low: "0 km", High: "80 km", Source: assumption,
		Title: "height to which wind brings lifted particles"},
	{Path: "fate.profile", Kind: KindMap, Default: "computed", Choices: []string{"computed", "mixed"}, Source: assumption,
		Title: "height profile of the airborne mass: computed, mixed (as the air), or a layer. The warming counts computed as mixed; of a layer only the mass inside counts as aloft"},
	{Path: "fate.profile.layer", Kind: KindList, Required: true, Source: byStudy, Title: "bottom and top of a fixed layer"},
	{Path: "fate.profile.layer[]", Kind: KindQuantity, Unit: "m", Low: "0 km", High: "80 km", Example: "25 km", Source: byStudy, Title: "height"},
	{Path: "fate.eddy_diffusivity", Kind: KindQuantity, Unit: "m2/s", Default: "300 m2/s", Low: "0.001 m2/s", High: "1e6 m2/s",
		Vary: Vary{Law: "loguniform", Low: "10 m2/s", High: "1e4 m2/s"}, Source: assumption,
		Title: "vertical mixing of the air: one value, or a list of heights and values"},
	{Path: "fate.eddy_diffusivity[].height", Kind: KindQuantity, Unit: "m", Required: true, Low: "0 km", High: "200 km", Example: "10 km", Source: byStudy, Title: "height, ascending"},
	{Path: "fate.eddy_diffusivity[].value", Kind: KindQuantity, Unit: "m2/s", Required: true, Low: "0.001 m2/s", High: "1e6 m2/s", Example: "300 m2/s", Source: byStudy,
		Title: "vertical mixing there"},
	{Path: "fate.deposition", Kind: KindQuantity, Unit: "m/s", Default: "0 mm/s", Low: "0 mm/s", High: "1 m/s", Source: assumption,
		Title: "turbulent deposition to the ground beside the fall"},
	{Path: "fate.lift_time", Kind: KindQuantity, Unit: "s", Default: "60 d", Low: "1 s", High: "1e6 yr",
		Vary: Vary{Law: "loguniform", Low: "10 d", High: "10 yr"}, Source: assumption,
		Title: "mean time a settled particle waits before wind lifts it"},
	{Path: "fate.burial_time", Kind: KindQuantity, Unit: "s", Default: "5 yr", Low: "1 s", High: "1e6 yr",
		Vary: Vary{Law: "loguniform", Low: "1 yr", High: "100 yr"}, Source: assumption,
		Title: "mean time until a settled particle is out of the wind's reach for good"},
	{Path: "fate.frost_burial", Kind: KindQuantity, Unit: "1/s", Default: "3 %/yr", Low: "0 %/yr", High: "1000 %/yr",
		Vary: Vary{Law: "uniform", Low: "0 %/yr", High: "20 %/yr"}, Source: assumption,
		Title: "rate at which airborne mass is carried down by seasonal frost and not returned"},
	{Path: "fate.sticking", Kind: KindFraction, Unit: "1", Unset: "not given: assessed at 100 % and at 1 %", Low: "0 %", High: "100 %",
		Vary: Vary{Law: "loguniform", Low: "0.1 %", High: "100 %"}, Example: "5 %", Source: assumption,
		Title: "chance that two particles that touch stay together"},
	{Path: "fate.charge", Kind: KindNumber, Unit: "1", Default: "0", Low: "0", High: "1e6", Source: assumption,
		Title: "mean like-sign elementary charges on a particle"},
	{Path: "fate.dust", Kind: KindFlag, Default: "on", Source: assumption,
		Title: "natural dust collides with the particles; this version does not count these collisions (no effect yet)"},
	{Path: "fate.aggregate_value", Kind: KindFraction, Unit: "1", Default: "0 %", Low: "0 %", High: "100 %", Source: assumption + ": worst case",
		Title: "share of a particle's warming that stays when it is part of an aggregate, aloft and in the release plume"},
	{Path: "fate.vapour", Kind: KindChoice, Default: "dry", Choices: []string{"dry", "saturated"}, Source: assumption,
		Title: "vapour around volatile particles"},
	{Path: "fate.sinks", Kind: KindList, Default: "[]", Source: assumption, Title: "further losses of airborne mass"},
	{Path: "fate.sinks[].name", Kind: KindName, Required: true, Source: byStudy, Title: "name of the loss"},
	{Path: "fate.sinks[].rate", Kind: KindQuantity, Unit: "1/s", Required: true, Low: "0 %/yr", High: "1 1/s", Example: "1 %/yr", Source: byStudy, Title: "share lost per time"},
	{Path: "fate.return_single", Kind: KindFraction, Unit: "1", Default: "100 %", Low: "0 %", High: "100 %", Source: assumption + ": favourable",
		Title: "share of lifted particles that come back single"},
}

// supplyInputs is a function because the minerals are listed by package logistics.
func supplyInputs() []Input {
	return []Input{
		{Path: "supply", Kind: KindMap, Source: assumption, Title: "how the particles are made and brought"},
		{Path: "supply.route", Kind: KindChoice, Default: logistics.Local, Choices: []string{logistics.Local, logistics.Shipped}, Source: assumption,
			Title: "local: made on the planet; shipped: made at home and landed"},
		{Path: "supply.overbuild", Kind: KindFraction, Unit: "1", Default: "25 %", Low: "0 %", High: "1000 %", Source: assumption,
			Title: "capacity above the sustaining rate; without any the goal is only approached"},
		{Path: "supply.feedstock", Kind: KindMap, Source: assumption, Title: "what the product is made from"},
		{Path: "supply.feedstock.mineral", Kind: KindChoice, Default: "hematite", Choices: logistics.Minerals(), Source: assumption, Title: "mineral of the ore"},
		{Path: "supply.feedstock.grade", Kind: KindFraction, Unit: "1", Default: "15 %", Low: "0.0001 %", High: "100 %", Source: assumption, Title: "mass share of the mineral in the ore"},
		{Path: "supply.feedstock.recovery", Kind: KindFraction, Unit: "1", Default: "80 %", Low: "0.1 %", High: "100 %", Source: assumption, Title: "share of the mineral that is recovered"},
		{Path: "supply.energy", Kind: KindMap, Source: assumption, Title: "energy by step, each per kg of product"},
		{Path: "supply.energy.mining", Kind: KindQuantity, Unit: "J/kg", Default: "0.3 MJ/kg", Low: "0 MJ/kg", High: "1e5 MJ/kg", Source: assumption, Title: "mining and dressing"},
		{Path: "supply.energy.reduction", Kind: KindQuantity, Unit: "J/kg", Default: "20 MJ/kg", Low: "0 MJ/kg", High: "1e5 MJ/kg",
			Vary: Vary{Law: "uniform", Low: "10 MJ/kg", High: "40 MJ/kg"}, Source: assumption, Title: "reduction to the material"},
		{Path: "supply.energy.shaping", Kind: KindQuantity, Unit: "J/kg", Default: "40 MJ/kg", Low: "0 MJ/kg", High: "1e5 MJ/kg",
			Vary: Vary{Law: "loguniform", Low: "5 MJ/kg", High: "500 MJ/kg"}, Source: assumption, Title: "making the particles"},
		{Path: "supply.energy.release", Kind: KindQuantity, Unit: "J/kg", Default: "0.5 MJ/kg", Low: "0 MJ/kg", High: "1e5 MJ/kg", Source: assumption, Title: "setting them free aloft"},
		{Path: "supply.availability", Kind: KindFraction, Unit: "1", Default: "85 %", Low: "0.1 %", High: "100 %",
			Vary: Vary{Law: "uniform", Low: "50 %", High: "95 %"}, Source: assumption,
			Title: "share of the time that the power runs; installed power is divided by it (plant mass is per average output)"},
		{Path: "supply.plant", Kind: KindMap, Source: assumption, Title: "production plant"},
		{Path: "supply.plant.specific_mass", Kind: KindQuantity, Unit: "kg/(kg/s)", Default: "25 t/(t/d)", Low: "0 t/(t/d)", High: "1e5 t/(t/d)",
			Vary: Vary{Law: "loguniform", Low: "5 t/(t/d)", High: "100 t/(t/d)"}, Source: assumption, Title: "plant mass per production capacity, as an average over the year"},
		{Path: "supply.plant.spares", Kind: KindQuantity, Unit: "1/s", Default: "5 %/yr", Low: "0 %/yr", High: "1000 %/yr", Source: assumption, Title: "plant mass replaced as spares"},
		{Path: "supply.plant.life", Kind: KindQuantity, Unit: "s", Default: "20 yr", Low: "1 d", High: "1e5 yr", Source: assumption, Title: "time until plant and power plant are landed anew"},
		{Path: "supply.plant.commissioning", Kind: KindQuantity, Unit: "s", Default: "1 yr", Low: "0 d", High: "1000 yr", Source: assumption, Title: "from landing to running"},
		{Path: "supply.power", Kind: KindMap, Source: assumption, Title: "power plant"},
		{Path: "supply.power.source", Kind: KindChoice, Default: "fission", Choices: []string{"fission", "solar"}, Source: assumption, Title: "kind of power plant, for the gates; the mass per power carries the difference"},
		{Path: "supply.power.specific_mass", Kind: KindQuantity, Unit: "kg/W", Default: "60 kg/kW", Low: "0 kg/kW", High: "1e5 kg/kW",
			Vary: Vary{Law: "loguniform", Low: "20 kg/kW", High: "150 kg/kW"}, Source: assumption, Title: "mass per installed power"},
		{Path: "supply.release", Kind: KindMap, Source: assumption, Title: "how particles are set free"},
		{Path: "supply.release.points", Kind: KindWhole, Unit: "1", Default: "12", Low: "1", High: "1000000", Source: assumption, Title: "separate release points; where under 90 % survive their plume, production is sized for as many as that needs"},
		{Path: "supply.release.radius", Kind: KindQuantity, Unit: "m", Default: "5 m", Low: "1 cm", High: "100 km", Source: assumption, Title: "radius of one plume at its source"},
		{Path: "supply.release.wind", Kind: KindQuantity, Unit: "m/s", Default: "5 m/s", Low: "0.01 m/s", High: "200 m/s", Source: assumption, Title: "wind at the release"},
		{Path: "supply.release.spreading", Kind: KindNumber, Unit: "1", Default: "0.1", Low: "0.001", High: "2", Source: assumption, Title: "slope of plume radius against distance"},
		{Path: "supply.release_loss", Kind: KindFraction, Unit: "1", Default: "2 %", Low: "0 %", High: "99 %", Source: assumption, Title: "share lost between factory gate and release"},
		{Path: "supply.delivery", Kind: KindMap, Source: assumption, Title: "transport from home"},
		{Path: "supply.delivery.payload", Kind: KindQuantity, Unit: "kg", Default: "60 t", Low: "1 kg", High: "1 Mt", Source: assumption, Title: "landed per flight"},
		{Path: "supply.delivery.flights_per_window", Kind: KindWhole, Unit: "1", Default: "12", Low: "1", High: "1000000", Source: assumption, Title: "flights in a launch window"},
		{Path: "supply.delivery.window_spacing", Kind: KindQuantity, Unit: "s", Default: "779.94 d", Low: "1 d", High: "1000 yr",
			Source: "[MarsFactSheet] synodic period (value from memory)", Title: "time between launch windows"},
		{Path: "supply.delivery.first_window", Kind: KindQuantity, Unit: "s", Default: "4 yr", Low: "0 yr", High: "1000 yr", Source: assumption, Title: "from now to the first landing"},
		{Path: "supply.delivery.loss", Kind: KindFraction, Unit: "1", Default: "2 %", Low: "0 %", High: "99 %", Source: assumption, Title: "share of flights lost"},
		{Path: "supply.stop_at", Kind: KindQuantity, Unit: "s", Unset: "supply goes on", Low: "1 d", High: "1e6 yr", Example: "80 yr", Source: assumption, Title: "end of supply, for the ending"},
	}
}

var limitInputs = []Input{
	{Path: "limits", Kind: KindList, Source: byStudy, Title: "bounds that the board sets on figures"},
	{Path: "limits[].figure", Kind: KindText, Required: true, Source: byStudy, Title: "figure that is bounded"},
	{Path: "limits[].at_most", Kind: KindValue, Source: byStudy, Title: "upper bound"},
	{Path: "limits[].at_least", Kind: KindValue, Source: byStudy, Title: "lower bound"},
}

var modelFactor = Vary{Law: "lognormal", Median: "1", Spread: "1.3"}

var modelInputs = []Input{
	{Path: "model", Kind: KindMap, Source: assumption, Title: "factors for the model's own error; 1 is the model as it is"},
	{Path: "model.warming_factor", Kind: KindNumber, Unit: "1", Default: "1", Low: "0.01", High: "100", Vary: modelFactor, Source: assumption, Title: "times the computed warming"},
	{Path: "model.kappa_factor", Kind: KindNumber, Unit: "1", Default: "1", Low: "0.01", High: "100", Vary: modelFactor, Source: assumption, Title: "times the computed thermal cross-sections"},
	{Path: "model.fall_speed_factor", Kind: KindNumber, Unit: "1", Default: "1", Low: "0.01", High: "100", Vary: modelFactor, Source: assumption, Title: "times the computed fall speed"},
	{Path: "model.kernel_factor", Kind: KindNumber, Unit: "1", Default: "1", Low: "0.01", High: "100", Vary: modelFactor, Source: assumption, Title: "times the computed rate of meetings"},
}

var uncertainInputs = []Input{
	{Path: "uncertain", Kind: KindList, Choices: []string{"defaults"}, Source: byStudy, Title: "inputs with a probability law, or `defaults` for the ranges of this table; checked, but this version draws no samples"},
	{Path: "uncertain[].at", Kind: KindPath, Required: true, Source: byStudy, Title: "path of the input"},
	{Path: "uncertain[].law", Kind: KindChoice, Required: true, Choices: []string{"uniform", "loguniform", "triangular", "normal", "lognormal"}, Source: byStudy, Title: "probability law"},
	{Path: "uncertain[].low", Kind: KindValue, Source: byStudy, Title: "lowest value (uniform, loguniform, triangular)"},
	{Path: "uncertain[].high", Kind: KindValue, Source: byStudy, Title: "highest value (uniform, loguniform, triangular)"},
	{Path: "uncertain[].mode", Kind: KindValue, Source: byStudy, Title: "likeliest value (triangular)"},
	{Path: "uncertain[].mean", Kind: KindValue, Source: byStudy, Title: "mean (normal)"},
	{Path: "uncertain[].sd", Kind: KindValue, Source: byStudy, Title: "standard deviation (normal)"},
	{Path: "uncertain[].median", Kind: KindValue, Source: byStudy, Title: "median (lognormal)"},
	{Path: "uncertain[].spread", Kind: KindNumber, Unit: "1", Low: "1", High: "100", Example: "1.3", Source: byStudy, Title: "geometric standard deviation (lognormal)"},
}

var sweepInputs = []Input{
	{Path: "sweeps", Kind: KindList, Source: byStudy, Title: "inputs that are varied over a range; checked, but this version does not run them"},
	{Path: "sweeps[].name", Kind: KindName, Required: true, Source: byStudy, Title: "name of the sweep"},
	{Path: "sweeps[].at", Kind: KindPath, Required: true, Source: byStudy, Title: "path of the input"},
	{Path: "sweeps[].from", Kind: KindValue, Required: true, Source: byStudy, Title: "first value"},
	{Path: "sweeps[].to", Kind: KindValue, Required: true, Source: byStudy, Title: "last value"},
	{Path: "sweeps[].points", Kind: KindWhole, Unit: "1", Default: "25", Low: "2", High: "1000", Source: assumption, Title: "number of values"},
	{Path: "sweeps[].scale", Kind: KindChoice, Default: "linear", Choices: []string{"linear", "log"}, Source: assumption, Title: "spacing of the values"},
}

var sourceInputs = []Input{
	{Path: "sources", Kind: KindList, Source: byStudy, Title: "where the study's values come from"},
	{Path: "sources[].at", Kind: KindPath, Required: true, Source: byStudy, Title: "path of the input"},
	{Path: "sources[].text", Kind: KindText, Required: true, Source: byStudy, Title: "its source"},
}
