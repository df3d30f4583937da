package reports

import (
	"slices"

	"hazewright"
)

// group is a run of figures under one heading.
type group struct {
	title   string
	figures []hazewright.FigureDef
}

// headings assigns figures to headings by id; a figure in none comes last, so that a
// new one cannot be lost.
var headings = []struct {
	title string
	ids   []string
}{
	{"Warming", []string{"warming", "warming_low_held", "burden", "burden_low_held", "inventory", "forcing"}},
	{"Light", []string{"optical_depth_thermal", "optical_depth_solar", "sunlight_loss", "kappa_thermal", "kappa_thermal_ext",
		"thermal_to_solar", "bound_share"}},
	{"Time aloft", []string{"fall_speed", "fall_time", "lifetime", "residence_total", "cycles", "agglomeration_time",
		"sublimation_time", "ground_store", "number_density", "layer_field"}},
	{"Supply", []string{"production_rate", "capacity", "volume_rate", "number_rate", "ore_rate", "energy_per_kg", "power",
		"release_survival", "release_points_needed"}},
	{"Delivery", []string{"plant_mass", "landed_mass", "landed_per_window_after", "flights", "windows"}},
	{"Schedule", []string{"time_to_goal", "half_loss_time"}},
	{"Radio", []string{"radio_loss_uhf", "radio_loss_s", "radio_loss_x", "radio_loss_ka"}},
}

// mainIDs are the figures of the terminal table; the report, JSON and CSV have all.
var mainIDs = []string{
	"warming", "warming_low_held", "burden", "burden_low_held",
	"optical_depth_thermal", "sunlight_loss", "kappa_thermal",
	"fall_time", "lifetime", "agglomeration_time",
	"production_rate", "ore_rate", "energy_per_kg", "power",
	"plant_mass", "landed_mass", "flights", "windows",
	"time_to_goal", "half_loss_time",
}

// caseIDs are the figures that depend on sticking and are shown for each case of it.
var caseIDs = []string{"burden", "lifetime", "production_rate", "power", "landed_mass", "time_to_goal"}

// answerCaseIDs are those of the first screen.
var answerCaseIDs = []string{"lifetime", "production_rate", "power", "landed_mass"}

// answerIDs are the figures of the first screen.
var answerIDs = []string{"burden", "lifetime", "production_rate", "landed_mass", "time_to_goal"}

// groups returns the table of figures under headings; only keeps those in the list,
// nil keeps all.
func groups(only []string) []group {
	var out []group
	placed := map[string]bool{}
	add := func(title string, ids []string) {
		g := group{title: title}
		for _, id := range ids {
			placed[id] = true
			if def, ok := hazewright.FigureByID(id); ok && (only == nil || slices.Contains(only, id)) {
				g.figures = append(g.figures, def)
			}
		}
		if len(g.figures) > 0 {
			out = append(out, g)
		}
	}
	for _, h := range headings {
		add(h.title, h.ids)
	}
	var rest []string
	for _, def := range hazewright.Figures() {
		if !placed[def.ID] {
			rest = append(rest, def.ID)
		}
	}
	add("Other", rest)
	return out
}

// defs returns rows of the table of figures by id, in the order given.
func defs(ids []string) []hazewright.FigureDef {
	var out []hazewright.FigureDef
	for _, id := range ids {
		if def, ok := hazewright.FigureByID(id); ok {
			out = append(out, def)
		}
	}
	return out
}

// withoutProgramme are the figures that are nought by definition where there is no
// programme at all; the others have no meaning there.
var withoutProgramme = []string{
	"warming", "warming_low_held", "burden", "burden_low_held", "inventory", "ground_store", "optical_depth_thermal",
	"optical_depth_solar", "sunlight_loss", "forcing", "number_density", "layer_field", "production_rate", "capacity",
	"volume_rate", "number_rate", "ore_rate", "power", "plant_mass", "landed_mass", "landed_per_window_after", "flights",
	"windows", "radio_loss_uhf", "radio_loss_s", "radio_loss_x", "radio_loss_ka",
}

// noProgramme returns the cell of the "no programme" column for a figure.
func noProgramme(id string) string {
	if slices.Contains(withoutProgramme, id) {
		return "0"
	}
	return "-"
}
