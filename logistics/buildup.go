package logistics

import "math"

// mostTreads is the number of windows up to which the capacity grows in steps. A longer
// build-up follows the straight line through the middle of the treads.
const mostTreads = 100

// stage is a time from which on the share of the full capacity is
//
//	share + slope (t - from)
//
// until the next stage.
type stage struct{ from, share, slope float64 }

func (s stage) at(t float64) float64 { return s.share + s.slope*(t-s.from) }

// localStages returns how the capacity grows window by window: what a window lands
// runs after commissioning, in proportion to the mass landed so far.
func localStages(s Supply, w Way) []stage {
	first := s.Delivery.FirstWindow + s.Plant.Commissioning
	if w.Windows == 0 {
		return []stage{{from: first, share: 1}}
	}
	spacing := s.Delivery.WindowSpacing
	tread := w.LandedPerWindow / w.LandedMass
	if w.Windows > mostTreads {
		return []stage{
			{from: first, share: tread / 2, slope: tread / spacing},
			{from: first + spacing*(1/tread-0.5), share: 1},
		}
	}
	out := make([]stage, int(w.Windows))
	for k := range out {
		out[k] = stage{from: first + float64(k)*spacing, share: min(1, float64(k+1)*tread)}
	}
	return out
}

// shippedStages returns the one step of the shipped route: from the first window on,
// what a window lands is released evenly until the next, up to the capacity.
func shippedStages(s Supply, w Way, capacity float64) []stage {
	rate := w.LandedPerWindow / s.Delivery.WindowSpacing
	return []stage{{from: s.Delivery.FirstWindow, share: min(1, rate/capacity)}}
}

// history is the supply that the stores answer to.
type history struct {
	stages    []stage
	overbuilt float64 // capacity / sustaining production
	stopAt    float64 // s; +Inf for none
}

// last returns when the capacity is complete [s].
func (h history) last() float64 { return h.stages[len(h.stages)-1].from }

// after returns the capacity relative to the sustaining production from time t on, and
// until when it holds.
func (h history) after(t float64) (now stage, until float64) {
	until = math.Inf(1)
	for _, st := range h.stages {
		if st.from > t {
			until = st.from
			break
		}
		now = st
	}
	if t >= h.stopAt {
		return stage{}, math.Inf(1)
	}
	now.share *= h.overbuilt
	now.slope *= h.overbuilt
	return now, min(until, h.stopAt)
}
