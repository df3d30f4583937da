package rod

import (
	"math"
	"sync"
)

const (
	memoPhase  = 16 // largest kL of a shape kept
	memoPiece  = 4  // kL of one piece
	memoShapes = 64
	memoEnds   = 8 // phases kept for ends
	memoRatio  = 4 // of length over diameter, of one piece
	shapeNodes = 9 // matrices in a piece
	endNodes   = 6
	shapeExtra = 6 // modes kept beyond those of a good conductor
	endExtra   = 12
)

// Memo keeps matrices already built, so that a spectrum of one population builds few of
// them. Results do not depend on the order of calls, and it is safe for several goroutines.
//
// For a given length over diameter it tabulates the external impedance at 9 Chebyshev nodes in
// each quarter of 0 < kL <= 16; times k that impedance is an entire function of k, which
// makes the interpolation good to 1e-6 of the cross-sections. For [Standard], the pieces of fixed
// L/lambda that end long rods are tabulated over the logarithm of length over diameter, to 1e-4.
//
// It takes up to 64 shapes of 0.2 MB (0.4 MB at 1000 diameters) and 8 lengths of ends of 0.2 to 1 MB
// for each factor 4 of wavelength; what does not fit is built anew every time.
type Memo struct {
	mu      sync.Mutex
	shapes  map[float64]*[memoPhase / memoPiece]*segment // by length over diameter
	ends    map[float64]*[8]*segment                     // by kL
	builder builder
}

// NewMemo returns an empty memory.
func NewMemo() *Memo {
	return &Memo{
		shapes: make(map[float64]*[memoPhase / memoPiece]*segment),
		ends:   make(map[float64]*[8]*segment),
	}
}

// segment tabulates matrices at Chebyshev points of the first kind.
type segment struct {
	size int
	at   []float64
	data [][]float64
}

// shape writes the matrix with at least so many modes into m and says whether it could.
func (c *Memo) shape(m *Matrix, phase, aspect float64, modes int) bool {
	if phase > memoPhase {
		return false
	}
	i := min(int(phase/memoPiece), memoPhase/memoPiece-1)
	from, to := float64(i*memoPiece), float64((i+1)*memoPiece)
	size, enough := memoSize(to, aspect, shapeExtra, modes)
	if !enough {
		return false
	}
	c.mu.Lock()
	pieces := c.shapes[aspect]
	if pieces == nil && len(c.shapes) < memoShapes {
		pieces = new([memoPhase / memoPiece]*segment)
		c.shapes[aspect] = pieces
	}
	if pieces != nil && pieces[i] == nil {
		pieces[i] = c.tabulate(size, shapeNodes, from, to, func(at float64) (float64, float64) { return at, aspect })
	}
	c.mu.Unlock()
	if pieces == nil {
		return false
	}
	pieces[i].interpolate(m, phase, phase, aspect)
	return true
}

// end is [Memo.shape] for a wire whose kL many aspects share.
func (c *Memo) end(m *Matrix, phase, aspect float64, modes int) bool {
	i := int(math.Log(aspect/MinAspect) / math.Log(memoRatio))
	if i < 0 || i >= 8 {
		return false
	}
	from := math.Log(MinAspect) + float64(i)*math.Log(memoRatio)
	to := from + math.Log(memoRatio)
	size, enough := memoSize(phase, math.Exp(to), endExtra, modes)
	if !enough {
		return false
	}
	c.mu.Lock()
	pieces := c.ends[phase]
	if pieces == nil && len(c.ends) < memoEnds {
		pieces = new([8]*segment)
		c.ends[phase] = pieces
	}
	if pieces != nil && pieces[i] == nil {
		pieces[i] = c.tabulate(size, endNodes, from, to, func(at float64) (float64, float64) { return phase, math.Exp(at) })
	}
	c.mu.Unlock()
	if pieces == nil {
		return false
	}
	pieces[i].interpolate(m, math.Log(aspect), phase, aspect)
	return true
}

// memoSize returns the modes of each parity that a table keeps, and whether they are enough.
func memoSize(phase, aspect float64, extra, modes int) (size int, enough bool) {
	most, _ := need(phase, aspect, 0)
	most += extra
	return (most + 1) / 2, modes <= most
}

// tabulate builds matrices between two values of a coordinate from which wire tells kL and L/d.
func (c *Memo) tabulate(size, nodes int, from, to float64, wire func(at float64) (phase, aspect float64)) *segment {
	s := &segment{size: size, at: make([]float64, nodes), data: make([][]float64, nodes)}
	for j := range nodes {
		s.at[j] = (from + to - (to-from)*math.Cos((float64(j)+0.5)*math.Pi/float64(nodes))) / 2
		phase, aspect := wire(s.at[j])
		m := c.builder.build(phase, aspect, size)
		regular(m.data, phase)
		s.data[j] = m.data
	}
	return s
}

// regular divides out what is singular at k = 0: 1/k of the reactance, k^2 of the radiation.
func regular(data []float64, phase float64) {
	n := len(data) / 5
	for i := range data {
		if i >= 2*n && i < 4*n {
			data[i] *= phase
		} else {
			data[i] /= phase * phase
		}
	}
}

// interpolate is the barycentric formula, at a coordinate.
func (s *segment) interpolate(m *Matrix, at, phase, aspect float64) {
	length := 5 * s.size * s.size
	if cap(m.data) < length {
		m.data = make([]float64, length)
	}
	m.data = m.data[:length]
	clear(m.data)
	m.phase, m.aspect, m.size = phase, aspect, s.size
	var buffer [max(shapeNodes, endNodes)]float64
	weights := buffer[:len(s.at)]
	sum, sign := 0.0, 1.0
	for j, node := range s.at {
		d := at - node
		if d == 0 {
			clear(weights)
			weights[j], sum = 1, 1
			break
		}
		weights[j] = sign * math.Sin((float64(j)+0.5)*math.Pi/float64(len(weights))) / d
		sum += weights[j]
		sign = -sign
	}
	half := 2 * s.size * s.size
	for j, w := range weights {
		w /= sum
		r, x := w*phase*phase, w/phase
		addScaled(m.data[:half], s.data[j], r)
		addScaled(m.data[half:2*half], s.data[j][half:], x)
		addScaled(m.data[2*half:], s.data[j][2*half:], r)
	}
}

func addScaled(out, data []float64, f float64) {
	if f == 0 {
		return
	}
	for i := range out {
		out[i] += f * data[i]
	}
}
