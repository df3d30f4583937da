package reports

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"

	"hazewright"
)

// JSON writes the result as one JSON object: the resolved study, and for every design
// all figures, limits, losses, gates and warnings, for each sticking case where the study
// gives no sticking. Values are SI with their unit, in
// the shortest form that reads back to the same number; a figure without a value is
// {"value": null, "why": ...}. Keys may be added under the same schema_version, never
// renamed or removed.
func JSON(w io.Writer, r *hazewright.Result, p Provenance) error {
	if err := check(r); err != nil {
		return err
	}
	doc := jsonDocument{
		SchemaVersion: schemaVersion, Tool: tool, Version: p.Version, Command: p.Command, Scope: Scope,
		Study: jsonStudy{
			Title: r.Study.Title, File: baseName(r.Study.File), SHA256: r.Study.SHA256, Resolved: r.Study.Resolved(), Tables: orEmpty(r.Study.Tables),
		},
		World: worldJSON(r), Goal: goalJSON(r.Study.Goal),
		Designs:  []jsonDesign{},
		Warnings: []hazewright.Warning{},
		Methods:  methodsJSON(r),
	}
	doc.Warnings = append(doc.Warnings, r.Warnings...)
	for i := range r.Designs {
		doc.Designs = append(doc.Designs, designJSON(r, &r.Designs[i]))
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(doc); err != nil {
		return fmt.Errorf("reports: writing JSON: %w", err)
	}
	return nil
}

// orEmpty makes a nil list an empty one, so that JSON has [] and not null.
func orEmpty[T any](list []T) []T {
	if list == nil {
		return []T{}
	}
	return list
}

type jsonDocument struct {
	SchemaVersion int                  `json:"schema_version"`
	Tool          string               `json:"tool"`
	Version       string               `json:"version"`
	Command       string               `json:"command,omitempty"`
	Scope         string               `json:"scope"`
	Study         jsonStudy            `json:"study"`
	World         jsonWorld            `json:"world"`
	Goal          jsonGoal             `json:"goal"`
	Designs       []jsonDesign         `json:"designs"`
	Warnings      []hazewright.Warning `json:"warnings"`
	Methods       []jsonMethod         `json:"methods"`
}

type jsonStudy struct {
	Title    string                 `json:"title"`
	File     string                 `json:"file"` // its name, without the folder
	SHA256   string                 `json:"sha256"`
	Resolved any                    `json:"resolved"`
	Tables   []hazewright.TableFile `json:"tables"`
}

// quantityJSON is a value with its SI unit.
type quantityJSON struct {
	Value float64 `json:"value"`
	Unit  string  `json:"unit"`
}

type jsonWorld struct {
	Name               string       `json:"name"`
	Radius             quantityJSON `json:"radius"`
	Gravity            quantityJSON `json:"gravity"`
	SurfacePressure    quantityJSON `json:"surface_pressure"`
	SurfaceTemperature quantityJSON `json:"surface_temperature"`
	Area               quantityJSON `json:"area"`
	Sunlight           quantityJSON `json:"sunlight"`
	DustOpticalDepth   quantityJSON `json:"dust_optical_depth"`
	WarmSeasonMaximum  quantityJSON `json:"warm_season_maximum"`
}

func worldJSON(r *hazewright.Result) jsonWorld {
	world, base := r.Study.World, r.Baseline
	return jsonWorld{
		Name:               world.Name,
		Radius:             quantityJSON{world.Radius, "m"},
		Gravity:            quantityJSON{world.Gravity, "m/s2"},
		SurfacePressure:    quantityJSON{world.SurfacePressure, "Pa"},
		SurfaceTemperature: quantityJSON{base.SurfaceTemperature, "K"},
		Area:               quantityJSON{base.Area, "m2"},
		Sunlight:           quantityJSON{world.Sunlight, "W/m2"},
		DustOpticalDepth:   quantityJSON{world.DustOpticalDepth, "1"},
		WarmSeasonMaximum:  quantityJSON{world.WarmSeasonMaximum, "K"},
	}
}

type jsonGoal struct {
	Kind  string  `json:"kind"`
	Value float64 `json:"value"`
	Unit  string  `json:"unit"`
	At    string  `json:"at,omitempty"`
}

func goalJSON(g hazewright.Goal) jsonGoal {
	switch g.Kind {
	case "burden":
		return jsonGoal{g.Kind, g.Burden, "kg/m2", ""}
	case "optical_depth":
		return jsonGoal{g.Kind, g.OpticalDepth, "1", g.At}
	}
	return jsonGoal{g.Kind, g.Warming, "K", ""}
}

type jsonDesign struct {
	Name         string            `json:"name"`
	Reached      bool              `json:"reached"`
	Cause        string            `json:"cause"`
	Verdict      string            `json:"verdict"` // reached, when, and what stands against it
	NeverWarms   bool              `json:"never_warms"`
	LayerShare   float64           `json:"layer_share"` // of a fixed layer; 0 without one
	Figures      figuresJSON       `json:"figures"`
	Limits       []jsonLimit       `json:"limits"`
	Losses       []hazewright.Loss `json:"losses"`
	Gates        []Gate            `json:"gates"`
	Warnings     []jsonWarning     `json:"warnings"` // of all cases
	Hinge        string            `json:"hinge"`
	StickingCase string            `json:"sticking_case,omitempty"`
	Cases        []jsonCase        `json:"cases"`
	Benchmarks   []jsonBenchmark   `json:"benchmarks"`
	Populations  []jsonPopulation  `json:"populations"`
	Curve        []jsonCurvePoint  `json:"warming_curve"`
	CurveLow     []jsonCurvePoint  `json:"warming_curve_low_held"`
}

func designJSON(r *hazewright.Result, d *hazewright.DesignResult) jsonDesign {
	out := jsonDesign{
		Name: d.Name, Reached: d.Reached, Cause: d.Cause, NeverWarms: d.NeverWarms, LayerShare: d.LayerShare,
		Figures: d.Figures, Limits: limitsJSON(d.Limits), Losses: orEmpty(d.Losses), Gates: Gates(r, d),
		Warnings: []jsonWarning{}, Hinge: hinge(d), StickingCase: d.StickingCase,
		Cases: []jsonCase{}, Benchmarks: []jsonBenchmark{}, Populations: []jsonPopulation{},
		Curve: curveJSON(d.Curve), CurveLow: curveJSON(d.CurveLow),
	}
	for _, w := range warningsOf(d) {
		out.Warnings = append(out.Warnings, jsonWarning{w.Warning, w.Case})
	}
	if len(d.Cases) > 0 {
		for i, v := range variantsOf(d) {
			word, _ := v.goalWord()
			out.Cases = append(out.Cases, jsonCase{v.name, v.sticking, v.reached, word, v.figures, limitsJSON(v.limits),
				orEmpty(v.losses), orEmpty(d.Cases[i].Warnings)})
		}
	}
	out.Verdict, _ = goalWord(d)
	for _, b := range benchmarks(r, d) {
		def, _ := hazewright.FigureByID(b.Figure)
		row := jsonBenchmark{Figure: b.Figure, Value: b.Value, Unit: def.Unit, Source: b.Source}
		if b.ratio != 0 {
			row.Ratio = &b.ratio
		}
		out.Benchmarks = append(out.Benchmarks, row)
	}
	for _, p := range d.Populations {
		out.Populations = append(out.Populations, jsonPopulation{
			p.Name, p.Share, p.Material, quantityJSON{p.Density, "kg/m3"}, quantityJSON{p.ParticleMass, "kg"},
			quantityJSON{p.KappaThermal, "m2/kg"}, quantityJSON{p.KappaThermalExt, "m2/kg"}, quantityJSON{p.KappaSolarExt, "m2/kg"},
			quantityJSON{p.KappaSolarAbs, "m2/kg"}, p.OpticsMethod, p.OpticsError, quantityJSON{p.FallSpeed, "m/s"},
			quantityJSON{p.Lifetime, "s"}, p.Given, quantityJSON{p.Oxide, "m"}, p.Conducts, p.Combustible,
		})
	}
	return out
}

// figuresJSON writes the figures in the order of the table of figures.
type figuresJSON map[string]hazewright.FigureValue

// MarshalJSON returns {id: {"value", "unit"}} or {id: {"value": null, "why"}} for every
// figure of the table.
func (f figuresJSON) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, def := range hazewright.Figures() {
		if i > 0 {
			b.WriteByte(',')
		}
		v := f[def.ID]
		var entry any
		if v.Null {
			entry = struct {
				Value *float64 `json:"value"`
				Why   string   `json:"why"`
			}{nil, why(v)}
		} else {
			entry = struct {
				Value float64 `json:"value"`
				Unit  string  `json:"unit"`
				Note  string  `json:"note,omitempty"`
			}{v.Value, def.Unit, v.Note}
		}
		text, err := json.Marshal(entry)
		if err != nil {
			return nil, fmt.Errorf("figure %s: %w", def.ID, err)
		}
		fmt.Fprintf(&b, "%q:", def.ID)
		b.Write(text)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

type jsonLimit struct {
	Figure string   `json:"figure"`
	Side   string   `json:"side"` // "at_most" or "at_least"
	Bound  float64  `json:"bound"`
	Unit   string   `json:"unit"`
	Met    *bool    `json:"met"`    // null if the figure has no value
	Factor *float64 `json:"factor"` // above 1 fails; null where no ratio can be told
}

func limitsJSON(limits []hazewright.LimitResult) []jsonLimit {
	out := []jsonLimit{}
	for _, l := range limits {
		def, _ := hazewright.FigureByID(l.Figure)
		row := jsonLimit{Figure: l.Figure, Side: "at_least", Bound: l.Bound, Unit: def.Unit}
		if l.AtMost {
			row.Side = "at_most"
		}
		if l.Known {
			row.Met = &l.Met
			if l.Factor > 0 {
				row.Factor = &l.Factor
			}
		}
		out = append(out, row)
	}
	return out
}

// jsonWarning is a warning of a design; Case says in which sticking case it holds, ""
// for all.
type jsonWarning struct {
	hazewright.Warning
	Case string `json:"case,omitempty"`
}

type jsonCase struct {
	Name     string               `json:"name"`
	Sticking float64              `json:"sticking"`
	Reached  bool                 `json:"reached"`
	Verdict  string               `json:"verdict"`
	Figures  figuresJSON          `json:"figures"`
	Limits   []jsonLimit          `json:"limits"`
	Losses   []hazewright.Loss    `json:"losses"`
	Warnings []hazewright.Warning `json:"warnings"` // of this case alone or of others too
}

type jsonBenchmark struct {
	Figure string   `json:"figure"`
	Value  float64  `json:"value"`
	Unit   string   `json:"unit"`
	Ratio  *float64 `json:"ratio"` // ours over the benchmark's; null if there is none
	Source string   `json:"source"`
}

type jsonPopulation struct {
	Name            string       `json:"name"`
	Share           float64      `json:"share"`
	Material        string       `json:"material"`
	Density         quantityJSON `json:"density"`
	ParticleMass    quantityJSON `json:"particle_mass"`
	KappaThermal    quantityJSON `json:"kappa_thermal"`
	KappaThermalExt quantityJSON `json:"kappa_thermal_ext"`
	KappaSolarExt   quantityJSON `json:"kappa_solar_ext"`
	KappaSolarAbs   quantityJSON `json:"kappa_solar_abs"`
	OpticsMethod    string       `json:"optics_method"`
	OpticsError     float64      `json:"optics_error"`
	FallSpeed       quantityJSON `json:"fall_speed"`
	Lifetime        quantityJSON `json:"lifetime"`
	Given           bool         `json:"lifetime_given"`
	Oxide           quantityJSON `json:"oxide"`
	Conducts        string       `json:"conducts"`    // "yes", "no" or "unknown"
	Combustible     string       `json:"combustible"` // the same
}

type jsonCurvePoint struct {
	Burden       float64 `json:"burden"`        // kg/m2
	Warming      float64 `json:"warming"`       // K
	SunlightLoss float64 `json:"sunlight_loss"` // 1
	Valid        bool    `json:"valid"`
}

func curveJSON(curve []hazewright.CurvePoint) []jsonCurvePoint {
	out := make([]jsonCurvePoint, 0, len(curve))
	for _, p := range curve {
		out = append(out, jsonCurvePoint(p))
	}
	return out
}

type jsonMethod struct {
	Stage    string   `json:"stage"`
	Text     string   `json:"text"`
	Validity string   `json:"validity"`
	LeftOut  []string `json:"left_out"`
	Source   string   `json:"source"`
	Estimate bool     `json:"estimate"`
}

func methodsJSON(r *hazewright.Result) []jsonMethod {
	out := []jsonMethod{}
	for _, m := range r.Methods {
		out = append(out, jsonMethod{m.Stage, m.Text, m.Validity, orEmpty(m.LeftOut), m.Source, m.Estimate})
	}
	return out
}
