package mie

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Speed on one core, m = 1.3+0.1i, five results for each sphere, full series (Sphere to
// 1e-12). Compared with a vectorised numpy implementation of the same recurrences (spheres
// sorted by size, loops over the order on vectors, best chunk of 512 to 2500 spheres), run in
// turn with the benchmark eight times on a shared two-core x86-64 server at about 3 GHz
// that other work kept busy; best and median run, spheres per second:
//
//	set                                     this package       numpy, x+4.05x^(1/3)+2 terms   numpy, to rounding
//	wide:  10,000, x log-uniform 0.01..100  1,170,000 1,050,000   250,000 164,000                196,000 177,000
//	large: 1,000, x uniform 100..1000          55,500    53,900     6,560   6,480                  6,390   6,200
//
// Ratio best to best: wide 4.7 and 6.0, large 8.5 and 8.7; median to median: 6.4 and 5.9, 8.3
// and 8.7. The runs spread by 30 % (wide) to 50 % (numpy).
//
// To repeat: GOMAXPROCS=1 go test -run xxx -bench Solver -count 8, in turn with such a
// numpy program with its thread count set to one.
func BenchmarkSolver(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 2))
	wide, large := make([]float64, 10000), make([]float64, 1000)
	for i := range wide {
		wide[i] = math.Pow(10, -2+4*r.Float64())
	}
	for i := range large {
		large[i] = 100 + 900*r.Float64()
	}
	for _, c := range []struct {
		name string
		x    []float64
	}{{"wide", wide}, {"large", large}} {
		b.Run(c.name, func(b *testing.B) {
			var s Solver
			b.ReportAllocs()
			for b.Loop() {
				for _, x := range c.x {
					if _, err := s.Sphere(x, complex(1.3, 0.1)); err != nil {
						b.Fatal(err)
					}
				}
			}
			b.ReportMetric(float64(len(c.x)*b.N)/b.Elapsed().Seconds(), "spheres/s")
		})
	}
}

func BenchmarkCoated(b *testing.B) {
	var s Solver
	for b.Loop() {
		if _, err := s.Coated(8, 10, complex(3, 2), complex(1.31, 1e-3)); err != nil {
			b.Fatal(err)
		}
	}
}
