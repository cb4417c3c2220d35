package calculator

import (
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/beam"
)

// split sets the split method against the exact envelope, set of terms by set, and
// keeps the worst of each effect: the lowest ratio. A note says why there is none.
func (a *analysis) split() *BeamSplit {
	var pieces, deflected beam.SplitResult
	worst := ratios{at: map[string]int{}}
	for i, set := range append(a.strength[:len(a.strength):len(a.strength)], a.service...) {
		s, err := beam.SplitTrains(a.beam, a.cases.list, a.cases.trains, set)
		if err != nil {
			a.notes = append(a.notes, "no split method: "+err.Error())
			return nil
		}
		service := i >= len(a.strength)
		switch {
		case i == 0:
			pieces = s
		case i == len(a.strength):
			deflected = s
		case service:
			widenPieces(&deflected, &s)
		default:
			widenPieces(&pieces, &s)
		}
		for _, r := range beam.Compare(s, a.response.Envelope(set)) {
			if (r.Effect == beam.EffectDeflection) == service {
				worst.add(r)
			}
		}
	}
	out := &BeamSplit{Pieces: []BeamPiece{}, Ratios: ratiosOf(worst.list)}
	for i, p := range pieces.Pieces {
		p.DeflectionMax, p.DeflectionMin = deflected.Pieces[i].DeflectionMax, deflected.Pieces[i].DeflectionMin
		out.Pieces = append(out.Pieces, BeamPiece{Handbook: p.Handbook, From: Number(p.From), To: Number(p.To), BeamEffects: effectsOf(p.SpanEnvelope, 0)})
	}
	var reactions []beam.ReactionEnvelope
	for _, r := range pieces.Reactions {
		reactions = append(reactions, beam.ReactionEnvelope{X: r.X, FMax: r.F, FMin: r.F, MMax: r.M, MMin: r.M})
	}
	out.Reactions = a.reactions(reactions)
	for _, r := range out.Ratios {
		out.Unsafe = out.Unsafe || r.Unsafe
	}
	a.notes = append(a.notes, "the split method counts every load everywhere at once and no settlement, spring or imposed curvature; supports and footings are never sized from it")
	return out
}

func widenPieces(into, s *beam.SplitResult) {
	for i := range into.Pieces {
		p, x := &into.Pieces[i], &s.Pieces[i]
		higher(&p.MomentMax, x.MomentMax)
		lower(&p.MomentMin, x.MomentMin)
		higher(&p.ShearMax, x.ShearMax)
		lower(&p.ShearMin, x.ShearMin)
		higher(&p.DeflectionMax, x.DeflectionMax)
		lower(&p.DeflectionMin, x.DeflectionMin)
	}
	for i := range into.Reactions {
		into.Reactions[i].F = max(into.Reactions[i].F, s.Reactions[i].F)
	}
}

// ratios keeps the lowest ratio of each effect and place.
type ratios struct {
	list []beam.Ratio
	at   map[string]int
}

func (r *ratios) add(x beam.Ratio) {
	key := x.Effect + "\x00" + x.Where
	if x.Exact < 0 {
		key += "\x00-"
	}
	i, known := r.at[key]
	if !known {
		r.at[key] = len(r.list)
		r.list = append(r.list, x)
		return
	}
	if x.Ratio < r.list[i].Ratio {
		r.list[i] = x
	}
}

// ratiosOf writes ratios in kNm, kN and mm.
func ratiosOf(in []beam.Ratio) []document.Ratio {
	out := []document.Ratio{}
	for _, x := range in {
		scale, unit := 1e-3, "kN"
		switch {
		case strings.HasSuffix(x.Effect, "moment"):
			unit = "kNm"
		case x.Effect == beam.EffectDeflection:
			scale, unit = 1e3, "mm"
		}
		out = append(out, document.Ratio{Effect: x.Effect, Where: x.Where, Split: Number(x.Split * scale), Exact: Number(x.Exact * scale),
			Unit: unit, Ratio: Number(x.Ratio), Unsafe: x.Unsafe})
	}
	return out
}
