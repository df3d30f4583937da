package reports

// Provenance says what made an output, so that it can be made again.
type Provenance struct {
	Version string // of the program, such as "0.1.0"
	Command string // the command line that reproduces the output
}

const (
	tool          = "hazewright"
	schemaVersion = 1 // of the JSON output; additive changes keep it
)

// Scope is the sentence that every output carries.
const Scope = "Whole planet, annual mean; no latitude, season, region or phased area; feasibility grade."

// Deferral closes every list of cautions and gates.
const Deferral = "This list is not a clearance. Defer to local codes, to qualified safety and planetary-protection officers " +
	"and to licensed practice; the figures are feasibility grade only."
