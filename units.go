package hazewright

import (
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"
	"sync"
)

// Dimension is the exponents of a unit over the base units m, kg, s, K, A, rad and
// dB. Angle and level (dB) stand apart from plain numbers so that a share cannot be
// given in degrees.
type Dimension [7]int16

// String returns the dimension in plain words where there is a word for it
// ("length", "pressure"), else as a product of SI units ("kg m-2").
func (d Dimension) String() string {
	if d == (Dimension{}) {
		return "plain number"
	}
	for _, w := range dimensionWords {
		if u, err := parseUnit(w.unit); err == nil && u.dim == d {
			return w.word
		}
	}
	var parts []string
	for i, symbol := range [...]string{"m", "kg", "s", "K", "A", "rad", "dB"} {
		switch e := d[i]; {
		case e == 1:
			parts = append(parts, symbol)
		case e != 0:
			parts = append(parts, symbol+strconv.Itoa(int(e)))
		}
	}
	return strings.Join(parts, " ")
}

// dimensionWords names the dimensions that studies use.
var dimensionWords = [...]struct{ unit, word string }{
	{"m", "length"}, {"kg", "mass"}, {"s", "time"}, {"K", "temperature"},
	{"rad", "angle"}, {"dB", "level"}, {"m2", "area"}, {"m3", "volume"},
	{"m/s", "speed"}, {"m/s2", "acceleration"}, {"m2/s", "diffusivity"},
	{"m3/s", "volume per time"}, {"kg/s", "mass per time"}, {"kg/m2", "mass per area"},
	{"kg/m3", "density"}, {"m2/kg", "area per mass"}, {"Pa", "pressure"},
	{"J", "energy"}, {"W", "power"}, {"J/kg", "energy per mass"}, {"W/m2", "power per area"},
	{"kg/W", "mass per power"}, {"V", "voltage"}, {"V/m", "field strength"},
	{"K/m", "temperature per length"}, {"1/s", "rate (one per time)"},
}

// UnitDef is one unit symbol that study files may use.
type UnitDef struct {
	Symbol    string
	Dimension Dimension
	Factor    float64 // in SI: one of this unit is Factor SI units; degC has the offset 273.15 K besides
	Meaning   string
}

// unitRow is a row of the table of units; factors are decimal text so that scaling
// is exact.
type unitRow struct {
	symbol  string
	dim     Dimension
	factor  string
	meaning string
}

// The table of units. yr, sol and t are the ones people argue about: yr is the Julian
// year of 365.25 d, sol the mean solar day of Mars, 88 775.244 s [AllisonMcEwen2000],
// t 1000 kg.
var (
	dimLength      = Dimension{1}
	dimMass        = Dimension{0, 1}
	dimTime        = Dimension{0, 0, 1}
	dimTemperature = Dimension{0, 0, 0, 1}
	dimPressure    = Dimension{-1, 1, -2}
	dimEnergy      = Dimension{2, 1, -2}
	dimPower       = Dimension{2, 1, -3}
	dimVolume      = Dimension{3}
	dimVoltage     = Dimension{2, 1, -3, 0, -1}
	dimRate        = Dimension{0, 0, -1}
	dimAngle       = Dimension{0, 0, 0, 0, 0, 1}
	dimLevel       = Dimension{0, 0, 0, 0, 0, 0, 1}
)

var unitRows = [...]unitRow{
	{"nm", dimLength, "1e-9", "nanometre"},
	{"um", dimLength, "1e-6", "micrometre; also µm and μm"},
	{"mm", dimLength, "1e-3", "millimetre"},
	{"cm", dimLength, "1e-2", "centimetre"},
	{"m", dimLength, "1", "metre"},
	{"km", dimLength, "1e3", "kilometre"},
	{"ng", dimMass, "1e-12", "nanogram"},
	{"ug", dimMass, "1e-9", "microgram"},
	{"mg", dimMass, "1e-6", "milligram"},
	{"g", dimMass, "1e-3", "gram"},
	{"kg", dimMass, "1", "kilogram"},
	{"t", dimMass, "1e3", "tonne, 1000 kg"},
	{"kt", dimMass, "1e6", "thousand tonnes"},
	{"Mt", dimMass, "1e9", "million tonnes"},
	{"Gt", dimMass, "1e12", "thousand million tonnes"},
	{"us", dimTime, "1e-6", "microsecond"},
	{"ms", dimTime, "1e-3", "millisecond"},
	{"s", dimTime, "1", "second"},
	{"min", dimTime, "60", "minute"},
	{"h", dimTime, "3600", "hour"},
	{"d", dimTime, "86400", "day, 86 400 s"},
	{"sol", dimTime, "88775.244", "mean solar day of Mars, 88 775.244 s"},
	{"yr", dimTime, "31557600", "Julian year, 365.25 d"},
	{"mK", dimTemperature, "1e-3", "millikelvin"},
	{"K", dimTemperature, "1", "kelvin; a temperature or a difference"},
	{"degC", dimTemperature, "1", "degree Celsius; temperatures only, never differences"},
	{"Pa", dimPressure, "1", "pascal"},
	{"hPa", dimPressure, "1e2", "hectopascal"},
	{"kPa", dimPressure, "1e3", "kilopascal"},
	{"MPa", dimPressure, "1e6", "megapascal"},
	{"mbar", dimPressure, "1e2", "millibar"},
	{"bar", dimPressure, "1e5", "bar"},
	{"atm", dimPressure, "101325", "standard atmosphere"},
	{"J", dimEnergy, "1", "joule"},
	{"kJ", dimEnergy, "1e3", "kilojoule"},
	{"MJ", dimEnergy, "1e6", "megajoule"},
	{"GJ", dimEnergy, "1e9", "gigajoule"},
	{"TJ", dimEnergy, "1e12", "terajoule"},
	{"PJ", dimEnergy, "1e15", "petajoule"},
	{"Wh", dimEnergy, "3600", "watt hour"},
	{"kWh", dimEnergy, "3600e3", "kilowatt hour"},
	{"MWh", dimEnergy, "3600e6", "megawatt hour"},
	{"GWh", dimEnergy, "3600e9", "gigawatt hour"},
	{"TWh", dimEnergy, "3600e12", "terawatt hour"},
	{"mW", dimPower, "1e-3", "milliwatt"},
	{"W", dimPower, "1", "watt"},
	{"kW", dimPower, "1e3", "kilowatt"},
	{"MW", dimPower, "1e6", "megawatt"},
	{"GW", dimPower, "1e9", "gigawatt"},
	{"TW", dimPower, "1e12", "terawatt"},
	{"PW", dimPower, "1e15", "petawatt"},
	{"mL", dimVolume, "1e-6", "millilitre"},
	{"L", dimVolume, "1e-3", "litre"},
	{"mV", dimVoltage, "1e-3", "millivolt"},
	{"V", dimVoltage, "1", "volt"},
	{"kV", dimVoltage, "1e3", "kilovolt"},
	{"Hz", dimRate, "1", "hertz"},
	{"kHz", dimRate, "1e3", "kilohertz"},
	{"MHz", dimRate, "1e6", "megahertz"},
	{"GHz", dimRate, "1e9", "gigahertz"},
	{"A", Dimension{0, 0, 0, 0, 1}, "1", "ampere"},
	{"rad", dimAngle, "1", "radian"},
	{"deg", dimAngle, "0.0174532925199432957692369076848861271344", "degree of angle, pi/180 rad"},
	{"dB", dimLevel, "1", "decibel, 10 log10 of a power ratio"},
	{"%", Dimension{}, "1e-2", "per cent"},
	{"ppm", Dimension{}, "1e-6", "parts per million"},
}

// unitWords are spellings that people try, with the symbol to use.
var unitWords = map[string]string{
	"micron": "um", "microns": "um", "micrometer": "um", "micrometre": "um", "nanometer": "nm", "nanometre": "nm",
	"meter": "m", "metre": "m", "meters": "m", "metres": "m", "year": "yr", "years": "yr", "a": "yr", "y": "yr",
	"day": "d", "days": "d", "hour": "h", "hours": "h", "hr": "h", "sec": "s", "second": "s", "seconds": "s",
	"minute": "min", "minutes": "min", "sols": "sol", "tonne": "t", "tonnes": "t", "ton": "t", "tons": "t", "T": "t",
	"kelvin": "K", "degK": "K", "C": "degC", "celsius": "degC", "degrees": "deg", "degree": "deg", "percent": "%",
	"watt": "W", "watts": "W", "joule": "J", "pascal": "Pa", "bars": "bar", "mb": "mbar", "l": "L", "liter": "L", "litre": "L",
	"KW": "kW", "Kg": "kg", "KG": "kg", "KM": "km", "Km": "km", "k": "K", "gram": "g", "grams": "g",
}

// celsiusOffset is 0 degC in kelvin.
var celsiusOffset = big.NewRat(27315, 100)

// scaleUnit is a parsed unit: one of it is factor SI units.
type scaleUnit struct {
	dim     Dimension
	factor  *big.Rat
	celsius bool
	text    string // in one normal spelling
}

// unitTable returns the symbols with their exact factors.
var unitTable = sync.OnceValue(func() map[string]scaleUnit {
	table := make(map[string]scaleUnit, len(unitRows))
	for _, r := range unitRows {
		f, ok := new(big.Rat).SetString(r.factor)
		if !ok {
			panic("hazewright: bad factor in the table of units: " + r.symbol)
		}
		table[r.symbol] = scaleUnit{dim: r.dim, factor: f, celsius: r.symbol == "degC", text: r.symbol}
	}
	return table
})

// Units returns every unit symbol that a study file may use, grouped by dimension,
// small to large. Symbols combine with a space or '*' for a product, '/' for a
// quotient, digits for a power ("m2", "m^2", "s-1") and parentheses: "t/(t/d)",
// "W m-2", "mg/m2".
func Units() []UnitDef {
	table := unitTable()
	defs := make([]UnitDef, len(unitRows))
	for i, r := range unitRows {
		f, _ := table[r.symbol].factor.Float64()
		defs[i] = UnitDef{Symbol: r.symbol, Dimension: r.dim, Factor: f, Meaning: r.meaning}
	}
	return defs
}

// unitsOf returns the symbols of one dimension, for hints.
func unitsOf(d Dimension) []string {
	var symbols []string
	for _, r := range unitRows {
		if r.dim == d {
			symbols = append(symbols, r.symbol)
		}
	}
	return symbols
}

const (
	maxUnitText  = 64
	maxUnitPower = 9
	maxUnitDepth = 4
)

// normalSigns turns the typographic spellings of unit text into plain ones.
var normalSigns = strings.NewReplacer(
	"µ", "u", "μ", "u", "°C", "degC", "°", "deg", "·", "*", "⋅", "*", "−", "-",
	"⁻", "-", "⁰", "0", "¹", "1", "²", "2", "³", "3", "⁴", "4", "⁵", "5", "⁶", "6", "⁷", "7", "⁸", "8", "⁹", "9",
)

// parseUnit reads unit text. "" and "1" are the unit of a plain number.
func parseUnit(text string) (scaleUnit, error) {
	if len(text) > maxUnitText {
		return scaleUnit{}, &QuantityError{Problem: "has a unit that is too long", Hint: "write it in fewer symbols"}
	}
	p := unitParser{rest: strings.TrimSpace(normalSigns.Replace(text))}
	if p.rest == "" {
		return scaleUnit{factor: big.NewRat(1, 1)}, nil
	}
	u, err := p.product(0)
	if err != nil {
		return scaleUnit{}, err
	}
	if p.rest != "" {
		return scaleUnit{}, &QuantityError{Problem: fmt.Sprintf("has a unit that cannot be read at %q", p.rest),
			Hint: `write units like "W/m2", "kg m-2" or "t/(t/d)"`}
	}
	if u.text == "1" {
		u.text = ""
	}
	return u, nil
}

type unitParser struct{ rest string }

func (p *unitParser) skipSpace() (skipped bool) {
	n := len(p.rest)
	p.rest = strings.TrimLeft(p.rest, " \t")
	return len(p.rest) < n
}

// product reads factors joined by '*', ' ' and '/', up to a closing parenthesis.
func (p *unitParser) product(depth int) (scaleUnit, error) {
	total := scaleUnit{factor: big.NewRat(1, 1)}
	divided := false
	p.skipSpace()
	for first := true; ; first = false {
		spaced := p.skipSpace()
		if p.rest == "" || p.rest[0] == ')' {
			if first {
				return scaleUnit{}, &QuantityError{Problem: "has an empty unit", Hint: `write units like "W/m2"`}
			}
			return total, nil
		}
		divide, sign := false, ""
		switch {
		case p.rest[0] == '/':
			divide, divided, sign = true, true, "/"
			if first {
				sign = "1/"
			}
		case first:
		case p.rest[0] == '*' || spaced:
			if divided {
				return scaleUnit{}, &QuantityError{Problem: "has a product after '/', which can be read in two ways",
					Hint: `put parentheses: "W/(m2 K)"`}
			}
			sign = " "
		default:
			return total, nil // the caller reports what is left
		}
		if p.rest[0] == '/' || (!first && p.rest[0] == '*') {
			p.rest = p.rest[1:]
			p.skipSpace()
		}
		f, err := p.factor(depth)
		if err != nil {
			return scaleUnit{}, err
		}
		if f.celsius && (!first || divide || depth > 0) || total.celsius {
			return scaleUnit{}, &QuantityError{Problem: "uses degC inside a compound unit", Hint: "use K: a compound counts differences"}
		}
		if divide {
			total.factor.Quo(total.factor, f.factor)
		} else {
			total.factor.Mul(total.factor, f.factor)
		}
		for i := range total.dim {
			if divide {
				total.dim[i] -= f.dim[i]
			} else {
				total.dim[i] += f.dim[i]
			}
		}
		total.celsius = f.celsius
		total.text += sign + f.text
	}
}

// factor reads a symbol with its power, a parenthesis, or 1.
func (p *unitParser) factor(depth int) (scaleUnit, error) {
	if p.rest == "" {
		return scaleUnit{}, &QuantityError{Problem: "has a unit that ends early", Hint: `write units like "W/m2"`}
	}
	if p.rest[0] == '(' {
		if depth >= maxUnitDepth {
			return scaleUnit{}, &QuantityError{Problem: "has a unit with too many parentheses", Hint: "write it flat"}
		}
		p.rest = p.rest[1:]
		u, err := p.product(depth + 1)
		if err != nil {
			return scaleUnit{}, err
		}
		if p.rest == "" {
			return scaleUnit{}, &QuantityError{Problem: "has a unit without its closing parenthesis", Hint: "close it"}
		}
		p.rest = p.rest[1:] // product stops only at ')' or the end
		u.text = "(" + u.text + ")"
		return u, nil
	}
	if p.rest[0] == '1' && (len(p.rest) == 1 || !isDigit(p.rest[1])) {
		p.rest = p.rest[1:]
		return scaleUnit{factor: big.NewRat(1, 1), text: "1"}, nil
	}
	end := 0
	for end < len(p.rest) && (isLetter(p.rest[end]) || p.rest[end] == '%') {
		end++
	}
	symbol := p.rest[:end]
	if symbol == "" {
		return scaleUnit{}, &QuantityError{Problem: fmt.Sprintf("has a unit that cannot be read at %q", p.rest),
			Hint: `write units like "W/m2", "kg m-2" or "t/(t/d)"`}
	}
	known, ok := unitTable()[symbol]
	if !ok {
		return scaleUnit{}, &QuantityError{Problem: fmt.Sprintf("has the unknown unit %q", symbol), Hint: unitHint(symbol)}
	}
	p.rest = p.rest[end:]
	power, text, err := p.power(symbol)
	if err != nil {
		return scaleUnit{}, err
	}
	u := scaleUnit{factor: big.NewRat(1, 1), celsius: known.celsius, text: symbol + text}
	if known.celsius && power != 1 {
		return scaleUnit{}, &QuantityError{Problem: "uses degC inside a compound unit", Hint: "use K: a compound counts differences"}
	}
	for range max(power, -power) {
		if power > 0 {
			u.factor.Mul(u.factor, known.factor)
		} else {
			u.factor.Quo(u.factor, known.factor)
		}
	}
	for i := range u.dim {
		u.dim[i] = known.dim[i] * int16(power)
	}
	return u, nil
}

// power reads "2", "^2", "-1" or "^-1" after a symbol; without one the power is 1.
func (p *unitParser) power(symbol string) (power int, text string, err error) {
	rest := strings.TrimPrefix(p.rest, "^")
	caret := len(rest) < len(p.rest)
	end := 0
	if end < len(rest) && (rest[end] == '-' || rest[end] == '+' && caret) {
		end++
	}
	digits := end
	for end < len(rest) && isDigit(rest[end]) {
		end++
	}
	if end == digits {
		if caret || digits > 0 {
			return 0, "", &QuantityError{Problem: fmt.Sprintf("has a unit power without a number after %q", symbol), Hint: `write powers like "m2" or "s-1"`}
		}
		return 1, "", nil
	}
	power, convErr := strconv.Atoi(rest[:end])
	if convErr != nil || power == 0 || power > maxUnitPower || power < -maxUnitPower {
		return 0, "", &QuantityError{Problem: fmt.Sprintf("has the unit power %q", rest[:end]),
			Hint: fmt.Sprintf("powers are whole numbers from 1 to %d, or negative", maxUnitPower)}
	}
	p.rest = rest[end:]
	if power == 1 {
		return 1, "", nil
	}
	return power, strconv.Itoa(power), nil
}

// unitHint says which unit was probably meant.
func unitHint(symbol string) string {
	if use, ok := unitWords[symbol]; ok {
		return "use " + use
	}
	var symbols []string
	for _, r := range unitRows {
		if strings.EqualFold(r.symbol, symbol) {
			return "use " + r.symbol + " (case matters)"
		}
		symbols = append(symbols, r.symbol)
	}
	if near := Nearest(symbol, symbols); near != "" {
		return fmt.Sprintf("did you mean %s?", near)
	}
	return ""
}

func isDigit(c byte) bool  { return c >= '0' && c <= '9' }
func isLetter(c byte) bool { return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' }

// Convert returns a value given in SI units in the unit that the text names, such as
// "mg/m2", "t/d", "%" or "degC" ("" and "1" leave it as it is):
//
//	v = si / factor   (degC: v = si - 273.15)
//
// Only the unit's size matters: Convert cannot know the dimension of si. It returns an
// error for unit text that cannot be read, and for a result that is not finite.
func Convert(si float64, unit string) (float64, error) {
	u, err := parseUnit(unit)
	if err != nil {
		return 0, err
	}
	if math.IsNaN(si) || math.IsInf(si, 0) {
		return 0, fmt.Errorf("%g is not a finite number", si)
	}
	r := new(big.Rat).SetFloat64(si)
	if u.celsius {
		r.Sub(r, celsiusOffset)
	}
	v, _ := r.Quo(r, u.factor).Float64()
	if math.IsInf(v, 0) {
		return 0, fmt.Errorf("%g SI is too large to be shown in %q", si, unit)
	}
	return v, nil
}

// FormatSI returns a value given in SI units as people read it: converted to the unit,
// rounded to the given number of significant digits (at least 1), without an exponent
// between 0.001 and ten million, without trailing zeros: "85 mg/m2", "12.5 %". Plain
// numbers ("" or "1") get no unit. Where the value cannot be converted the text says so.
func FormatSI(si float64, unit string, digits int) string {
	v, err := Convert(si, unit)
	if err != nil {
		return fmt.Sprintf("%g SI (not shown in %q: %v)", si, unit, err)
	}
	text := formatDigits(v, max(digits, 1))
	if unit == "" || unit == "1" {
		return text
	}
	return text + " " + unit
}

// formatDigits rounds to significant digits.
func formatDigits(v float64, digits int) string {
	if v == 0 {
		return "0"
	}
	short := strconv.FormatFloat(v, 'e', digits-1, 64)
	mantissa, exponent, _ := strings.Cut(short, "e")
	exp, _ := strconv.Atoi(exponent)
	if exp < -3 || exp >= 7 {
		if strings.Contains(mantissa, ".") {
			mantissa = strings.TrimRight(strings.TrimRight(mantissa, "0"), ".")
		}
		return mantissa + "e" + strconv.Itoa(exp)
	}
	rounded, _ := strconv.ParseFloat(short, 64)
	text := strconv.FormatFloat(rounded, 'f', max(digits-1-exp, 0), 64)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	return text
}
