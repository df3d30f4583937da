package logistics

import "testing"

// classes splits a stream into size classes with their own residence.
func classes(s Stream, n int) []Stream {
	out := make([]Stream, n)
	for i := range out {
		f := 1 + 0.5*float64(i-n/2)/float64(n)
		out[i] = s
		out[i].Inventory /= float64(n)
		out[i].NewResidence *= f
		out[i].LiftedResidence *= f
		out[i].AgglomerationRate /= f
	}
	return out
}

func BenchmarkRun(b *testing.B) {
	d := demand(classes(ironStream(1e10), 9)...)
	s := lantern()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Run(d, s, linear(d)); err != nil {
			b.Fatal(err)
		}
	}
}

// Clumping in days beside a ground store of decades: stiff.
func BenchmarkRun_Sticky(b *testing.B) {
	s := ironStream(1e10)
	s.NewToGround, s.LiftedToGround, s.AgglomerationRate = 0.01, 0.01, 0.99/(20*day)
	s.NewResidence, s.LiftedResidence = 20*day, 20*day
	s.AgglomerationRate = 0.9 / (20 * day)
	d := demand(classes(s, 9)...)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Run(d, lantern(), linear(d)); err != nil {
			b.Fatal(err)
		}
	}
}
