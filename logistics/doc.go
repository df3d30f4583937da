// Package logistics works out what it takes to put a particle design aloft and keep
// it there: sustaining production, capacity, ore, energy, power, plant, landed mass,
// flights and launch windows, the schedule to the goal, and the cooling after the end.
// It takes numbers and a function for the warming and returns numbers; all are SI.
//
// # What is assumed throughout
//
//   - Whole planet, annual mean: a store is one mass [kg], not a map.
//   - A stream is one size class of one population. Its residence times and shares
//     come from the steady column at the goal and are held; only the clumping rate
//     moves, in proportion to the airborne mass of the stream's population.
//   - Warming follows the burden at once (the equilibrium curve is used; ground and
//     ice respond with no delay), so that both build-up and ending look faster than
//     they would be.
//   - One feedstock and one plant per design: every population is made from the same
//     mineral by the same steps. A population whose material the mineral cannot give
//     is warned about.
//   - Each population has its own production line. It runs at its capacity until the
//     airborne mass of that population reaches its goal, then makes just what holds
//     it there; that falls to the sustaining rate as the loose layer on the ground fills.
//   - Wear is counted in the mass landed after the build-up, not as lost capacity.
//
// # Worked example
//
// 0.03 Gt of iron rods lasting 10 yr need 3e10 kg / 3.156e8 s = 95 kg/s, which at
// 7874 kg/m3 is 12 L/s. Filled once from home with 100 t a landing: 300 000 landings.
package logistics
