// Package settling tells how long particles stay aloft: slip and drag, fall speed,
// the steady column with mixing, the exchange with the ground, agglomeration, the
// release plume and the sublimation of ice.
//
// All quantities are in SI units. Assumptions that hold throughout: the planet is
// one column in annual mean; particles are carried by the gas and do not change
// it; a particle touching the ground stays there until wind lifts it; rods are
// turned at random; the particles of a population all meet with the collision
// kernel of its median member. [LeftOut] lists what a fuller treatment would add.
//
// The entry points are [FallSpeed] for one particle, [Residence] for one column of
// like particles, and [Suspend] for a population held at a given airborne burden,
// with everything that removes it.
//
// A worked example by hand: a sphere of radius 0.5 um and density 7874 kg/m3 in
// carbon dioxide at 210 K and 610 Pa (viscosity 1.0585e-5 Pa s, mean free path
// 4.332 um). Kn = 8.664; the slip factor is 1 + 8.664 (1.257 + 0.4 exp(-1.1/8.664))
// = 14.94; the mass is 4.123e-15 kg; the drag per unit speed
// 6 pi 1.0585e-5 0.5e-6/14.94 = 6.676e-12 kg/s; so under 3.71 m/s2 it falls at
// 4.123e-15 x 3.71/6.676e-12 = 2.291e-3 m/s, and mixed through a scale height of
// 10.69 km it stays 10690/2.291e-3 = 4.67e6 s, 54 days.
package settling

// LeftOut returns, one sentence each, the processes this package does not yet
// treat, with the way each pushes the result, for a report to print.
func LeftOut() []string {
	return []string{
		"Agglomeration acts as one rate over the whole column (the number-weighted mean), not faster where particles are dense; where mixing is slow, low-released sticky particles last up to about 1.4 times as long as computed.",
		"Collisions with natural dust are not counted; sticky particles are lost sooner than computed.",
		"Collisions between different populations of a design are not counted; sticky mixes are lost sooner than computed.",
		"Differential settling and turbulence as causes of collisions are not counted; sticky particles of spread sizes are lost sooner than computed.",
		"All members of a population meet with the kernel of its median member; a wide spread of sizes collides faster than computed.",
		"Aggregates are not followed: what an aggregate is still worth is the single number aggregate value.",
		"Rods are taken to be turned at random; where shear or electric fields align them, rods lying flat fall slower and rods standing up faster than computed.",
	}
}
