package ranges

import (
	"fmt"
	"math/big"
	"slices"
	"strings"
)

// riskRanges summarises the discrete risks, without their shares.
func (sim *simulation) riskRanges() []RiskRange {
	var out []RiskRange
	n := float64(len(sim.totals))
	for i, r := range sim.p.risks {
		next := RiskRange{ID: r.id}
		for k := range sim.occurred {
			next.Mean += sim.sums[k][len(sim.p.categories)+i]
			next.Frequency += sim.occurred[k][i]
		}
		next.Mean /= n
		next.Frequency /= n
		out = append(out, next)
	}
	return out
}

// share sets the covariance shares of categories and risks. The total is their
// sum, so its variance is the sum of their covariances with it: contingency
// allocated by the shares leaves nothing over.
func (sim *simulation) share(res *Result) {
	var off float64 // mean of the total − base
	for _, m := range sim.means {
		off += m - sim.base
	}
	off /= float64(len(sim.means))
	n := float64(len(sim.totals))
	covariance := func(part int, mean, base float64) float64 {
		var cross float64
		for r := range sim.cross {
			cross += sim.cross[r][part]
		}
		return cross/n - float64((mean-base)*off)
	}
	var variance float64
	for i := range res.Categories {
		c := &res.Categories[i]
		c.Share = covariance(i, c.Mean, c.Base)
		variance += c.Share
	}
	for i := range res.Risks {
		r := &res.Risks[i]
		r.Share = covariance(len(res.Categories)+i, r.Mean, 0)
		variance += r.Share
	}
	noise := 1e-12 * (res.Base*res.Base + res.Mean*res.Mean) * 1e-12
	for i := range res.Categories {
		res.Categories[i].Share = ratio(res.Categories[i].Share, variance, noise)
	}
	for i := range res.Risks {
		res.Risks[i].Share = ratio(res.Risks[i].Share, variance, noise)
	}
}

// ratio returns part/whole, 0 where the whole is no more than noise.
func ratio(part, whole, noise float64) float64 {
	if !(whole > noise) {
		return 0
	}
	return part / whole
}

// Share is a named part of one whole.
type Share struct {
	Name  string
	Share float64 // any sign; of all, the sum is above 0
}

// Allocate divides an amount in minor units of its currency in proportion to
// shares, so that the parts add up to it exactly: each part is rounded down and
// the rest goes, one unit each, to the largest remainders (Hamilton's method),
// among equal ones by name. Part i belongs to share i. Negative amounts and
// negative shares are fine; an amount of 0 needs no shares.
//
// Errors: *Error for a name that is twice, a share that is not finite, or shares
// whose sum is not above 0 with an amount that is not 0.
func Allocate(amount int64, shares []Share) ([]int64, error) {
	parts := make([]int64, len(shares))
	sum, err := sumShares(shares)
	if err != nil || amount == 0 {
		return parts, err
	}
	if sum.Sign() <= 0 {
		return nil, fault("shares", "a sum of "+sum.FloatString(6), "shares whose sum is above 0")
	}
	remainders, order := make([]*big.Rat, len(shares)), make([]int, len(shares))
	left := big.NewInt(amount)
	for i, s := range shares {
		exact := new(big.Rat).SetFloat64(s.Share)
		exact.Mul(exact, new(big.Rat).SetInt64(amount)).Quo(exact, sum)
		floor := new(big.Int).Div(exact.Num(), exact.Denom()) // Euclidean: rounds down, as Denom is positive
		if !floor.IsInt64() {
			return nil, fault(fmt.Sprintf("shares %q", s.Name), s.Share, "shares whose parts stay within 64 bits")
		}
		parts[i], order[i] = floor.Int64(), i
		left.Sub(left, floor)
		remainders[i] = exact.Sub(exact, new(big.Rat).SetInt(floor))
	}
	slices.SortFunc(order, func(a, b int) int {
		if c := remainders[b].Cmp(remainders[a]); c != 0 {
			return c
		}
		return strings.Compare(shares[a].Name, shares[b].Name)
	})
	for _, i := range order[:left.Int64()] {
		parts[i]++
	}
	return parts, nil
}

// sumShares returns the exact sum of shares, each tested.
func sumShares(shares []Share) (*big.Rat, error) {
	sum, seen := new(big.Rat), map[string]bool{}
	for _, s := range shares {
		if !isFinite(s.Share) {
			return nil, fault(fmt.Sprintf("shares %q", s.Name), s.Share, "a finite number")
		}
		if seen[s.Name] {
			return nil, fault(fmt.Sprintf("shares %q", s.Name), "the name twice", "names that differ")
		}
		seen[s.Name] = true
		sum.Add(sum, new(big.Rat).SetFloat64(s.Share))
	}
	return sum, nil
}
