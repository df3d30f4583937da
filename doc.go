// Package hazewright works out whether an engineered aerosol could warm a cold
// planet with a thin atmosphere, and what that would take: one study file in, one
// table of named figures per design out.
//
// Data flows one way: a study file becomes a [Study]; its particles become
// scatterers (package optics) and falling bodies (package settling); a warming
// estimate (optics/greenhouse) turns burden into kelvin and back; package logistics
// turns the burden into production, landed mass and a schedule; the figures table
// names the results; package reports writes them.
//
// Scope: whole planet, annual mean, feasibility grade. No latitude, season or
// region. All quantities inside are SI.
package hazewright
