package spread

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mathext"
)

func mustSampler(t testing.TB, s Spread) Sampler {
	t.Helper()
	r, err := s.Sampler()
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// Reference: the exact quantile of the spread. The promise of Sampler: mean and
// deviation of the table differ from the closed form by less than 1e-7 of the
// standard deviation. Integrated over z by the trapezoid rule, whose own error is
// below 1e-8 at this step for all but the triangle's kink.
func TestSamplerMoments(t *testing.T) {
	for name, s := range everyShape() {
		if s.Variance() == 0 {
			continue
		}
		r := mustSampler(t, s)
		mean, sd := s.Mean(), math.Sqrt(s.Variance())
		var m1, m2 float64
		const step = 1e-3
		for i := -9000; i <= 12000; i++ {
			z := (float64(i) + 0.5) * step
			d := (r.FromNormal(z) - mean) / sd
			w := math.Exp(-0.5*z*z) / math.Sqrt(2*math.Pi) * step
			m1 += w * d
			m2 += w * d * d
		}
		if math.Abs(m1) > 1e-7 || math.Abs(math.Sqrt(m2)-1) > 1e-7 {
			t.Errorf("%s: mean off by %.2g, deviation by %.2g standard deviations", name, m1, math.Sqrt(m2)-1)
		}
	}
}

// Reference: the exact quantile, point by point.
func TestSamplerAgainstQuantile(t *testing.T) {
	for name, s := range everyShape() {
		r := mustSampler(t, s)
		sd := math.Sqrt(s.Variance())
		for i := range 2000 {
			u := (float64(i) + 0.37) / 2000
			want := r.sh.quantile(u, 1-u)
			tolerance := 2e-8*(sd+math.Abs(want-r.Base())) + 1e-14*math.Abs(want)
			if got := r.FromUniform(u); !(math.Abs(got-want) <= tolerance) {
				t.Errorf("%s: from uniform %v: %v, want %v (%.2g sd)", name, u, got, want, (got-want)/sd)
			}
			z := mathext.NormalQuantile(u)
			if got := r.FromNormal(z); !(math.Abs(got-want) <= 5*tolerance) {
				t.Errorf("%s: from normal %v: %v, want %v (%.2g sd)", name, z, got, want, (got-want)/sd)
			}
		}
	}
}

func TestSamplerIsMonotoneAndFinite(t *testing.T) {
	for name, s := range everyShape() {
		r := mustSampler(t, s)
		last := math.Inf(-1)
		for i := -8300; i <= 8300; i++ {
			x := r.FromNormal(float64(i) / 1000)
			if !(x >= last) || math.IsInf(x, 0) {
				t.Errorf("%s: %v at z = %v after %v", name, x, float64(i)/1000, last)
			}
			last = x
		}
		for _, u := range []float64{0x1p-53, 0x1p-33, 1e-6, 1 - 1e-6, 1 - 0x1p-53} {
			if x := r.FromUniform(u); math.IsNaN(x) || math.IsInf(x, 0) {
				t.Errorf("%s: %v from uniform %v", name, x, u)
			}
		}
	}
}

func TestSamplerStaysInTheLimits(t *testing.T) {
	for name, s := range everyShape() {
		if s.Distribution == Lognormal {
			continue // no upper limit
		}
		r, a, b := mustSampler(t, s), s.Quantile(0), s.Quantile(1)
		for i := -8300; i <= 8300; i += 7 {
			if x := r.FromNormal(float64(i) / 1000); !(a <= x && x <= b) {
				t.Errorf("%s: %v outside of %v to %v", name, x, a, b)
			}
		}
	}
}

func TestFillIsTheSingleDraw(t *testing.T) {
	u := make([]float64, 1000)
	for i := range u {
		u[i] = (float64(i) + 0.5) / 1000
	}
	z := make([]float64, len(u))
	FillStandardNormal(z, u)
	for name, s := range everyShape() {
		r := mustSampler(t, s)
		x, y := append([]float64(nil), u...), append([]float64(nil), z...)
		r.FillUniform(x, x)
		r.FillNormal(y, y)
		for i := range u {
			if x[i] != r.FromUniform(u[i]) || y[i] != r.FromNormal(z[i]) {
				t.Fatalf("%s: draw %d differs when filled", name, i)
			}
		}
		if n := testing.AllocsPerRun(5, func() { r.FillUniform(x, u); r.FillNormal(x, z) }); n != 0 {
			t.Errorf("%s: %v allocations", name, n)
		}
	}
}

// Reference: gonum's mathext.NormalQuantile (Wichura 1988, AS 241), and back
// through the library's erfc.
func TestStandardNormal(t *testing.T) {
	for i := range 200000 {
		u := (float64(i) + 0.5) / 200000
		got, want := StandardNormal(u), mathext.NormalQuantile(u)
		if math.Abs(got-want) > 2e-9 {
			t.Fatalf("quantile of %v = %v, want %v", u, got, want)
		}
	}
	for e := 1.0; e < 53; e += 0.013 {
		u := math.Exp2(-e)
		got := StandardNormal(u)
		if back := 0.5 * math.Erfc(-got/math.Sqrt2); math.Abs(back/u-1) > 2e-8 {
			t.Errorf("quantile of %v = %v, whose probability is %v", u, got, back)
		}
		if other := StandardNormal(1 - u); e < 40 && math.Abs(other+StandardNormal(1-(1-u))) > 1e-12 {
			t.Errorf("not symmetric at %v: %v and %v", u, got, other)
		}
	}
	for _, c := range []struct{ u, want float64 }{{0.5, 0}, {0, math.Inf(-1)}, {1, math.Inf(1)}} {
		if got := StandardNormal(c.u); got != c.want {
			t.Errorf("quantile of %v = %v, want %v", c.u, got, c.want)
		}
	}
	for _, u := range []float64{-1, 2, math.NaN()} {
		if got := StandardNormal(u); !math.IsNaN(got) {
			t.Errorf("quantile of %v = %v, want NaN", u, got)
		}
	}
}

// Reference: the library's Erfc.
func TestTail(t *testing.T) {
	for i := range 9000 {
		z := -float64(i) / 1000
		if got, want := tail(z), 0.5*math.Erfc(-z/math.Sqrt2); math.Abs(got-want) > math.Min(2e-9, 1e-6*want) {
			t.Errorf("Φ(%v) = %v, want %v", z, got, want)
		}
	}
}

// Reference: the library's Exp.
func TestExp(t *testing.T) {
	for i := -72000; i <= 72000; i++ {
		x := float64(i) / 100.7
		got, want := exp(x), math.Exp(x)
		if !(got == want || math.Abs(got/want-1) < 1e-15) {
			t.Fatalf("exp(%v) = %v, want %v", x, got, want)
		}
	}
	if !math.IsNaN(exp(math.NaN())) || exp(math.Inf(-1)) != 0 || !math.IsInf(exp(math.Inf(1)), 1) {
		t.Error("exp of NaN and the infinities")
	}
}

func BenchmarkFill(b *testing.B) {
	u := make([]float64, 512)
	for i := range u {
		u[i] = math.Mod(float64(i)*0.6180339887, 1)*0.999 + 0.0005
	}
	z, dst := make([]float64, 512), make([]float64, 512)
	FillStandardNormal(z, u)
	for name, s := range map[string]Spread{"uniform": NewUniform(1, 2), "triangular": NewTriangular(1, 2, 4), "pert": NewPERT(1, 2, 4), "lognormal": NewLognormal(1, 2)} {
		r := mustSampler(b, s)
		b.Run(name+"/uniform", func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				r.FillUniform(dst, u)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/512, "ns/draw")
		})
		b.Run(name+"/normal", func(b *testing.B) {
			for b.Loop() {
				r.FillNormal(dst, z)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/512, "ns/draw")
		})
	}
}

func BenchmarkStandardNormal(b *testing.B) {
	u, dst := make([]float64, 512), make([]float64, 512)
	for i := range u {
		u[i] = math.Mod(float64(i)*0.6180339887, 1)*0.999 + 0.0005
	}
	for b.Loop() {
		FillStandardNormal(dst, u)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/512, "ns/draw")
}

func BenchmarkCompilePERT(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		mustSampler(b, NewPERT(1, 2, 4))
	}
}

func BenchmarkCompilePERTPercentiles(b *testing.B) {
	s := NewPERT(1, 2, 4)
	s.Bounds = BoundsPercentiles
	for b.Loop() {
		mustSampler(b, s)
	}
}
