package greenhouse

import "testing"

func BenchmarkCurve(b *testing.B) {
	q := mustQuick(b, BaselinePlanet())
	a := testAerosols(b)["al_rod"]
	b.ReportAllocs()
	for b.Loop() {
		if _, err := q.Curve(a, 25); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkNewQuick(b *testing.B) {
	for b.Loop() {
		if _, err := NewQuick(BaselinePlanet()); err != nil {
			b.Fatal(err)
		}
	}
}
