// Package greenhouse works out how much an aerosol warms the ground of a cold planet with a thin CO2 atmosphere.
//
// It holds the quick estimate, [Quick]: one well-mixed layer for sunlight, two energy balances for thermal radiation,
// and a table of how the planet without the aerosol radiates. It is a global, annual mean with one ground temperature.
// It has no layers of air of its own, so it cannot see an inversion grow or the air cool on its own account. How well it
// does against a full radiative-convective column is printed by [Accuracy], what it leaves out by [LeftOut].
//
// # What is solved
//
// Sunlight: natural dust and aerosol together as one layer over the ground, delta-Eddington two-stream in 20 bands, four
// directions of the Sun over the day side. It gives the net downward flux at the top Ft, at the ground Fs, and its mean
// over the depth of the layer Fm [W/m2]; Ft0, Fs0, Fm0 are those without the aerosol, and Q0 = (Ft0 + Fs0)/2.
//
// The planet without aerosol at its ground temperature T0 is described per thermal band b by three numbers: emission f
// (outgoing flux over Planck flux of the ground), transmission t of the air from ground to space, and back radiation d
// (downward flux at the ground over Planck flux of the ground). B is the Planck flux in the band [W/m2].
//
// Radiative balance. The aerosol adds to the resistance 1/f of each band what Eddington's solution gives for a layer of
// transport depth tau* = burden (Ext - GSca):
//
//	out_b = B_b(Ts) / (1/f'_b + 0.75 tau*_b),    f' = f Q0/Ft0,    X = sum B / sum out - 1
//	N_rad = [ (Ft+Fs)/2 + X Q0 Fm/Fm0 ] / (1 + X) - sum out
//
// (half of what is absorbed aloft leaves directly; the rest of the balance is Eddington's, in which the net solar flux at
// each depth must go out as thermal flux). f' makes N_rad vanish at T0 without aerosol.
//
// Convective balance. The air that carries the aerosol is as cold as the lapse limit G allows, Ts - G z, but no colder than
// the grey skin temperature (Ft / 2 sigma)^(1/4); <B> is the mean of its Planck flux over the heights from which emission
// escapes, weighted by exp(-1.66 tau*(above z)) 1.66 dtau*. With reflectance R and transmittance T of the aerosol layer,
// e = 1 - R - T, emissivity E of the ground, m = min(1, Ft/Ft0), D = m d B(T0):
//
//	up_b  = e <B> + R D + T [ E B(Ts) + (1-E)(e <B> + T D) ] / (1 - (1-E) R)
//	out_b = J_b [m s + (1-s) sum up / sum up0] + t_b up_b
//	N_con = Ft - sum out
//
// J is what the air above emits in the baseline; the share s of it is driven by sunlight on the dust.
//
// The ground temperature is the root of N = min(N_rad, N_con): convection can only carry heat up, so it lowers the ground
// below the radiative balance; where the air is heated from above (an inversion) the convective balance would be too warm
// and the radiative one rules. N at Ts = T0 is the forcing at fixed ground temperature.
//
// The slab balance out_b is Eddington's grey solution [Goody1989]; the diffusivity factor 1.66 is [Elsasser1942]; the
// sunlight equations are [Meador1980] with the scaling of [Joseph1976]; the combination into a minimum is our own and rests
// on the comparison in [Accuracy]. No factor was fitted to any aerosol.
//
// # By hand
//
// Without an atmosphere, 586.2 W/m2 at Bond albedo 0.25 absorb 586.2/4 x 0.75 = 109.9 W/m2, which a black ground radiates
// at (109.9/5.670e-8)^(1/4) = 209.8 K. A grey aerosol that only absorbs in the infrared, of depth 1, over that ground makes
// the balance sigma Ts^4 = 109.9 x (1 + 0.75), so Ts = 241 K, 31 K more, as long as convection allows the steep profile.
package greenhouse
