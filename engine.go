package hazewright

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"sync"

	"hazewright/optics/greenhouse"
	"hazewright/settling/atmosphere"
)

// Options are the settings of an [Engine]. None of them changes a result.
type Options struct {
	Workers  int                                 // designs worked on at once; 0 = one per processor
	Progress func(stage string, done, total int) // told of finished designs; may be nil
}

// Engine assesses studies. It remembers the optics of the particles it has seen, so
// that a second study with the same particles costs less; remembering never changes
// a result. It may be used by several goroutines.
type Engine struct {
	options Options
	optics  *memo
}

// NewEngine returns an engine with the given options.
func NewEngine(o Options) *Engine {
	if o.Workers <= 0 {
		o.Workers = runtime.GOMAXPROCS(0)
	}
	return &Engine{options: o, optics: newMemo(memoSize)}
}

// planet is what every design of a study shares. It does not change once made.
type planet struct {
	study  *Study
	quick  *greenhouse.Quick
	column atmosphere.Column
	area   float64 // [m2]
	base   Baseline
}

// Assess takes every design of the study through the whole chain: optics, warming,
// fate, supply, figures, limits. A design that cannot reach the goal is a result and
// not an error. Errors: ctx ended; a [*StudyError] for a world or particle that the stages
// are not valid for, see [Engine.Check].
func (e *Engine) Assess(ctx context.Context, s *Study) (*Result, error) {
	p, err := checked(ctx, s)
	if err != nil {
		return nil, err
	}
	out := &Result{Study: s, Baseline: p.base, Methods: methods(p), Designs: make([]DesignResult, len(s.Designs))}
	out.Warnings = append(out.Warnings, s.Warnings...)
	if len(s.Uncertain) > 0 {
		out.Warnings = append(out.Warnings, Warning{"uncertain", "read and checked, but nothing draws from it: an assessment is of the values as given"})
	}
	if len(s.Sweeps) > 0 {
		out.Warnings = append(out.Warnings, Warning{"sweeps", "read and checked, but not run: an assessment is of the values as given"})
	}
	for _, text := range p.quick.Planet().Departures() {
		out.Warnings = append(out.Warnings, Warning{"warming", "estimate outside its baseline: " + text})
	}

	errs := make([]error, len(s.Designs))
	slots := make(chan struct{}, e.options.Workers)
	var wait sync.WaitGroup
	var mu sync.Mutex
	done := 0
	for i := range s.Designs {
		wait.Add(1)
		go func() {
			defer wait.Done()
			slots <- struct{}{}
			defer func() { <-slots }()
			d := &s.Designs[i]
			r, err := e.design(ctx, p, d)
			if err != nil {
				errs[i] = fmt.Errorf("design %q: %w", d.Name, err)
				return
			}
			out.Designs[i] = *r
			if e.options.Progress != nil {
				mu.Lock()
				defer mu.Unlock()
				done++
				e.options.Progress("designs", done, len(s.Designs))
			}
		}()
	}
	wait.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if err := errors.Join(errs...); err != nil {
		return nil, err
	}
	return out, nil
}
