package hazewright

import (
	"context"
	"errors"
	"strconv"
	"strings"

	"hazewright/optics/greenhouse"
)

// Check holds a loaded study against what the stages are valid for, without assessing
// it: the world as a whole, and every particle with its material. The error is a
// [*StudyError] with the place of each mistake, or ctx's.
func (e *Engine) Check(ctx context.Context, s *Study) error {
	_, err := checked(ctx, s)
	return err
}

// checked returns the planet of a study that can be assessed.
func checked(ctx context.Context, s *Study) (*planet, error) {
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	p, err := newPlanet(s)
	if err != nil {
		return nil, s.mistaken("world", err)
	}
	var all []Mistake
	for i := range s.Designs {
		d := &s.Designs[i]
		for k, q := range d.Particles {
			if err := checkParticle(q); err != nil {
				path := "designs[" + d.Name + "].particles[" + strconv.Itoa(k) + "]"
				all = append(all, s.mistaken(path, err).Mistakes...)
			}
		}
	}
	if all != nil {
		return nil, &StudyError{all}
	}
	return p, nil
}

// checkParticle holds one population against the optics: sizes, spread, skin, and a
// material known at every wavelength that is needed.
func checkParticle(q Particle) error {
	o, err := opticsOf(q)
	if err != nil {
		return err
	}
	m := o.Particle().Material
	thermal, solar := greenhouse.ThermalEdges(), greenhouse.SolarEdges()
	_, short := m.Index(solar[0])
	_, long := m.Index(thermal[len(thermal)-1])
	return errors.Join(short, long)
}

// mistaken turns what a stage says of one input into mistakes with a place, one for each
// joined error.
func (s *Study) mistaken(path string, err error) *StudyError {
	m := Mistake{File: s.File, Field: path}
	if o, ok := s.Origin(path); ok && o.Pos != "" {
		parts := strings.Split(o.Pos, ":")
		if n := len(parts); n > 2 {
			line, errLine := strconv.Atoi(parts[n-2])
			column, errColumn := strconv.Atoi(parts[n-1])
			if errLine == nil && errColumn == nil {
				m.File, m.Line, m.Column = strings.Join(parts[:n-2], ":"), line, column
			}
		} else {
			m.File = o.Pos
		}
	}
	var out StudyError
	for _, text := range strings.Split(err.Error(), "\n") {
		one := m
		one.Problem = text
		out.Mistakes = append(out.Mistakes, one)
	}
	return &out
}
