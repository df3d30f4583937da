package hazewright

import (
	"context"
	"fmt"
)

// SpectrumRow is the optics of one population at one wavelength: of one particle,
// averaged over orientation, polarisation and sizes, and per kilogram.
type SpectrumRow struct {
	Population string  // "rod 8 um x 80 nm, iron"
	Wavelength float64 // in vacuum [m]
	Ext, Sca   float64 // cross-sections [m2]
	Abs        float64 // [m2]
	G          float64 // mean cosine of scattering
	KappaExt   float64 // [m2/kg]
	KappaAbs   float64 // [m2/kg]
	Method     string
	Err        float64 // relative, estimated
}

// Spectrum returns the optics of every population of a design, by name, at the given
// wavelengths [m], in their order, population by population. The model factors of the
// study are left aside. Errors: no such design (with the nearest name and the list); a
// wavelength outside the range of a material, which is named with the range it has.
func (e *Engine) Spectrum(ctx context.Context, s *Study, design string, wavelengths []float64) ([]SpectrumRow, error) {
	p, err := checked(ctx, s)
	if err != nil {
		return nil, err
	}
	d, err := s.designByName(design)
	if err != nil {
		return nil, err
	}
	var rows []SpectrumRow
	for i := range d.Particles {
		pop, err := e.population(p, d, i)
		if err != nil {
			return nil, err
		}
		for _, w := range wavelengths {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			x, err := pop.optics.At(w)
			if err != nil {
				return nil, fmt.Errorf("%s at %s: %w", pop.name, FormatSI(w, "um", 4), err)
			}
			rows = append(rows, SpectrumRow{Population: pop.name, Wavelength: w, Ext: x.Ext, Sca: x.Sca, Abs: x.Abs, G: x.G,
				KappaExt: x.Ext / pop.meanMass, KappaAbs: x.Abs / pop.meanMass, Method: x.Method, Err: x.Err})
		}
	}
	return rows, nil
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
		return nil, fmt.Errorf("the study has %d designs: name one of %s", len(names), listWords(names, "or"))
	}
	hint := ""
	if near := Nearest(name, names); near != "" {
		hint = fmt.Sprintf(" (did you mean %q?)", near)
	}
	return nil, fmt.Errorf("no design is named %q%s; the study has %s", name, hint, listWords(names, "and"))
}
