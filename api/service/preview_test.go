package service

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"math"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
	"spanwright/testdata"
)

// frozen is a store that holds one estimate's job and nothing else.
type frozen struct {
	Store
	Tx
	id  uuid.UUID
	job []byte
}

func (f frozen) InTenant(_ context.Context, _ uuid.UUID, fn func(Tx) error) error { return fn(f) }

func (f frozen) Estimate(_ context.Context, id uuid.UUID) (Estimate, error) {
	if id != f.id {
		return Estimate{}, &Error{Kind: NotFound, Message: "no such estimate"}
	}
	return Estimate{ID: id}, nil
}

func (f frozen) EstimateJob(context.Context, uuid.UUID) ([]byte, error) { return f.job, nil }

var viewer = Actor{Organisation: uuid.New(), Name: "desk", Role: auth.Viewer}

// previewer is a service over one stored job.
func previewer(tb testing.TB, j job.Job, heavy int) (*Service, uuid.UUID) {
	tb.Helper()
	data, _, err := j.Canonical()
	if err != nil {
		tb.Fatal(err)
	}
	f := frozen{id: uuid.New(), job: data}
	limits := DefaultLimits()
	limits.Heavy = heavy
	return New(Config{Store: f, Limits: limits, Now: time.Now, NewID: uuid.NewV7, Logger: slog.New(slog.DiscardHandler)}), f.id
}

func freeze(tb testing.TB, s schedule.Schedule, book ratebook.Book, edited ...ratebook.Multiplier) job.Job {
	tb.Helper()
	j, err := job.Freeze(s, job.Source{Name: "schedule", SHA256: strings.Repeat("0", 64)}, book, edited, job.DefaultSampling())
	if err != nil {
		tb.Fatal(err)
	}
	j.EngineVersion, j.Data = document.EngineVersion, engine.Data()
	return j
}

// brackwater is the demo's first scheme.
func brackwater(tb testing.TB) schedule.Schedule {
	tb.Helper()
	return readSchedule(tb, testdata.InnerSupport, "brackwater.xlsx", sheet.MediaTypeXLSX)
}

func readSchedule(tb testing.TB, data []byte, name, media string) schedule.Schedule {
	tb.Helper()
	cells, err := sheet.Open(data, name, media, sheet.DefaultLimits())
	if err != nil {
		tb.Fatal(err)
	}
	s, err := schedule.Read(context.Background(), cells, schedule.Options{Project: "P", Scheme: "S"})
	if err != nil {
		tb.Fatal(err)
	}
	return s
}

// tenThousand is a schedule of 10,000 rows in 40 groups, of seven families. Its loads
// are invented.
func tenThousand(tb testing.TB) schedule.Schedule {
	tb.Helper()
	var b strings.Builder
	b.WriteString("Mark,Group,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade\n")
	families := []string{"IPE", "HEA", "HEB", "CHS", "SHS", "RHS"}
	supports := []string{"simple", "fixed both ends", "propped", "two equal spans"}
	for i := range 10_000 {
		fmt.Fprintf(&b, "M%d,G%d,%d,%.2f,%s,%.1f,%.1f,%s,S355\n", i, i%40, 1+i%9, 2+float64(i%97)/20, supports[i%4], 0.5+float64(i%7)/4, 1+float64(i%11)/3, families[i%6])
	}
	return readSchedule(tb, []byte(b.String()), "large.csv", sheet.MediaTypeCSV)
}

// tidal is a multiplier that a user moves.
func tidal(likely float64) PreviewMultiplier {
	return PreviewMultiplier{Name: "tidal work", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewPERT(likely-0.1, likely, likely+0.4)}
}

func asked(m ...PreviewMultiplier) NewPreview { return NewPreview{Multipliers: m} }

func stored(m PreviewMultiplier) ratebook.Multiplier {
	return ratebook.Multiplier{Name: m.Name, Scope: m.Scope, Subject: m.Subject, Categories: m.Categories, Spread: m.Spread, Group: m.Group, Reason: "test", Author: "desk", Version: 1}
}

// The issue asks for 20 ms at the 95th percentile from stored draws and 300 ms on a
// miss. A miss draws again for a multiplier that the model does not have; the first
// preview of an estimate sizes its members besides.
//
//	go test ./api/service -run '^$' -bench Preview -benchtime 200x
func BenchmarkPreview(b *testing.B) {
	for _, c := range []struct {
		name string
		read func(testing.TB) schedule.Schedule
	}{{"brackwater", brackwater}, {"10000 rows", tenThousand}} {
		j := freeze(b, c.read(b), ratebook.UnitRate())
		b.Run(c.name+"/hit", func(b *testing.B) {
			s, id := previewer(b, j, 2)
			again(b, s, id, tidal(1.2))
			percentile(b, func(i int) { hit(b, s, id, tidal(1.2+float64(i%50)/100)) })
		})
		b.Run(c.name+"/miss", func(b *testing.B) {
			s, id := previewer(b, j, 2)
			again(b, s, id, tidal(1.2))
			percentile(b, func(i int) {
				m := tidal(1.2)
				m.Name = fmt.Sprintf("new %d", i)
				again(b, s, id, m)
			})
		})
		b.Run(c.name+"/miss by member", func(b *testing.B) {
			s, id := previewer(b, j, 2)
			again(b, s, id, tidal(1.2))
			percentile(b, func(i int) {
				m := tidal(1.2)
				m.Scope, m.Subject = ratebook.MemberScope, j.Members[i%len(j.Members)].Mark
				again(b, s, id, m)
			})
		})
		b.Run(c.name+"/first", func(b *testing.B) {
			percentile(b, func(int) {
				s, id := previewer(b, j, 2)
				again(b, s, id, tidal(1.2))
			})
		})
	}
}

func again(tb testing.TB, s *Service, id uuid.UUID, m ...PreviewMultiplier) Preview {
	tb.Helper()
	p, err := s.Preview(context.Background(), viewer, id, asked(m...))
	if err != nil {
		tb.Fatal(err)
	}
	return p
}

func hit(tb testing.TB, s *Service, id uuid.UUID, m ...PreviewMultiplier) Preview {
	tb.Helper()
	p := again(tb, s, id, m...)
	if !p.StoredDraws {
		tb.Fatal("the draws were not kept")
	}
	return p
}

// percentile reports the time of which 95 in 100 are below.
func percentile(b *testing.B, run func(i int)) {
	var took []time.Duration
	for i := 0; b.Loop(); i++ {
		start := time.Now()
		run(i)
		took = append(took, time.Since(start))
	}
	slices.Sort(took)
	b.ReportMetric(float64(took[(len(took)-1)*95/100].Microseconds())/1000, "p95-ms")
}

// A preview from stored draws says what one that draws afresh says, for changed, new
// and own multipliers; its base is that of the engine to the cent; and its percentiles
// lie within the errors of a whole estimate with the same multipliers frozen.
func TestPreviewFromStoredDrawsIsOneFromNewOnes(t *testing.T) {
	s := brackwater(t)
	before := stored(tidal(1.1))
	j := freeze(t, s, ratebook.UnitRate(), before)
	svc, id := previewer(t, j, 1)
	again(t, svc, id, tidal(1.3))
	own := tidal(1.5)
	own.Scope, own.Subject = ratebook.MemberScope, j.Members[0].Mark
	height := tidal(1.2)
	height.Name, height.Categories = "height", []string{ratebook.Erection, ratebook.Coating}
	for name, list := range map[string][]PreviewMultiplier{"changed": {tidal(1.42)}, "new": {height}, "of a member": {own}, "all": {tidal(1.2), height, own}} {
		kept := again(t, svc, id, list...)
		if twice := hit(t, svc, id, list...); fmt.Sprint(twice.After) != fmt.Sprint(kept.After) {
			t.Errorf("%s: the second answer differs:\n%v\n%v", name, twice.After, kept.After)
		}
		fresh, other := previewer(t, j, 1)
		if want := again(t, fresh, other, list...); want.StoredDraws || !alikeTotals(kept.After, want.After) {
			t.Errorf("%s: stored draws say\n%v, new ones\n%v", name, kept.After, want.After)
		}
		var edited []ratebook.Multiplier
		if name == "new" || name == "of a member" {
			edited = append(edited, before)
		}
		for _, m := range list {
			edited = append(edited, stored(m))
		}
		whole, err := engine.Run(context.Background(), freeze(t, s, ratebook.UnitRate(), edited...), nil)
		if err != nil {
			t.Fatal(err)
		}
		if !kept.After.Base.Equal(whole.Totals.Base) {
			t.Errorf("%s: a base of %s, the estimate says %s", name, kept.After.Base, whole.Totals.Base)
		}
		for i, p := range kept.After.Percentiles {
			q := whole.Range.Percentiles[i]
			if far := float64(p.Value - q.Value); p.P != q.P || !(math.Abs(far) <= 4*math.Hypot(float64(p.SE), float64(q.SE))) {
				t.Errorf("%s: P%g = %v ± %v, the estimate says %v ± %v", name, float64(100*p.P), p.Value, p.SE, q.Value, q.SE)
			}
		}
	}
}

// alikeTotals compares sums that were added in another order.
func alikeTotals(a, b PreviewTotals) bool {
	same := a.Base.Equal(b.Base) && len(a.Percentiles) == len(b.Percentiles)
	for i := range a.Percentiles {
		same = same && math.Abs(float64(a.Percentiles[i].Value-b.Percentiles[i].Value)) <= 1e-9*math.Abs(float64(b.Percentiles[i].Value))
	}
	return same
}

// A multiplier of a place that there is not acts on nothing, and the answer says so.
func TestPreviewOfAMultiplierThatActsOnNothing(t *testing.T) {
	svc, id := previewer(t, freeze(t, brackwater(t), ratebook.Ratio()), 1)
	m := tidal(1.5)
	m.Scope, m.Subject = ratebook.GroupScope, "no such group"
	p := again(t, svc, id, m)
	if p.Multipliers[0].Acts || p.Multipliers[0].Note == "" || p.Change.Base.Sign() != 0 || p.Change.AtConfidence.Sign() != 0 {
		t.Errorf("multipliers %+v, change %+v", p.Multipliers, p.Change)
	}
}

// Many at once, on few places, of two estimates: each answer is that of its own
// request, whatever was kept or dropped meanwhile.
func TestPreviewsAtTheSameTime(t *testing.T) {
	j := freeze(t, brackwater(t), ratebook.Ratio())
	svc, id := previewer(t, j, 64)
	want := map[int]string{}
	for k := range 4 {
		want[k] = again(t, svc, id, tidal(1.1+float64(k)/10)).After.Base.String()
	}
	svc, id = previewer(t, j, 64)
	var all sync.WaitGroup
	for k := range 16 {
		all.Go(func() {
			m := tidal(1.1 + float64(k%4)/10)
			if k >= 8 {
				m.Name = fmt.Sprint("new ", k)
			}
			p, err := svc.Preview(context.Background(), viewer, id, asked(m))
			if err != nil || p.After.Base.String() != want[k%4] {
				t.Errorf("%d: %v, base %s, want %s", k, err, p.After.Base, want[k%4])
			}
		})
	}
	all.Wait()
}

// The cache keeps the bases used last, forgets failures, and lets those who wait for
// one that was given up make their own.
func TestPreviewsKept(t *testing.T) {
	p := newPreviews()
	ctx := context.Background()
	key := func(n int) previewKey { return previewKey{viewer.Organisation, uuid.UUID{byte(n)}} }
	made := 0
	basis := func() (*previewBasis, error) { made++; return &previewBasis{}, nil }
	for n := range mostPreviews + 1 {
		if _, kept, err := p.get(ctx, key(n), basis); kept || err != nil {
			t.Fatal(n, kept, err)
		}
		_, _, _ = p.get(ctx, key(0), basis) // stays the one used last
	}
	if len(p.entries) != mostPreviews || made != mostPreviews+1 {
		t.Errorf("%d kept, %d made", len(p.entries), made)
	}
	for n, want := range map[int]bool{0: true, 1: false, 2: true} {
		if _, ok := p.entries[key(n)]; ok != want {
			t.Errorf("entry %d is kept: %v, want %v", n, ok, want)
		}
	}
	large := func() (*previewBasis, error) {
		return &previewBasis{job: job.Job{Members: make([]schedule.Member, previewMemory>>13+1)}}, nil
	}
	if b, _, err := p.get(ctx, key(99), large); b == nil || err != nil || len(p.entries) != 0 {
		t.Errorf("%v, %v: %d entries beside one that is larger than all memory, want none", b, err, len(p.entries))
	}
	for _, failure := range []error{context.Canceled, &Error{Kind: Busy}} {
		if _, _, err := p.get(ctx, key(1), func() (*previewBasis, error) { return nil, failure }); !errors.Is(err, failure) || len(p.entries) != 0 {
			t.Errorf("%v, %d entries", err, len(p.entries))
		}
	}
	first, second := make(chan struct{}), make(chan error)
	go func() {
		<-first
		_, kept, err := p.get(ctx, key(5), basis)
		if kept {
			err = errors.New("a basis that was given up was kept")
		}
		second <- err
	}()
	_, _, err := p.get(ctx, key(5), func() (*previewBasis, error) {
		close(first)
		time.Sleep(10 * time.Millisecond)
		return nil, context.Canceled
	})
	if waited := <-second; !errors.Is(err, context.Canceled) || waited != nil {
		t.Errorf("the first got %v, the one that waited %v", err, waited)
	}
}
