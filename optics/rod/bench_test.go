package rod

import (
	"fmt"
	"math"
	"testing"
)

// The external impedance of one shape at one wavelength, and one more material. L/d = 100. One
// goroutine on an AMD EPYC shared with other work, Go 1.26, best of several runs [us]:
//
//	kL              1     4     8    15    30    50   100   188 (30 wavelengths)
//	build          53    69    82    88   137   196   470  1800
//	solve         3.0   3.7   5.9   6.6    15    34   136  1080
//
// Wanted: below 200 us and 10 us for kL from 1 to 15.
func BenchmarkMatrix(b *testing.B) {
	for _, phase := range []float64{1, 4, 8, 15, 30, 50, 100, 188} {
		modes, _ := need(phase, 100, 0)
		var build builder
		b.Run(fmt.Sprintf("build/kL=%g", phase), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				build.build(phase, 100, (modes+1)/2)
			}
		})
		m := build.build(phase, 100, (modes+1)/2)
		var s solver
		b.Run(fmt.Sprintf("solve/kL=%g", phase), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				s.solve(m, m.size, m.internal(5+20i))
			}
		})
	}
}

// The whole spectrum of one iron-like rod 8 um x 80 nm, 150 wavelengths from 0.2 to 150 um.
//
// As above [ms], wanted: below 100 on two cores:
//
//	goroutines     1     2
//	reference     73     58
//	standard      30     32
//	fast           6      6
func BenchmarkSpectrum(b *testing.B) {
	for _, method := range []string{Reference, Standard, Fast} {
		for _, workers := range []int{1, 2} {
			b.Run(fmt.Sprintf("%s/%d goroutines", method, workers), func(b *testing.B) {
				for b.Loop() {
					memo := NewMemo()
					done := make(chan error, workers)
					for first := range workers {
						go func() {
							var work Workspace
							for i := first; i < 150; i += workers {
								l := 0.2e-6 * math.Pow(750, float64(i)/149)
								s, err := work.Section(l, 80e-9, complex(1.3+1.1e6*l, 1.5+2.7e6*l), Options{Method: method, Memo: memo})
								if err == nil {
									_, err = s.Rod(8e-6)
								}
								if err != nil {
									done <- err
									return
								}
							}
							done <- nil
						}()
					}
					for range workers {
						if err := <-done; err != nil {
							b.Fatal(err)
						}
					}
				}
			})
		}
	}
}
