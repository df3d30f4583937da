package optics

import (
	"fmt"
	"math"

	"hazewright/optics/internal/planck"
	"hazewright/optics/material"
)

// MeanPolarizability returns the number and orientation mean of the static polarizability of
// one particle [m3], p = eps0 alpha E, from [material.Axis.StaticPermittivity].
func (p *Population) MeanPolarizability() (float64, error) {
	sum := 0.0
	for _, n := range p.nodes {
		a, err := p.particle.polarizability(n.Size)
		if err != nil {
			return 0, err
		}
		sum += n.Number * a
	}
	return sum, nil
}

// SumRuleCap returns the largest Planck-mean extinction per mass [m2/kg] at temperature T [K]
// that a particle of this static polarizability could have, whatever its spectrum. The integral of
// extinction over all wavelengths is fixed by causality [Purcell1969],
//
//	int C_ext d lambda = pi^2 <alpha>
//
// so a mean with weight w(lambda), int w = 1, is at most max(w) pi^2 <alpha>/mass: all
// extinction at the peak of the blackbody curve. Errors: T not positive.
func SumRuleCap(p *Population, temperature float64) (float64, error) {
	if !(temperature > 0) || math.IsInf(temperature, 0) {
		return 0, fmt.Errorf("temperature %g K of a sum-rule cap must be positive", temperature)
	}
	alpha, err := p.MeanPolarizability()
	if err != nil {
		return 0, err
	}
	return planck.Peak(temperature) * math.Pi * math.Pi * alpha / p.mass, nil
}

// OneModeYardstick returns lambda^2/(8 pi) [m2] for a wavelength [m]: the most that a single
// dipole mode absorbs, averaged over orientation and polarisation. A rod longer than
// about 0.6 wavelengths has several modes and may pass it: a yardstick, not a bound.
func OneModeYardstick(wavelength float64) float64 { return wavelength * wavelength / (8 * math.Pi) }

// MaterialCap returns the most absorption per mass [m2/kg] that small pieces of any shape can
// have at a wavelength [m], index m and density [kg/m3], averaged over orientation
// [Miller2014] (one of three axes resonant, as in a needle):
//
//	kappa = k |chi|^2/(3 density Im chi),   chi = m^2 - 1
//
// Errors: an index without absorption, for which there is no such cap, or arguments not positive.
func MaterialCap(wavelength float64, m complex128, density float64) (float64, error) {
	chi := (m - 1) * (m + 1)
	if !(wavelength > 0) || !(density > 0) || !(imag(chi) > 0) {
		return 0, fmt.Errorf("material cap needs positive wavelength, density and absorption, not %g m, %g kg/m3, m = %g", wavelength, density, m)
	}
	return 2 * math.Pi / wavelength * (real(chi)*real(chi) + imag(chi)*imag(chi)) / (3 * density * imag(chi)), nil
}

// MaterialCap is the function [MaterialCap] of what the particles are made of: the mean over
// optical axes, and by mass over wall and core of a shell, since the bound adds up over
// volume. The indices are those of the bulk, which absorb no less. Errors: the
// materials' ranges; a part without absorption, for which there is no such cap.
func (p *Population) MaterialCap(wavelength float64) (float64, error) {
	var masses [2]float64
	for _, n := range p.nodes {
		wall, core := p.particle.masses(n.Size)
		masses[0] += n.Number * wall
		masses[1] += n.Number * core
	}
	sum := 0.0
	for i, m := range []*material.Material{p.particle.Material, p.particle.Core} {
		if m == nil {
			continue
		}
		for axis, a := range m.Axes() {
			index, err := m.IndexAlong(axis, wavelength)
			if err != nil {
				return 0, err
			}
			most, err := MaterialCap(wavelength, index, m.Density)
			if err != nil {
				return 0, fmt.Errorf("%s: %w", m.Name, err)
			}
			sum += masses[i] / p.mass * a.Weight * most
		}
	}
	return sum, nil
}
