// Package mie computes how spheres, layered spheres and long cylinders absorb and
// scatter light, from the exact series solutions.
//
// Conventions throughout: refractive index m = n + ik with time dependence
// exp(-i omega t), so absorption means k > 0; the particle stands in vacuum; the
// size parameter is x = 2 pi a/lambda with a the radius.
//
// Worked example: a water-like sphere of radius 0.525 um and index 1.55 in light of
// 0.6328 um has x = 5.2128; [Sphere] returns Ext = 3.10543, Back = 2.92534 and
// G = 0.63314, the values printed in [BohrenHuffman1983], appendix A.
package mie
