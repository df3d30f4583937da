// Package optics says what a particle does to light: cross-sections of spheres, shells and
// rods averaged over size and optical axes, means over bands and over the spectra of the ground and of the Sun, and the
// bounds that no particle of a given size can pass.
//
// Assumptions throughout: particles far apart, random orientation, unpolarised light,
// vacuum around them, refractive index n + ik with exp(-i omega t). SI units.
//
// Rods are solved by [rod.Standard] unless [Particle.Method] says otherwise: within 1e-5 of
// [rod.Reference] in thermal means and within 1e-3 in solar means of the iron and aluminium rods tested.
//
// Worked example: a population of iron rods 8 um x 80 nm is
//
//	iron, _ := material.ByName("iron")
//	rods, _ := NewPopulation(Particle{Shape: Rod, Length: 8e-6, Diameter: 80e-9, Material: iron})
//	means, _ := PlanckMean(rods, 210) // means.Abs about 1.4e4 m2/kg
//
// and of hollow aluminium shells, outer radius 5 um, wall 10 nm, 16 kg/m3 as a whole:
//
//	aluminium, _ := material.ByName("aluminium")
//	shells, _ := NewPopulation(Particle{Shape: Shell, Radius: 5e-6, Wall: 10e-9, Material: aluminium})
package optics

// CrossSection holds what one particle takes out of a beam [m2]: extinction, scattering and
// absorption (Ext = Sca + Abs), the mean cosine G of the scattering angle [1], the estimated
// relative standard error Err of the method [1] (refractive index not included), and the method.
type CrossSection struct {
	Ext, Sca, Abs, G, Err float64
	Method                string
}

// Scatterer is anything with cross-sections at a wavelength in vacuum [m].
type Scatterer interface {
	At(wavelength float64) (CrossSection, error)
}
