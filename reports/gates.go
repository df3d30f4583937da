package reports

import (
	"fmt"
	"strings"

	"hazewright"
)

// States of a gate. None is a clearance: a rule that does not trip has only not
// found what it looks for.
const (
	Tripped    = "tripped"
	NotTripped = "not tripped by this rule"
	NotKnown   = "not known"
)

// GateDef is a safety or planetary-protection condition with the rule that trips it.
type GateDef struct {
	ID       string // lower-case with hyphens, stable
	Title    string
	Source   string // key of REFERENCES.md, or who says so
	Text     string // what the condition is about, and the rule
	NextStep string // what to do if it trips

	trigger func(*hazewright.Result, *hazewright.DesignResult) (state, finding string)
}

// Gate is a condition held against one design.
type Gate struct {
	ID       string `json:"id"`
	Title    string `json:"title"`
	State    string `json:"state"`
	Finding  string `json:"finding"` // the value that decided
	Text     string `json:"text"`
	NextStep string `json:"next_step"`
	Source   string `json:"source"`
}

// GateTable returns the conditions in the order in which they are shown, those for
// people first.
func GateTable() []GateDef { return append([]GateDef(nil), gateTable...) }

// Gates holds every condition against a design, in all of its sticking cases: one that
// trips in any has tripped, and the finding says in which. The thresholds are those named
// in each condition's text; a figure without a value leaves the condition not known.
func Gates(r *hazewright.Result, d *hazewright.DesignResult) []Gate {
	cases := variantsOf(d)
	gates := make([]Gate, 0, len(gateTable))
	for _, def := range gateTable {
		states, findings := make([]string, len(cases)), make([]string, len(cases))
		for i, v := range cases {
			states[i], findings[i] = def.trigger(r, v.result())
		}
		state, finding := joined(cases, states, findings)
		gates = append(gates, Gate{def.ID, def.Title, state, finding, def.Text, def.NextStep, def.Source})
	}
	return gates
}

// joined makes one verdict of those of the cases: the gravest state, and each finding
// with its case where they differ.
func joined(cases []variant, states, findings []string) (state, finding string) {
	state = NotTripped
	same := true
	for i := range cases {
		if states[i] == Tripped || states[i] == NotKnown && state != Tripped {
			state = states[i]
		}
		same = same && states[i] == states[0] && findings[i] == findings[0]
	}
	if same {
		return state, findings[0]
	}
	var parts []string
	for i, v := range cases {
		text := v.condition() + ": " + findings[i]
		if states[i] != state {
			text = fmt.Sprintf("%s: %s (%s)", v.condition(), states[i], findings[i])
		}
		parts = append(parts, text)
	}
	return state, strings.Join(parts, "; ")
}

// largestCaution is the first condition that trips, by the order of the table.
func largestCaution(r *hazewright.Result, d *hazewright.DesignResult) (Gate, bool) {
	for _, g := range Gates(r, d) {
		if g.State == Tripped {
			return g, true
		}
	}
	return Gate{}, false
}

// Thresholds of the rules. Those without a source are rules of thumb (common
// practice), there to make somebody look and not to draw a line.
const (
	fibreLength   = 5e-6      // m; WHO counting rule: longer than
	fibreDiameter = 3e-6      // m; thinner than
	fibreAspect   = 3.0       // longer than this many diameters
	nanoscale     = 100e-9    // m; ISO 80004-1: approximately 1 nm to 100 nm
	pyrophoric    = 1e-6      // m; rule of thumb
	dimming       = 0.01      // share of sunlight; rule of thumb
	radioLoss     = 0.1       // dB one way at the zenith; rule of thumb
	fieldWarned   = 10e3      // V/m; half the order of breakdown of the thin gas
	specialRegion = 245.15    // K = -28 degC; COSPAR policy
	slowReversal  = 1 * year  // rule of thumb
	fastReturn    = 30 * year // rule of thumb: within a working life
)

var gateTable = []GateDef{
	{
		ID: "respirable-fibre", Title: "Respirable fibres", Source: "[WHO1997]",
		Text: "Fibres longer than 5 um, thinner than 3 um and more than three times as long as thick can be breathed deep into the lung " +
			"and stay there. Sizes are the bare particle's; where lengths spread, two geometric standard deviations are looked at.",
		NextStep: "Have an occupational hygienist set exposure limits for making, loading and release, and for what comes in on suits; closed handling.",
		trigger:  respirableFibre,
	},
	{
		ID: "nanoscale", Title: "Nanoscale dimension", Source: "[ISO80004]",
		Text:     "At least one dimension under 100 nm: bulk toxicity and exposure data do not carry over.",
		NextStep: "Ask for toxicology of this size and shape, not of the bulk material.",
		trigger:  nanoscaleDimension,
	},
	{
		ID: "combustible-dust", Title: "Combustible dust", Source: "[NFPA484]",
		Text: "Fine aluminium, magnesium, titanium, iron and other metals, and graphite, burn and can explode as dust in breathable air; " +
			"aluminium, magnesium and titanium burn in carbon dioxide too, so the planet's own air does not make them inert.",
		NextStep: "Dust hazard analysis by a qualified person before any plant layout; test this size, not a coarser one.",
		trigger:  combustibleDust,
	},
	{
		ID: "pyrophoric-iron", Title: "Pyrophoric fine iron", Source: "common practice, no source",
		Text:     "Freshly reduced iron thinner than about 1 um can catch fire by itself in breathable air; an oxide skin lowers this but is no safeguard by itself.",
		NextStep: "Passivate before any contact with breathable air; test self-heating of the product as made.",
		trigger:  pyrophoricIron,
	},
	{
		ID: "conductive-fibres", Title: "Conductive fibres and electronics", Source: "[NASA1980]",
		Text:     "Thin conducting fibres settle on boards and insulators and short them. Everything that is not sealed is exposed for the whole programme.",
		NextStep: "Test exposed electronics and high-voltage insulation with these fibres; seal or coat.",
		trigger:  conductiveFibres,
	},
	{
		ID: "sunlight", Title: "Sunlight and solar power", Source: "common practice, no source",
		Text:     "Less sunlight reaches the ground: solar power and growing plants lose at least this share. Trips from 1 %. The power figures of this report are not enlarged for it.",
		NextStep: "Size solar power of every user on the planet for the dimmed sky, natural dust storms included.",
		trigger:  sunlight,
	},
	{
		ID: "radio", Title: "Radio loss", Source: "common practice, no source",
		Text:     "Loss on links through the whole layer, one way at the zenith, much more near the horizon. Trips from 0.1 dB in any band.",
		NextStep: "Redo the link budgets of every user at low elevation, with the aerosol.",
		trigger:  radio,
	},
	{
		ID: "contamination", Title: "Habitat and suit contamination", Source: "common practice, no source",
		Text:     "Particles that do not evaporate are in the air at the ground and loose on it, and come in with every suit, lock and filter.",
		NextStep: "Design locks, suits and filters for this size at this density in the air.",
		trigger:  contamination,
	},
	{
		ID: "layer-field", Title: "Field of the charged layer", Source: "order of the breakdown field of the thin gas",
		Text:     "Like charges that keep particles apart add up to a field over the whole layer. Trips from 10 kV/m; the thin gas breaks down at about 20 kV/m. Counter-ions are taken as absent.",
		NextStep: "Model charging and discharging of the layer; expect less charge than asked for.",
		trigger:  layerField,
	},
	{
		ID: "treaty", Title: "Outer Space Treaty, Article IX", Source: "[OST1967]",
		Text:     "Harmful contamination is to be avoided, and others are to be consulted before an activity that may interfere with theirs. A change of a whole planet is such an activity.",
		NextStep: "Bring the matter to the state that would authorise the programme; international consultation before any release.",
		trigger:  always("changes the whole planet, other users included"),
	},
	{
		ID: "cospar", Title: "COSPAR planetary protection policy", Source: "[COSPAR]",
		Text:     "Landed plant and all that comes with it falls under the policy's categories; release over the whole planet is beyond what they were written for.",
		NextStep: "Take it to a planetary protection officer before the concept is frozen.",
		trigger:  always("landing and release over the whole planet"),
	},
	{
		ID: "special-regions", Title: "Special Regions", Source: "[COSPAR]",
		Text: "Where it is warmer than -28 degC and water is active enough, terrestrial life might replicate. The rule adds the annual-mean warming to the warmest ground of the present year " +
			"and trips on temperature alone; water activity is not computed.",
		NextStep: "Needs a water-activity review, place by place and season by season.",
		trigger:  specialRegions,
	},
	{
		ID: "slow-to-reverse", Title: "Slow to reverse", Source: "common practice, no source",
		Text:     "After supply ends the particles stay aloft, and the loose layer on the ground goes on feeding the air. Trips if half of the warming lasts a year or more.",
		NextStep: "Agree beforehand on what would make the programme stop, and start small enough to learn it.",
		trigger:  slowToReverse,
	},
	{
		ID: "ice-records", Title: "Alteration of ice records", Source: "common practice, no source",
		Text:     "Everything made ends on the ground, on polar ice too, where it marks and warms the layers that hold the planet's climate record.",
		NextStep: "Sample and archive the records that matter before release.",
		trigger:  iceRecords,
	},
	{
		ID: "ending", Title: "The ending: how fast the cold returns", Source: "common practice, no source",
		Text:     "If supply ends, whatever has come to depend on the warmth loses it. Trips if half of the warming is gone within 30 yr.",
		NextStep: "Say who keeps supply going and from what reserve, before anything depends on it.",
		trigger:  ending,
	},
}

func always(finding string) func(*hazewright.Result, *hazewright.DesignResult) (string, string) {
	return func(*hazewright.Result, *hazewright.DesignResult) (string, string) { return Tripped, finding }
}

// verdict turns a test into a state.
func verdict(tripped bool) string {
	if tripped {
		return Tripped
	}
	return NotTripped
}

func respirableFibre(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	state, finding, length := NotTripped, "no rods", 0.0
	for _, p := range d.Design.Particles {
		if p.Shape != "rod" {
			continue
		}
		longest := p.Length * p.Spread * p.Spread
		if p.Spread < 1 {
			longest = p.Length
		}
		trips := longest > fibreLength && p.Diameter < fibreDiameter && longest > fibreAspect*p.Diameter
		if trips == (state == Tripped) && longest <= length || !trips && state == Tripped {
			continue // another population says more
		}
		state, length = verdict(trips), longest
		finding = fmt.Sprintf("rods up to %s long, %s thick, aspect %s", microns(longest), nanometres(p.Diameter),
			significant(longest/p.Diameter, 3))
	}
	return state, finding
}

// thinnest returns the smallest dimension of a population [m]; where radii spread, at
// two geometric standard deviations below.
func thinnest(p hazewright.Particle) float64 {
	switch p.Shape {
	case "rod":
		return min(p.Diameter, p.Length)
	case "shell":
		return p.Wall
	}
	if p.Spread > 1 {
		return 2 * p.Radius / (p.Spread * p.Spread)
	}
	return 2 * p.Radius
}

func nanoscaleDimension(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	least := 0.0
	for _, p := range d.Design.Particles {
		if t := thinnest(p); least == 0 || t < least {
			least = t
		}
	}
	return verdict(least < nanoscale), "smallest dimension " + nanometres(least)
}

// eachPopulation applies a test to the populations. Where the program does not know the
// answer for a user's own material the condition is not known, unless another population
// trips it.
func eachPopulation(d *hazewright.DesignResult, test func(hazewright.Particle, hazewright.PopulationResult) (answer, finding string), none string) (string, string) {
	state, finding := NotTripped, none
	for i, p := range d.Populations {
		switch answer, text := test(d.Design.Particles[i], p); answer {
		case "yes":
			return Tripped, text
		case "unknown":
			state, finding = NotKnown, fmt.Sprintf("material %s: the program does not know what it is", clean(p.Material))
		}
	}
	return state, finding
}

func combustibleDust(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	return eachPopulation(d, func(q hazewright.Particle, p hazewright.PopulationResult) (string, string) {
		return p.Combustible, fmt.Sprintf("%s, %s thin", clean(p.Material), nanometres(thinnest(q)))
	}, "nothing whose dust burns")
}

func pyrophoricIron(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	return eachPopulation(d, func(q hazewright.Particle, p hazewright.PopulationResult) (string, string) {
		skin := "no oxide skin"
		if p.Oxide > 0 {
			skin = "oxide skin " + nanometres(p.Oxide)
		}
		iron := q.Material.Name == "iron" || strings.HasPrefix(q.Material.Name, "iron-")
		switch {
		case thinnest(q) >= pyrophoric:
		case q.Material.Table != "":
			return "unknown", ""
		case iron:
			return "yes", fmt.Sprintf("iron %s thin, %s", nanometres(thinnest(q)), skin)
		}
		return "no", ""
	}, "no iron under 1 um")
}

func conductiveFibres(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	return eachPopulation(d, func(q hazewright.Particle, p hazewright.PopulationResult) (string, string) {
		if q.Shape != "rod" {
			return "no", ""
		}
		return p.Conducts, fmt.Sprintf("%s rods, %s long", clean(p.Material), microns(q.Length))
	}, "no conducting rods")
}

// above holds a figure against a threshold.
func above(d *hazewright.DesignResult, id string, threshold float64) (string, string) {
	def, _ := hazewright.FigureByID(id)
	v, ok := d.Figures[id]
	if !ok || v.Null {
		return NotKnown, fmt.Sprintf("%s: %s", strings.ToLower(def.Title), why(v))
	}
	return verdict(v.Value >= threshold), fmt.Sprintf("%s %s", strings.ToLower(def.Title), quantity(v.Value, def.Shown))
}

// why is the reason for a missing value.
func why(v hazewright.FigureValue) string {
	if v.Why == "" {
		return "no value"
	}
	return clean(v.Why)
}

func sunlight(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	state, finding := above(d, "sunlight_loss", dimming)
	if state == Tripped && d.Design.Supply.Power.Source == "solar" {
		finding += "; this design's own power is solar"
	}
	return state, finding
}

func radio(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	worst, name := -1.0, ""
	for _, def := range defs([]string{"radio_loss_uhf", "radio_loss_s", "radio_loss_x", "radio_loss_ka"}) {
		v, ok := d.Figures[def.ID]
		if !ok || v.Null {
			continue
		}
		if db := shown(v.Value, def.Shown); db > worst {
			worst, name = db, def.Title
		}
	}
	if name == "" {
		return NotKnown, "no radio loss computed"
	}
	return verdict(worst >= radioLoss), fmt.Sprintf("%s: %s dB", strings.ToLower(name), significant(worst, 3))
}

func contamination(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	lasting := false
	for _, p := range d.Design.Particles {
		if p.Material.Name != "water-ice" {
			lasting = true
		}
	}
	if !lasting {
		return NotTripped, "water ice only"
	}
	var parts []string
	for _, def := range defs([]string{"number_density", "ground_store"}) {
		if v, ok := d.Figures[def.ID]; ok && !v.Null {
			parts = append(parts, fmt.Sprintf("%s %s", strings.ToLower(def.Title), quantity(v.Value, def.Shown)))
		}
	}
	if len(parts) == 0 {
		return Tripped, "particles that last; their number at the ground is not known"
	}
	return Tripped, strings.Join(parts, ", ")
}

func layerField(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	return above(d, "layer_field", fieldWarned)
}

func specialRegions(r *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	warming, ok := d.Figures["warming"]
	warmest := r.Study.World.WarmSeasonMaximum
	if !ok || warming.Null {
		if warmest >= specialRegion {
			return Tripped, fmt.Sprintf("warm-season maximum %s already, without the programme: needs water-activity review", celsius(warmest))
		}
		return NotKnown, "warming: " + why(warming)
	}
	finding := fmt.Sprintf("warm-season maximum %s + warming %s = %s", celsius(warmest), quantity(warming.Value, "K"), celsius(warmest+warming.Value))
	if warmest+warming.Value >= specialRegion {
		return Tripped, finding + ": needs water-activity review"
	}
	return NotTripped, finding + ", below -28 degC; this is not a clearance"
}

func slowToReverse(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	v, ok := d.Figures["half_loss_time"]
	if !ok || v.Null {
		return NotKnown, "half-loss time: " + why(v)
	}
	finding := "half of the warming lasts " + duration(v.Value)
	if g, ok := d.Figures["ground_store"]; ok && !g.Null {
		finding += fmt.Sprintf("; loose on the ground %s", quantity(g.Value, "mg/m2"))
	}
	return verdict(v.Value >= slowReversal), finding
}

func iceRecords(r *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	v, ok := d.Figures["production_rate"]
	if !ok || v.Null {
		return NotKnown, "production: " + why(v)
	}
	if v.Value <= 0 || r.Baseline.Area <= 0 {
		return NotTripped, "nothing falls"
	}
	return Tripped, fmt.Sprintf("%s mg/m2 fall on the planet every year, on the mean", significant(v.Value/r.Baseline.Area*year*1e6, 3))
}

func ending(_ *hazewright.Result, d *hazewright.DesignResult) (string, string) {
	v, ok := d.Figures["half_loss_time"]
	if !ok || v.Null {
		return NotKnown, "half-loss time: " + why(v)
	}
	return verdict(v.Value <= fastReturn), "half of the warming is gone " + duration(v.Value) + " after supply ends"
}

func microns(m float64) string    { return significant(m*1e6, 3) + " um" }
func nanometres(m float64) string { return significant(m*1e9, 3) + " nm" }
func celsius(k float64) string    { return significant(k-273.15, 3) + " degC" }
