package arrangement

import (
	"context"
	"math"
	"reflect"
	"testing"

	"pgregory.net/rapid"

	"spanwright/structural/action"
	"spanwright/structural/section"
)

// Whatever a study asks, every number of an answer is finite, and reactions to
// permanent load balance it.
func TestAnswersAreFinite(t *testing.T) {
	base := study(t, 1)
	var few []section.Section
	for i := 0; i < len(base.Sections); i += 12 {
		few = append(few, base.Sections[i])
	}
	rapid.Check(t, func(rt *rapid.T) {
		s := base
		s.Sections = few
		number := func(name string, low, high float64) float64 { return rapid.Float64Range(low, high).Draw(rt, name) }
		s.Member.Length = number("length", 0.5, 200)
		s.Member.DeflectionLimit = number("limit", 0, 1000)
		s.Member.Actions = []action.Action{
			{Nature: action.Permanent, Value: number("g", -5e3, 5e3)},
			{Free: rapid.Bool().Draw(rt, "free"), Value: number("q", -5e3, 5e3)},
			{Kind: action.Point, Value: number("p", -1e5, 1e5), From: s.Member.Length * number("at", 0, 1)},
			{Direction: action.Horizontal, Value: number("wind", -2e3, 2e3)},
			{Kind: action.MovingTrain, Train: action.Train{Loads: []float64{number("wheel", 0, 1e5), 1e4}, Spacings: []float64{number("spacing", 0.1, 300)}}},
		}
		s.Kinds = []Kind{rapid.SampledFrom(Kinds()).Draw(rt, "kind")}
		s.Spans = []int{rapid.IntRange(2, mostSpans).Draw(rt, "spans")}
		s.Fractions = []float64{number("fraction", 0.01, 1)}
		s.Tail = s.Member.Length * number("tail", 0.05, 3)
		s.Towers.Legs = rapid.IntRange(0, mostLegs).Draw(rt, "legs")
		s.Towers.Wind = number("tower wind", 0, 1e3)
		s.Lattice.Depths = 1
		all, err := Candidates(context.Background(), s)
		if err != nil {
			rt.Fatal(err)
		}
		for _, c := range all {
			if path, ok := finite(reflect.ValueOf(c), c.Name); !ok {
				rt.Errorf("%s is not finite", path)
			}
		}
	})
}

// finite walks the exported numbers of a value and names the first that is not finite.
func finite(v reflect.Value, path string) (string, bool) {
	switch v.Kind() {
	case reflect.Float64:
		return path, math.Abs(v.Float()) <= math.MaxFloat64
	case reflect.Pointer:
		if !v.IsNil() {
			return finite(v.Elem(), path)
		}
	case reflect.Slice:
		for i := range v.Len() {
			if p, ok := finite(v.Index(i), path); !ok {
				return p, false
			}
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if f := v.Type().Field(i); f.IsExported() {
				if p, ok := finite(v.Field(i), path+"."+f.Name); !ok {
					return p, false
				}
			}
		}
	}
	return path, true
}
