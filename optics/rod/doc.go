// Package rod computes how thin rods of metal or another conductor absorb and scatter
// light, averaged over random orientation and over polarisation. A rod carries an
// axial current driven by the field along it, as an antenna does, with an internal
// impedance from its material; what that current leaves out (fields across the rod)
// comes from the infinite cylinder of package mie.
//
// Conventions: time dependence exp(-i omega t), refractive index m = n + ik with k > 0
// absorbing, rods in vacuum with flat ends, permeability 1, no preferred orientation.
//
// Three ways to the axial current, see [Options] and, for their measured errors, [Section.Rod]:
//
//   - [Reference] solves the exact equation of the thin tube by Galerkin's method in Chebyshev
//     modes ([NewMatrix]), from the quasi-static limit to 30 wavelengths. 0.1 ms for a shape in
//     the thermal infrared, 4 ms at 30 wavelengths; each further material 5 to 10 us.
//   - [Standard] does the same up to 8 wavelengths, then leans on the infinite cylinder. With a
//     [Memo], a population of nine lengths takes 0.4 ms a wavelength.
//   - [Fast] is in closed form: 10 to 30 us a rod, 3 % rms.
//
// The model (a thin tube for a solid rod) adds 0.2 % from 20 diameters on and 1 to 2 % once the
// circumference equals the wavelength. Optical constants are usually far less certain than
// that. Not modelled: bending, bundling, roughness, oxide other than as a thinner core, rods
// shorter than 10 diameters, preferred orientation.
//
// Worked example: a lossless rod half a wavelength long has the radiation resistance
// 73.1 ohm and the reactance 42.5 ohm of the handbooks with a current of half a sine (inductive, so
// negative under this time convention); it is shorter than that when it resonates, at 0.475
// wavelengths for 500 diameters, and then scatters 0.16 lambda^2 on average over orientation:
//
//	m, _ := NewMatrix(2*math.Pi*0.475, 500, 0)
//	c := m.SolveImpedance(0) // c.Sca about 0.16
package rod
