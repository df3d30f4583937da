package hazewright

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"hazewright/optics"
	"hazewright/optics/material"
)

// MaxWavelengths is the largest number of wavelengths of one spectrum.
const MaxWavelengths = 20_000

// Spectrum is the optics of the populations of one design against wavelength. The model
// factors of the study (kappa_factor) are left aside: it is what the optics say.
type Spectrum struct {
	Study              *Study
	Design             string
	Populations        []SpectrumPopulation
	SurfaceTemperature float64   // of the planet without aerosol, for the shape of its emission [K]
	Methods            []Method  // of the optics: how, where it holds, what is left out
	Warnings           []Warning // those of the study first
}

// SpectrumPopulation is one population with what its optics rest on.
type SpectrumPopulation struct {
	Particle        // as the study has it
	Name     string // "rod 8 um x 80 nm, iron"; populations of the same name are numbered
	Density  float64
	Mass     float64 // of one particle, mean by number [kg]
	Nodes    []SizeNode

	// OxideUsed is the oxide skin [m], OxideGiven whether the study gives it; else it is the
	// material's own, an assumption.
	OxideUsed  float64
	OxideGiven bool

	// AddedResistivity is what electron scattering at the surface adds to the resistivity
	// [ohm m], SurfaceFactor x SurfaceRhoL/SurfaceAcross: the factor is 0.75 for rods and 0.375 for walls,
	// SurfaceRhoL resistivity times electron mean free path [ohm m2], SurfaceAcross the diameter or wall
	// that acts, without the oxide skin [m]. All are 0 for spheres and where it is switched off.
	AddedResistivity, SurfaceFactor, SurfaceRhoL, SurfaceAcross float64

	IndexSource      string  // where the refractive index was measured
	IndexNote        string  // how well it is fitted, and what is used beyond the measurements
	DataMin, DataMax float64 // range of the measurements [m]

	Rows []SpectrumRow // in the order of the wavelengths
}

// SizeNode is one size class of a population: the size (radius of a sphere, length of a
// rod) [m], its share of the number of particles, the mass of one [kg].
type SizeNode struct{ Size, Number, Mass float64 }

// SpectrumRow is the optics of one population at one wavelength: of one particle,
// averaged over orientation, polarisation and sizes, and per kilogram.
type SpectrumRow struct {
	Wavelength float64 // in vacuum [m]
	Ext, Sca   float64 // cross-sections [m2]
	Abs        float64 // [m2]
	G          float64 // mean cosine of the scattering angle
	KappaExt   float64 // [m2/kg]
	KappaAbs   float64 // [m2/kg]
	Method     string
	Err        float64 // relative, estimated, of the method alone
}

// SpectrumError says why a spectrum cannot be given as it is asked for.
type SpectrumError struct {
	Input   string // "design" or "wavelengths"
	Value   string // what was asked for; may be empty
	Problem string // "is outside"
	Allowed string // "0.2 um to 1000 um"; may be empty
	Hint    string // how to mend it; may be empty
}

// Error returns the whole in one line.
func (e *SpectrumError) Error() string {
	text := e.Input + ":"
	for _, part := range []string{e.Value, e.Problem, e.Allowed} {
		if part != "" {
			text += " " + part
		}
	}
	if e.Hint != "" {
		text += "; " + e.Hint
	}
	return text
}

// Spectrum returns the optics of every population of a design at the given wavelengths
// in vacuum [m], in their order. An empty name means the only design. Errors: ctx ended; those of
// [Engine.Check]; those of [Study.CheckWavelengths]; a size parameter that the method does not
// take, as a [*SpectrumError].
func (e *Engine) Spectrum(ctx context.Context, s *Study, design string, wavelengths []float64) (*Spectrum, error) {
	p, err := checked(ctx, s)
	if err != nil {
		return nil, err
	}
	if err := s.CheckWavelengths(design, wavelengths); err != nil {
		return nil, err
	}
	d, err := s.designByName(design)
	if err != nil {
		return nil, err
	}
	out := &Spectrum{Study: s, Design: d.Name, SurfaceTemperature: p.base.SurfaceTemperature, Warnings: slices.Clone(s.Warnings)}
	for _, m := range methods(p) {
		if m.Stage == "Optics" {
			out.Methods = append(out.Methods, m)
		}
	}
	progress := newCount(e.options.Progress, "wavelengths", len(wavelengths)*len(d.Particles))
	for i, q := range d.Particles {
		o, err := opticsOf(q)
		if err != nil {
			return nil, err
		}
		pop := aboutPopulation(d, i, o)
		if pop.Rows, err = spectrumRows(ctx, o, wavelengths, e.options.Workers, progress); err != nil {
			if ctx.Err() != nil {
				return nil, ctx.Err()
			}
			return nil, &SpectrumError{Input: "wavelengths", Value: pop.Name + ":", Problem: err.Error()}
		}
		out.Populations = append(out.Populations, pop)
		for _, ref := range materialsOf(q) {
			m, err := materialOf(ref)
			if err != nil {
				return nil, err
			}
			if w, held := heldIndex(m, wavelengths); held > 0 {
				out.Warnings = append(out.Warnings, Warning{"spectrum", fmt.Sprintf(
					"%s: at %d of %d wavelengths, such as %s, the index of %s is not known and an end value is held; it is known from %s to %s",
					pop.Name, held, len(wavelengths), FormatSI(w, "um", 4), m.Name, FormatSI(m.DataMin, "um", 4), FormatSI(m.DataMax, "um", 4))})
			}
		}
	}
	return out, nil
}

// CheckWavelengths returns nil if the optics of a design can be given at all of the
// wavelengths [m]. Errors: a [*SpectrumError] for a design that there is not (with the nearest name
// and the list); no wavelength, or more than [MaxWavelengths]; the first wavelength outside the range
// in which the indices of all materials of the design are known, or that is not a number.
func (s *Study) CheckWavelengths(design string, wavelengths []float64) error {
	d, err := s.designByName(design)
	if err != nil {
		return err
	}
	if n := len(wavelengths); n == 0 || n > MaxWavelengths {
		return &SpectrumError{Input: "wavelengths", Value: fmt.Sprint(n), Problem: "is outside", Allowed: fmt.Sprintf("1 to %d wavelengths", MaxWavelengths)}
	}
	low, high := 0.0, math.Inf(1)
	var lowOf, highOf string
	for _, q := range d.Particles {
		for _, ref := range materialsOf(q) {
			m, err := materialOf(ref)
			if err != nil {
				return err
			}
			if m.MinWavelength > low {
				low, lowOf = m.MinWavelength, m.Name
			}
			if m.MaxWavelength < high {
				high, highOf = m.MaxWavelength, m.Name
			}
		}
	}
	const slack = 1e-9 // relative: the ends of a range may carry rounding, and the materials allow it
	for _, w := range wavelengths {
		if w >= low*(1-slack) && w <= high*(1+slack) {
			continue
		}
		of := lowOf
		if w > high {
			of = highOf
		}
		return &SpectrumError{Input: "wavelengths", Value: wavelengthText(w), Problem: "is outside",
			Allowed: fmt.Sprintf("%s to %s", wavelengthText(low), wavelengthText(high)),
			Hint:    fmt.Sprintf("the refractive index of %s is not known there", of)}
	}
	return nil
}

// wavelengthText writes a wavelength [m], radio waves in metres.
func wavelengthText(w float64) string {
	if w >= 0.01 {
		return FormatSI(w, "m", 6)
	}
	return FormatSI(w, "um", 6)
}

// materialsOf returns what a particle is made of.
func materialsOf(q Particle) []MaterialRef {
	if q.Core != "" {
		return []MaterialRef{q.Material, {Name: q.Core}}
	}
	return []MaterialRef{q.Material}
}

// aboutPopulation returns the i-th population of a design without its rows.
func aboutPopulation(d *Design, i int, o *optics.Population) SpectrumPopulation {
	q, used := d.Particles[i], o.Particle()
	m := used.Material
	out := SpectrumPopulation{
		Particle: q, Name: describe(q), Density: m.Density, Mass: o.MeanMass(),
		OxideUsed: used.Oxide, OxideGiven: q.Oxide >= 0,
		IndexSource: m.Source, IndexNote: m.FitNote, DataMin: m.DataMin, DataMax: m.DataMax,
	}
	for k := range d.Particles {
		if k != i && describe(d.Particles[k]) == out.Name {
			out.Name += fmt.Sprintf(", population %d", i+1)
			break
		}
	}
	for _, n := range o.Nodes() {
		out.Nodes = append(out.Nodes, SizeNode(n))
	}
	if used.SurfaceScattering {
		switch used.Shape {
		case optics.Rod:
			out.SurfaceFactor, out.SurfaceAcross = 0.75, used.Diameter-2*used.Oxide // [Dingle1950]
		case optics.Shell:
			out.SurfaceFactor, out.SurfaceAcross = 0.375, used.Wall-used.Oxide // [Sondheimer1952]
		}
	}
	if out.SurfaceAcross > 0 {
		out.SurfaceRhoL = m.SurfaceRhoL
		out.AddedResistivity = out.SurfaceFactor * m.SurfaceRhoL / out.SurfaceAcross
	}
	return out
}

// spectrumRows works out the rows, by several workers: each wavelength on its own, so that
// their number does not change a byte.
func spectrumRows(ctx context.Context, o *optics.Population, wavelengths []float64, workers int, progress *count) ([]SpectrumRow, error) {
	rows, errs := make([]SpectrumRow, len(wavelengths)), make([]error, len(wavelengths))
	next := make(chan int)
	var wait sync.WaitGroup
	for range min(workers, len(wavelengths)) {
		wait.Go(func() {
			for i := range next {
				x, err := o.At(wavelengths[i])
				m := o.MeanMass()
				rows[i] = SpectrumRow{Wavelength: wavelengths[i], Ext: x.Ext, Sca: x.Sca, Abs: x.Abs, G: x.G,
					KappaExt: x.Ext / m, KappaAbs: x.Abs / m, Method: x.Method, Err: x.Err}
				errs[i] = err
				progress.add()
			}
		})
	}
	for i := range wavelengths {
		if ctx.Err() != nil {
			break
		}
		next <- i
	}
	close(next)
	wait.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	for _, err := range errs { // the first, whichever worker met it
		if err != nil {
			return nil, err
		}
	}
	return rows, nil
}

// heldIndex returns how many of the wavelengths lie where a material's index is an end value
// held beyond what is known, and the first of them. A continuation by a formula is not held.
func heldIndex(m *material.Material, wavelengths []float64) (first float64, n int) {
	for _, w := range wavelengths {
		known := min(max(w, m.DataMin), m.DataMax)
		if w == known {
			continue
		}
		at, err := m.Index(w)
		end, errEnd := m.Index(known)
		if errors.Join(err, errEnd) != nil || at != end {
			continue
		}
		if n++; n == 1 {
			first = w
		}
	}
	return first, n
}

// count tells how far a piece of work is.
type count struct {
	mu        sync.Mutex
	tell      func(stage string, done, total int) // may be nil
	stage     string
	done, all int
}

func newCount(tell func(string, int, int), stage string, all int) *count {
	return &count{tell: tell, stage: stage, all: all}
}

func (c *count) add() {
	if c.tell == nil {
		return
	}
	c.mu.Lock()
	defer c.mu.Unlock()
	c.done++
	c.tell(c.stage, c.done, c.all)
}

// designByName returns the design of that name, or the only one if name is empty.
func (s *Study) designByName(name string) (*Design, error) {
	if name == "" && len(s.Designs) == 1 {
		return &s.Designs[0], nil
	}
	names := make([]string, len(s.Designs))
	for i := range s.Designs {
		if names[i] = s.Designs[i].Name; names[i] == name {
			return &s.Designs[i], nil
		}
	}
	if name == "" {
		return nil, &SpectrumError{Input: "design", Problem: fmt.Sprintf("the study has %d designs", len(names)),
			Hint: "name one of " + fewWords(names, "or")}
	}
	out := &SpectrumError{Input: "design", Value: fmt.Sprintf("%q", name), Problem: "is not in the study", Hint: "it has " + fewWords(names, "and")}
	if near := Nearest(name, names); near != "" {
		out.Hint = fmt.Sprintf("did you mean %q? The study has %s", near, fewWords(names, "and"))
	}
	return nil, out
}
