package hazewright

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"hazewright/logistics"
	"hazewright/optics"
	"hazewright/optics/material"
	"hazewright/settling"
)

// decode fills the study from the checked tree and holds the rules that join several
// inputs. Where check has already found a mistake in a value it is silent about it.
func (l *loader) decode(root *node) {
	l.study.Title = root.word("study")
	l.study.World = l.world(root.child("world"))
	l.study.Goal = l.goal(root.child("goal"))
	fate, supply := root.child("fate"), root.child("supply")
	l.checkFate(fate, "fate")
	for i, d := range root.list("designs") {
		path := fmt.Sprintf("designs[%s]", itemLabel(root.child("designs"), studySchema().child("designs"), i))
		l.study.Designs = append(l.study.Designs, l.design(d, fate, supply, path))
	}
	l.checkWavelength(root.child("goal").child("at"))
	l.study.Model = Model{
		WarmingFactor:   root.child("model").si("warming_factor"),
		KappaFactor:     root.child("model").si("kappa_factor"),
		FallSpeedFactor: root.child("model").si("fall_speed_factor"),
		KernelFactor:    root.child("model").si("kernel_factor"),
	}
	l.benchmarks(root)
	l.limits(root)
	l.uncertain(root)
	l.sweeps(root)
	l.sources(root)
}

// world reads the planet.
func (l *loader) world(n *node) World {
	w := World{
		Name:              n.word("name"),
		Base:              n.word("base"),
		Radius:            n.si("radius"),
		Gravity:           n.si("gravity"),
		SurfacePressure:   n.si("surface_pressure"),
		AirTemperature:    n.si("air_temperature"),
		Sunlight:          n.si("sunlight"),
		BondAlbedo:        n.si("bond_albedo"),
		Emissivity:        n.si("emissivity"),
		DustOpticalDepth:  n.si("dust_optical_depth"),
		LapseLimit:        n.si("lapse_limit"),
		WarmSeasonMaximum: n.si("warm_season_maximum"),
	}
	gas := n.child("gas")
	w.Gas = gasShares(gas)
	l.checkGas(gas)

	changed := map[string]bool{}
	for _, c := range studySchema().child("world").children {
		if c.row.numeric() {
			base, err := ParseQuantity(c.row.Default)
			changed[c.name] = err == nil && n.has(c.name) && base.SI != n.si(c.name)
		}
	}
	base := defaultNode(studySchema().child("world").child("gas"))
	for _, item := range base.items {
		share := item.child("share")
		share.quantity, _ = ParseQuantity(share.text)
		share.ok, item.child("species").ok = true, true
	}
	changed["gas"] = !slices.Equal(w.Gas, gasShares(base))
	if w.Name == "" {
		w.Name = w.Base
		for _, c := range changed {
			if c {
				w.Name = w.Base + " (changed)"
			}
		}
	}
	return w
}

// gasShares returns the mole fractions of a list of gases, scaled to sum to 1.
func gasShares(gas *node) []GasShare {
	if gas == nil {
		return nil
	}
	var shares []GasShare
	sum := 0.0
	for _, g := range gas.items {
		shares = append(shares, GasShare{Species: g.word("species"), Mole: g.si("share")})
		sum += g.si("share")
	}
	for i := range shares {
		if sum > 0 {
			shares[i].Mole /= sum
		}
	}
	return shares
}

func (l *loader) checkGas(gas *node) {
	if gas == nil || gas.kind != listNode {
		return
	}
	sum, sound := 0.0, true
	seen := map[string]bool{}
	for i, g := range gas.items {
		sum += g.si("share")
		sound = sound && g.has("share")
		name := g.word("species")
		if name != "" && seen[name] {
			l.fault(g.child("species"), fmt.Sprintf("world.gas[%d].species", i), name, problem{what: "is given twice", hint: "add the two shares"})
		}
		seen[name] = true
	}
	const slack = 0.01 // printed compositions leave out traces
	if sound && math.Abs(sum-1) > slack+1e-9 {
		l.fault(gas, "world.gas", "", problem{what: fmt.Sprintf("has shares that sum to %s", FormatSI(sum, "%", 5)), allowed: "instead of 100 %", hint: "complete the list"})
	}
}

// goal reads what is to be reached.
func (l *loader) goal(n *node) Goal {
	var g Goal
	if n == nil || n.kind != mapNode {
		return g
	}
	asked := !n.lacks("warming") || !n.lacks("burden") || !n.lacks("optical_depth")
	for _, m := range n.members {
		if m.key != "warming" && m.key != "burden" && m.key != "optical_depth" {
			asked = asked || outsideScope(m.key)
			continue
		}
		if g.Kind != "" {
			l.faultAt(m.at, m.value.alias, "goal."+m.key, "", problem{what: fmt.Sprintf("is a second goal beside %s", g.Kind), hint: "give exactly one"})
			continue
		}
		g.Kind = m.key
	}
	if !asked {
		l.fault(n, "goal", "", problem{what: "names no goal", hint: "give exactly one of warming, burden or optical_depth, such as {warming: 25 K}"})
	}
	g.Warming, g.Burden, g.OpticalDepth = n.si("warming"), n.si("burden"), n.si("optical_depth")
	at := n.child("at")
	switch {
	case g.Kind == "optical_depth" && n.lacks("at"):
		l.fault(n, "goal.at", "", problem{what: "is missing", hint: "say where the optical depth holds: thermal, solar or a wavelength such as 10 um"})
	case g.Kind != "optical_depth" && at != nil && g.Kind != "":
		l.fault(at, "goal.at", "", problem{what: "belongs to a goal of optical_depth only", hint: "remove it"})
	case at != nil && at.ok:
		g.At = at.text
		if at.text != "thermal" && at.text != "solar" {
			where := Input{Path: "goal.at", Kind: KindQuantity, Unit: "m", Low: "0.1 um", High: "1 mm"}
			q, p := where.readNumber(at.text)
			if p != nil {
				p.hint = "write thermal, solar or a wavelength such as 10 um"
				l.fault(at, "goal.at", quoteLong(at.text), *p)
			}
			g.Wavelength = q.SI
		}
	}
	return g
}

// checkWavelength refuses a goal at a wavelength where the index of a material is not known.
func (l *loader) checkWavelength(at *node) {
	if at == nil || l.study.Goal.Wavelength == 0 {
		return
	}
	for _, d := range l.study.Designs {
		for _, p := range d.Particles {
			m, err := materialOf(p.Material)
			if err != nil {
				continue // the material has its own mistake
			}
			if _, err := m.Index(l.study.Goal.Wavelength); err != nil {
				l.fault(at, "goal.at", quoteLong(at.text), problem{what: "cannot be used: " + err.Error(), hint: "choose a wavelength inside that range"})
				return
			}
		}
	}
}

// design reads one candidate; fate and supply are the study's.
func (l *loader) design(n, fate, supply *node, path string) Design {
	d := Design{
		Name: n.word("name"),
		Given: Given{
			Lifetime:     n.child("given").si("lifetime"),
			KappaThermal: n.child("given").si("kappa_thermal"),
			Burden:       n.child("given").si("burden"),
		},
	}
	for i, p := range n.list("particles") {
		d.Particles = append(d.Particles, l.particle(p, fmt.Sprintf("%s.particles[%d]", path, i)))
	}
	l.shares(n.child("particles"), &d, path+".particles")
	if own := n.child("fate"); own != nil {
		l.checkFate(own, path+".fate")
		fate, d.HasFate = merge(fate, own), len(own.members) > 0
	}
	if own := n.child("supply"); own != nil {
		supply, d.HasSupply = merge(supply, own), len(own.members) > 0
	}
	d.Fate, d.Supply = fateOf(fate), supplyOf(supply)
	return d
}

// particle reads one population.
func (l *loader) particle(n *node, path string) Particle {
	p := Particle{
		Shape:             n.word("shape"),
		Spread:            n.si("spread"),
		Oxide:             -1,
		SurfaceScattering: n.on("surface_scattering"),
		Share:             n.si("share"),
		Material:          l.material(n.child("material"), path+".material"),
	}
	thickness := 0.0
	switch p.Shape {
	case "sphere":
		l.need(n, path, "a sphere takes a radius", []string{"radius"}, []string{"length", "diameter", "wall", "core"})
		p.Radius = n.si("radius")
		thickness = p.Radius
	case "rod":
		l.need(n, path, "a rod takes length and diameter", []string{"length", "diameter"}, []string{"radius", "wall", "core"})
		p.Length, p.Diameter = n.si("length"), n.si("diameter")
		thickness = p.Diameter / 2
		l.checkAspect(n, p, path)
	case "shell":
		l.need(n, path, "a shell takes a radius and a wall", []string{"radius", "wall"}, []string{"length", "diameter"})
		p.Radius, p.Wall = n.si("radius"), n.si("wall")
		if p.Core = n.word("core"); p.Core == hollow {
			p.Core = ""
		}
		l.checkWall(n, p, path)
	}
	if n.has("oxide") {
		p.Oxide = n.si("oxide")
	}
	l.checkCore(n, p, 2*thickness, path)
	l.checkSpread(n, p, path)
	return p
}

// checkSpread refuses a spread whose outermost sizes the stages do not take. Particles that
// they do not take anyhow are left to the mistakes of their own.
func (l *loader) checkSpread(n *node, p Particle, path string) {
	if !n.has("spread") {
		return
	}
	sizes, err := opticsOf(p)
	if err != nil {
		return
	}
	um := func(si float64) string { return FormatSI(si, "um", 3) }
	for _, class := range sizes.Nodes() {
		if class.Size < settling.MinSize || class.Size > settling.MaxSize {
			l.fault(n.child("spread"), path+".spread", n.word("spread"), problem{what: fmt.Sprintf("reaches a size of %s, outside", um(class.Size)),
				allowed: um(settling.MinSize) + " to " + um(settling.MaxSize), hint: "choose a smaller spread"})
			return
		}
	}
}

// checkCore refuses an oxide skin, given or the material's own, that leaves no more than
// half of a particle's thickness [m], or a rod's core too thin for the optics.
func (l *loader) checkCore(n *node, p Particle, thickness float64, path string) {
	at, key, whose := n.child("oxide"), ".oxide", ""
	if p.Oxide < 0 {
		m, err := material.ByName(p.Material.Name)
		if p.Material.Table != "" || err != nil {
			return
		}
		p.Oxide, key, whose = m.DefaultOxide, ".diameter", " of "+m.Name+" by default"
		if at = n.child("diameter"); p.Shape == "sphere" {
			at, key = n.child("radius"), ".radius"
		}
	}
	const slack = 1e-12
	core, must := thickness-2*p.Oxide, ""
	switch {
	case p.Oxide > 0 && core <= thickness/2*(1+slack):
		must = "more than " + FormatSI(thickness/2, "nm", 4)
	case p.Shape == "rod" && core < optics.MinDiameter*(1-slack):
		must = "at least " + FormatSI(optics.MinDiameter, "nm", 4)
	}
	if thickness > 0 && at != nil && must != "" {
		l.fault(at, path+key, at.text, problem{what: fmt.Sprintf("leaves a core of %s of %s across: the oxide skin%s is %s thick",
			FormatSI(max(core, 0), "nm", 4), FormatSI(thickness, "nm", 4), whose, FormatSI(p.Oxide, "nm", 4)),
			hint: "choose a thinner oxide or a thicker particle: " + must + " must be left"})
	}
}

// need holds the keys that a shape must and must not have.
func (l *loader) need(n *node, path, hint string, must, mustNot []string) {
	for _, key := range must {
		if n.lacks(key) {
			l.fault(n, path+"."+key, "", problem{what: "is missing", hint: hint})
		}
	}
	for _, m := range n.members {
		if slices.Contains(mustNot, m.key) {
			l.faultAt(m.at, m.value.alias, path+"."+m.key, "", problem{what: "does not belong to this shape", hint: hint})
		}
	}
}

// hollow is the core of a shell with nothing inside.
const hollow = "hollow"

// checkWall refuses a wall that leaves no inside.
func (l *loader) checkWall(n *node, p Particle, path string) {
	if n.has("radius") && n.has("wall") && p.Wall >= p.Radius {
		at := n.child("wall")
		l.fault(at, path+".wall", at.text, problem{what: "is not below the outer radius, " + n.word("radius"), hint: "choose a thinner wall, or shape sphere"})
	}
}

// leastAspect is the smallest length over diameter of a rod.
const leastAspect = 10

// checkAspect refuses rods that are too stout for the antenna solver.
func (l *loader) checkAspect(n *node, p Particle, path string) {
	if !n.has("length") || !n.has("diameter") {
		return
	}
	d := n.child("diameter")
	switch aspect := p.Length / p.Diameter; {
	case aspect <= 1:
		l.fault(d, path+".diameter", d.text, problem{what: "is not below the length, " + n.word("length"), hint: "swap the two, or use a sphere"})
	case aspect < leastAspect*(1-1e-12):
		l.fault(d, path+".diameter", d.text, problem{what: fmt.Sprintf("makes the rod %s times as long as thick; below %d it is no thin antenna", strconv.FormatFloat(aspect, 'g', 3, 64), leastAspect),
			hint: "choose a thinner or longer rod, or a sphere"})
	}
}

// material reads a built-in name or a user's table.
func (l *loader) material(n *node, path string) MaterialRef {
	switch {
	case n == nil:
		return MaterialRef{}
	case n.kind == scalarNode && n.ok:
		return MaterialRef{Name: n.text}
	case n.kind != mapNode:
		return MaterialRef{}
	}
	ref := MaterialRef{Name: n.word("table"), Table: n.word("table"), Density: n.si("density"), Extend: n.on("extend")}
	if n.has("table") {
		ref.Rows = l.readTable(n.child("table"), path+".table")
		l.checkCoverage(n, ref, path)
	}
	return ref
}

// shares completes and checks the shares of a design's populations.
func (l *loader) shares(n *node, d *Design, path string) {
	if n == nil || len(n.items) == 0 {
		return
	}
	if len(n.items) == 1 && n.items[0].kind == mapNode && n.items[0].child("share") == nil {
		d.Particles[0].Share = 1
		n.items[0].put("share", place{}, &node{text: "100 %", ok: true, quantity: Quantity{SI: 1}, row: studySchema().child("designs").item.child("particles").item.child("share").row})
		return
	}
	sum, sound := 0.0, true
	for i, item := range n.items {
		if item.kind == mapNode && item.child("share") == nil {
			sound = false
			if !item.lacks("share") {
				continue
			}
			l.fault(item, fmt.Sprintf("%s[%d].share", path, i), "", problem{what: "is missing", hint: "several populations each need a share of the airborne mass; they sum to 100 %"})
			continue
		}
		sound = sound && item.has("share")
		sum += item.si("share")
	}
	const slack = 0.001 // 33.3 % three times
	switch {
	case !sound:
	case math.Abs(sum-1) > slack+1e-9:
		l.fault(n.items[len(n.items)-1].child("share"), path, "", problem{what: fmt.Sprintf("has shares that sum to %s", FormatSI(sum, "%", 5)), allowed: "instead of 100 %", hint: "change one of them"})
	default:
		for i := range d.Particles {
			d.Particles[i].Share /= sum
		}
	}
}

// checkFate holds the rules that join several inputs of a fate. It works on what the
// study or design itself gives, so that a mistake is reported once.
func (l *loader) checkFate(n *node, path string) {
	if layer := n.child("profile").child("layer"); layer != nil && layer.kind == listNode {
		switch {
		case len(layer.items) != 2:
			l.fault(layer, path+".profile.layer", "", problem{what: fmt.Sprintf("needs 2 heights, not %d", len(layer.items)), hint: "write [BOTTOM, TOP], such as [25 km, 35 km]"})
		case layer.items[0].ok && layer.items[1].ok && layer.items[0].quantity.SI >= layer.items[1].quantity.SI:
			l.fault(layer.items[1], path+".profile.layer[1]", layer.items[1].text, problem{what: "is not above the bottom, " + layer.items[0].text, hint: "write [BOTTOM, TOP]"})
		}
	}
	if eddy := n.child("eddy_diffusivity"); eddy != nil && eddy.kind == listNode {
		if len(eddy.items) == 0 {
			l.fault(eddy, path+".eddy_diffusivity", "", problem{what: "is an empty list", hint: "give one value, or heights with values"})
		}
		for i := 1; i < len(eddy.items); i++ {
			a, b := eddy.items[i-1], eddy.items[i]
			if a.has("height") && b.has("height") && a.si("height") >= b.si("height") {
				l.fault(b.child("height"), fmt.Sprintf("%s.eddy_diffusivity[%d].height", path, i), b.word("height"),
					problem{what: "is not above the height before it, " + a.word("height"), hint: "sort the list upwards"})
			}
		}
	}
}

// fateOf reads a merged fate.
func fateOf(n *node) Fate {
	f := Fate{
		ReleaseHeight:  n.si("release_height"),
		LiftHeight:     n.si("lift_height"),
		Profile:        Profile{Kind: n.word("profile")},
		Deposition:     n.si("deposition"),
		LiftTime:       n.si("lift_time"),
		BurialTime:     n.si("burial_time"),
		FrostBurial:    n.si("frost_burial"),
		Sticking:       n.si("sticking"),
		StickingGiven:  n.has("sticking"),
		Charge:         n.si("charge"),
		Dust:           n.on("dust"),
		AggregateValue: n.si("aggregate_value"),
		Vapour:         n.word("vapour"),
		ReturnSingle:   n.si("return_single"),
	}
	if layer := n.child("profile").list("layer"); len(layer) == 2 {
		f.Profile = Profile{Kind: "layer", Bottom: layer[0].quantity.SI, Top: layer[1].quantity.SI}
	}
	if n.has("eddy_diffusivity") {
		f.EddyDiffusivity = []EddyPoint{{Value: n.si("eddy_diffusivity")}}
	}
	for _, e := range n.list("eddy_diffusivity") {
		f.EddyDiffusivity = append(f.EddyDiffusivity, EddyPoint{Height: e.si("height"), Value: e.si("value")})
	}
	for _, s := range n.list("sinks") {
		f.Sinks = append(f.Sinks, Sink{Name: s.word("name"), Rate: s.si("rate")})
	}
	return f
}

// supplyOf reads a merged supply.
func supplyOf(n *node) logistics.Supply {
	feedstock, energy, plant := n.child("feedstock"), n.child("energy"), n.child("plant")
	power, release, delivery := n.child("power"), n.child("release"), n.child("delivery")
	return logistics.Supply{
		Route:     n.word("route"),
		Overbuild: n.si("overbuild"),
		Feedstock: logistics.Feedstock{
			Mineral:  feedstock.word("mineral"),
			Grade:    feedstock.si("grade"),
			Recovery: feedstock.si("recovery"),
		},
		Energy: logistics.Energy{
			Mining:    energy.si("mining"),
			Reduction: energy.si("reduction"),
			Shaping:   energy.si("shaping"),
			Release:   energy.si("release"),
		},
		Availability: n.si("availability"),
		Plant: logistics.Plant{
			SpecificMass:  plant.si("specific_mass"),
			Spares:        plant.si("spares"),
			Life:          plant.si("life"),
			Commissioning: plant.si("commissioning"),
		},
		Power: logistics.Power{
			Source:       power.word("source"),
			SpecificMass: power.si("specific_mass"),
		},
		Release: logistics.Release{
			Points:    int(release.si("points")),
			Radius:    release.si("radius"),
			Wind:      release.si("wind"),
			Spreading: release.si("spreading"),
		},
		ReleaseLoss: n.si("release_loss"),
		Delivery: logistics.Delivery{
			Payload:          delivery.si("payload"),
			FlightsPerWindow: int(delivery.si("flights_per_window")),
			WindowSpacing:    delivery.si("window_spacing"),
			FirstWindow:      delivery.si("first_window"),
			Loss:             delivery.si("loss"),
		},
		StopAt: n.si("stop_at"),
	}
}
