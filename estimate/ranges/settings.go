package ranges

import (
	"fmt"
	"math"
	"runtime"
	"sort"
)

// Settings says how a cost model is simulated. The zero value of a field takes
// its default, except for Seed, whose zero is a seed.
type Settings struct {
	Seed        uint64             // keys every random stream
	Replicates  int                // independent repetitions, 32 (default) to 4096
	Trials      int                // trials per replicate, 16 to 262144; default 4096
	Percentiles []float64          // probabilities, 0 < P < 1; default 0.1, 0.5, 0.8, 0.9
	Correlation map[string]float64 // group → Spearman's rank correlation ρ, 0 ≤ ρ < 1
	Matrix      *Matrix            // correlations by assumption beside the groups; nil for none
	Workers     int                // goroutines; default GOMAXPROCS; no influence on the result

	// Sensitivities asks for Result.Sensitivities, which SensitivityMethod explains.
	Sensitivities bool
}

// Limits and defaults of Settings.
const (
	DefaultReplicates = 32
	DefaultTrials     = 4096
	MinReplicates     = 32
	MaxReplicates     = 4096
	MinTrials         = 16
	MaxTrials         = 1 << 18
	MaxTotal          = 1 << 22 // replicates × trials
	MaxWorkers        = 1024
)

// Error is a faulty setting or part of a model.
type Error struct {
	Field    string // where
	Found    string // what stands there
	Accepted string // what would do
}

// Error states field, finding and remedy in one line.
func (e *Error) Error() string {
	return fmt.Sprintf("ranges: %s: found %s; accepted: %s", e.Field, e.Found, e.Accepted)
}

// fault builds an Error about any value.
func fault(field string, found any, accepted string) error {
	return &Error{Field: field, Found: fmt.Sprint(found), Accepted: accepted}
}

// withDefaults fills in defaults and validates; the error is an *Error. The
// caller's slice and map are left alone.
func (s Settings) withDefaults() (Settings, error) {
	setDefault(&s.Replicates, DefaultReplicates)
	setDefault(&s.Trials, DefaultTrials)
	setDefault(&s.Workers, runtime.GOMAXPROCS(0))
	if s.Percentiles == nil {
		s.Percentiles = []float64{0.1, 0.5, 0.8, 0.9}
	}
	for _, c := range []struct {
		field       string
		found       int
		least, most int
	}{
		{"replicates", s.Replicates, MinReplicates, MaxReplicates},
		{"trials", s.Trials, MinTrials, MaxTrials},
		{"replicates × trials", s.Replicates * s.Trials, 1, MaxTotal},
		{"workers", s.Workers, 1, MaxWorkers},
	} {
		if c.found < c.least || c.found > c.most {
			return s, fault(c.field, c.found, fmt.Sprintf("%d to %d", c.least, c.most))
		}
	}
	for i, p := range s.Percentiles {
		if !(0 < p && p < 1) {
			return s, fault(fmt.Sprintf("percentiles[%d]", i), p, "a probability between 0 and 1, such as 0.8 for P80")
		}
	}
	for _, group := range sortedKeys(s.Correlation) {
		if rho := s.Correlation[group]; !(0 <= rho && rho < 1) {
			return s, fault(fmt.Sprintf("correlation[%q]", group), rho, "a rank correlation ρ with 0 ≤ ρ < 1")
		}
	}
	return s, nil
}

// setDefault replaces a zero.
func setDefault(field *int, value int) {
	if *field == 0 {
		*field = value
	}
}

// sortedKeys returns the keys of m in order.
func sortedKeys(m map[string]float64) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}

// LatentCorrelation returns the product-moment correlation r = 2 sin(πρ/6) of two
// standard normal numbers whose ranks have Spearman's correlation rho (Pearson
// 1907; Kruskal 1958, JASA 53). Monotone maps of the two keep rho. NaN unless
// −1 ≤ rho ≤ 1.
func LatentCorrelation(rho float64) float64 {
	if !(-1 <= rho && rho <= 1) {
		return math.NaN()
	}
	return 2 * math.Sin(math.Pi*rho/6)
}
