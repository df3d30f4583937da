// Package atmosphere gives the properties of thin gases and of a still column of
// air: viscosity, mean free path, density, and pressure and temperature against
// height.
//
// Assumptions that hold throughout: the gas is ideal and of the same composition
// at every height, gravity does not change with height, the column is in
// hydrostatic balance. All quantities are in SI units.
//
// A worked example by hand: carbon dioxide at 210 K and 610 Pa has a viscosity of
// 1.370e-5 (210/273.15)^1.5 (273.15+222)/(210+222) = 1.0585e-5 Pa s, a density of
// 610 x 0.0440095/(8.31446 x 210) = 0.01538 kg/m3, and so a mean free path of
// 4.33 micrometres; under 3.71 m/s2 its scale height is
// 8.31446 x 210/(0.0440095 x 3.71) = 10.69 km.
package atmosphere
