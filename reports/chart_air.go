package reports

import (
	"fmt"
	"strings"

	"hazewright"
)

// profileChart shows how the airborne mass lies over height.
func profileChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "profile", Table: dataTable{Head: []string{"Design", "Height [km]", "Share of the mass [%/km]"}}}
	d := xy{x: axis{name: "Share of the airborne mass [%/km]"}, y: axis{name: "Height [km]"}, byHeight: true}
	var parts []string
	top := 0.0
	for i := range r.Designs {
		design := &r.Designs[i]
		name := clean(design.Name)
		var points [][2]float64
		for _, p := range design.Profile {
			points = append(points, [2]float64{p.Mass * 1e5, p.Height / 1e3})
		}
		if len(points) == 0 {
			continue
		}
		d.lines = append(d.lines, line{name: name, points: points, colour: i, dash: i})
		for _, p := range thin(points, 24) {
			c.Table.Rows = append(c.Table.Rows, []string{name, significant(p[1], 3), significant(p[0], 3)})
		}
		if z, ok := heightOf(design.Profile, 0.999); ok {
			top = max(top, z)
		}
		if z, ok := heightOf(design.Profile, 0.5); ok {
			parts = append(parts, fmt.Sprintf("%s: %s km", name, significant(z/1e3, 2)))
		}
	}
	if len(d.lines) == 0 {
		return nil, nil
	}
	d.y.max = niceAbove(top / 1e3)
	for i := range d.lines {
		d.lines[i].points = below(d.lines[i].points, d.y.max)
	}
	c.Title = "Where the airborne mass lies."
	if len(parts) > 0 {
		c.Title = "Height under which half of the airborne mass lies. " + sentence(parts)
	}
	c.Caption = "Share of the airborne mass in each kilometre of height, up to where 99.9 % lies below." + shownCase(r) + fixedProfiles(r)
	c.Table.Note = "Every few heights; all are in profile.csv."
	c.Alt = "Lines of airborne mass against height for each design. " + c.Title
	return c, c.draw(d)
}

// fixedProfiles says where the profile drawn is not the one that warms.
func fixedProfiles(r *hazewright.Result) string {
	text := ""
	for i := range r.Designs {
		d := &r.Designs[i]
		switch p := d.Design.Fate.Profile; {
		case len(d.Profile) == 0:
		case p.Kind == "layer":
			text += fmt.Sprintf(" %s: drawn is what the fall makes of it; the warming uses the study's layer from %s to %s km, in which %s of the mass drawn lies.",
				clean(d.Name), significant(p.Bottom/1e3, 3), significant(p.Top/1e3, 3), percent(d.LayerShare))
		case p.Kind == "mixed":
			text += fmt.Sprintf(" %s: drawn is what the fall makes of it; the warming takes it as mixed.", clean(d.Name))
		}
	}
	return text
}

// shownCase says which case a chart shows that depends on sticking, where it is not given.
func shownCase(r *hazewright.Result) string {
	for i := range r.Designs {
		if d := &r.Designs[i]; d.StickingCase != "" {
			return " Where sticking is not given: " + stickingCase(d) + "."
		}
	}
	return ""
}

// below returns the points up to a height [km].
func below(points [][2]float64, height float64) [][2]float64 {
	var out [][2]float64
	for _, p := range points {
		if p[1] <= height {
			out = append(out, p)
		}
	}
	return out
}

// heightOf returns the height under which a share of the mass lies, by trapezoids.
func heightOf(profile []hazewright.ProfilePoint, share float64) (float64, bool) {
	total := 0.0
	for i := 1; i < len(profile); i++ {
		total += (profile[i].Height - profile[i-1].Height) * (profile[i].Mass + profile[i-1].Mass) / 2
	}
	sum := 0.0
	for i := 1; i < len(profile); i++ {
		part := (profile[i].Height - profile[i-1].Height) * (profile[i].Mass + profile[i-1].Mass) / 2
		if sum+part >= share*total && part > 0 {
			return profile[i-1].Height + (profile[i].Height-profile[i-1].Height)*(share*total-sum)/part, true
		}
		sum += part
	}
	return 0, false
}

// fallChart shows fall speed against height.
func fallChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "fall", Table: dataTable{Head: []string{"Design", "Height [km]", "Fall speed [mm/s]"}}}
	d := xy{x: axis{name: "Fall speed [mm/s]", log: true}, y: axis{name: "Height [km]"}, byHeight: true}
	var parts []string
	for i := range r.Designs {
		design := &r.Designs[i]
		name := clean(design.Name)
		var points [][2]float64
		for _, p := range design.FallSpeed {
			if p.Value > 0 {
				points = append(points, [2]float64{p.Value * 1e3, p.Height / 1e3})
			}
		}
		if len(points) == 0 {
			continue
		}
		d.lines = append(d.lines, line{name: name, points: points, colour: i, dash: i})
		for _, p := range thin(points, 24) {
			c.Table.Rows = append(c.Table.Rows, []string{name, significant(p[1], 3), significant(p[0], 3)})
		}
		if v := design.Figures["fall_speed"]; !v.Null {
			parts = append(parts, fmt.Sprintf("%s: %s", name, pretty(v.Value, "mm/s")))
		}
	}
	if len(d.lines) == 0 {
		return nil, nil
	}
	d.x.min, d.x.max = extent(d.lines, 0, true)
	d.y.max = niceAbove(highest(d))
	c.Title = "Fall speed grows with height."
	if len(parts) > 0 {
		c.Title = "Fall speed at the ground. " + sentence(parts)
	}
	c.Caption = "Mean fall speed, weighted by mass. Thinner air slips more past small particles, so they fall faster high up."
	c.Table.Note = "Every few heights; all are in profile.csv."
	c.Alt = "Lines of fall speed against height for each design. " + c.Title
	return c, c.draw(d)
}

// lossChart shows the loss budget of every design as one bar.
func lossChart(r *hazewright.Result) (*chart, error) {
	c := &chart{ID: "losses", Kind: "bars", Table: dataTable{Head: []string{"Design", "Loss", "Share", "Lifetime if only this acted"}}}
	b := bars{x: axis{name: "Share of what leaves the air for good [%]", min: 0, max: 100}, label: "letterShare"}
	index := map[string]int{}
	var parts []string
	var with []*hazewright.DesignResult
	for i := range r.Designs {
		if len(r.Designs[i].Losses) > 0 {
			with = append(with, &r.Designs[i])
			b.names = append(b.names, clean(r.Designs[i].Name))
		}
	}
	for k, d := range with {
		largest := hazewright.Loss{}
		for _, l := range d.Losses {
			name := clean(l.Name)
			if _, ok := index[name]; !ok {
				index[name] = len(b.segments)
				b.segments = append(b.segments, segment{name, make([]float64, len(with))})
			}
			b.segments[index[name]].values[k] += 100 * l.Share
			if l.Share > largest.Share {
				largest = l
			}
			alone := "-"
			if l.LifetimeAlone > 0 {
				alone = duration(l.LifetimeAlone)
			}
			c.Table.Rows = append(c.Table.Rows, []string{clean(d.Name), name, percent(l.Share), alone})
		}
		if largest.Share > 0 {
			parts = append(parts, fmt.Sprintf("%s: %s %s", clean(d.Name), clean(largest.Name), percent(largest.Share)))
		}
	}
	if len(with) == 0 {
		return nil, nil
	}
	c.Title = "Largest loss. " + sentence(parts)
	c.Caption = "How airborne mass leaves for good, at steady state. What settles and is lifted again is not lost." + shownCase(r)
	c.Alt = "One bar for each design, parted by loss. " + c.Title
	return c, c.fill(b)
}

// missingDesigns says which designs the charts cannot show, and why.
func missingDesigns(r *hazewright.Result) string {
	var names []string
	for i := range r.Designs {
		if r.Designs[i].Programme == nil {
			cause := r.Designs[i].Cause
			if r.Designs[i].Reached {
				cause = why(r.Designs[i].Figures["production_rate"])
			}
			names = append(names, fmt.Sprintf("%s (%s)", clean(r.Designs[i].Name), prettyText(clean(cause))))
		}
	}
	if len(names) == 0 {
		return ""
	}
	return "No supply or schedule to show for: " + strings.Join(names, ", ") + "."
}
