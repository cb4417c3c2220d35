package calculator

import (
	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// LoadFactors are the factors with which loads act together.
type LoadFactors struct {
	Permanent    float64 `json:"permanent" doc:"on permanent loads and own weight"`
	Favourable   float64 `json:"permanent_favourable,omitempty" doc:"on the same where they relieve; that of permanent when absent"`
	Variable     float64 `json:"variable" doc:"on variable loads"`
	Accompanying float64 `json:"accompanying,omitempty" doc:"ψ0 on every variable load but the leading one, each leading in turn; 1 when absent"`
}

// Combination names factors and where they come from.
type Combination struct {
	Name   string `json:"name"`
	Clause string `json:"clause" doc:"standard and clause that the factors come from"`
	LoadFactors
}

// maxFactor bounds a factor on loads.
const maxFactor = 100

func (l *LoadFactors) combination(at, name string, f *Faults) action.Combination {
	f.within(at+"/permanent", l.Permanent, 0, maxFactor, "")
	f.within(at+"/variable", l.Variable, 0, maxFactor, "")
	if l.Favourable != 0 {
		f.within(at+"/permanent_favourable", l.Favourable, 0, l.Permanent, "")
	}
	if l.Accompanying != 0 {
		f.within(at+"/accompanying", l.Accompanying, 0, 1, "")
	}
	if l.Permanent == 0 && l.Variable == 0 {
		f.add(at, "two factors of 0", "nothing would act", "at least one factor above 0")
	}
	return action.Combination{Name: name, Clause: "factors of the request", Permanent: l.Permanent, PermanentFavourable: l.Favourable,
		Variable: l.Variable, Accompanying: l.Accompanying}
}

func combinationOf(c action.Combination) Combination {
	return Combination{c.Name, c.Clause, LoadFactors{c.Permanent, c.PermanentFavourable, c.Variable, c.Accompanying}}
}

// cases are the loads of a member sorted for the analysis.
type cases struct {
	list      []beam.Case
	permanent bool // the first case is that of permanent loads and own weight
	variable  []variable
	trains    []beam.Train
}

// variable is one variable load: the cases that it takes, or its train.
type variable struct {
	load  int // in the request
	cases []int
	train int // −1 for none
}

// terms returns every set of terms that a combination stands for: both factors of
// permanent loads, and each variable load leading in turn. trainCase gives the case
// of a train, settled that of the settlements or −1.
func (c *cases) terms(k action.Combination, settled int, trainCase func(int) int) [][]beam.Term {
	permanent := []float64{k.Permanent}
	if c.permanent && k.Favourable() != k.Permanent {
		permanent = append(permanent, k.Favourable())
	}
	leaders := []int{-1}
	if k.Beside() != k.Variable && len(c.variable) > 1 {
		leaders = leaders[:0]
		for i := range c.variable {
			leaders = append(leaders, i)
		}
	}
	var sets [][]beam.Term
	for _, p := range permanent {
		for _, leader := range leaders {
			var set []beam.Term
			if c.permanent {
				set = append(set, beam.Term{Case: 0, Factor: p})
			}
			for i, v := range c.variable {
				factor := k.Variable
				if leader >= 0 && i != leader {
					factor = k.Beside()
				}
				set = v.append(set, factor, trainCase)
			}
			if settled >= 0 {
				set = append(set, beam.Term{Case: settled, Factor: 1, Free: true})
			}
			sets = append(sets, set)
		}
	}
	return sets
}

func (v *variable) append(set []beam.Term, factor float64, trainCase func(int) int) []beam.Term {
	for _, n := range v.cases {
		set = append(set, beam.Term{Case: n, Factor: factor, Free: true})
	}
	if v.train >= 0 {
		set = append(set, beam.Term{Case: trainCase(v.train), Factor: factor, Free: true})
	}
	return set
}
