// Package rod computes how thin rods of metal or another conductor absorb and scatter
// light, averaged over random orientation and over polarisation. A rod carries an
// axial current driven by the field along it, as an antenna does, with an internal
// impedance from its material; what that current leaves out (fields across the rod)
// comes from the infinite cylinder of package mie.
//
// Conventions: time dependence exp(-i omega t), refractive index m = n + ik with k > 0
// absorbing, rods in vacuum with flat ends, permeability 1, no preferred orientation.
//
// The axial current is a sum of sine modes (see [Section.Rod]); against an independent
// Chebyshev-Galerkin solution with the exact tube kernel the closed forms used here are
// within 2 % rms in absorption and in scattering (worst 5 %) in the thermal infrared, where the
// plain "one resonance a mode" form is off by 8 % rms and 19 % at worst. Not modelled:
// bending, bundling, roughness, oxide other than as a thinner core, rods shorter than 10
// diameters.
//
// Worked example: a lossless rod half a wavelength long has the radiation resistance
// 73.1 ohm and the reactance 42.5 ohm of the handbooks in its first mode (inductive, so
// negative under this time convention); it is shorter than that when it resonates,
// and then scatters 0.15 lambda^2 on average over orientation.
package rod
