package reports

import (
	"path/filepath"
	"strings"

	"hazewright"
)

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

// baseName is a file's name without its folder: outputs do not tell where a study lies,
// and are the same wherever it does.
func baseName(file string) string {
	if file == "" {
		return ""
	}
	return filepath.Base(file)
}

// position writes a place in the study file, such as "study.yaml:12:5", without its folder.
func position(s *hazewright.Study, pos string) string {
	if rest, ok := strings.CutPrefix(pos, s.File); ok && s.File != "" {
		return baseName(s.File) + rest
	}
	return pos
}
