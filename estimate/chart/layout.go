package chart

import (
	"math"
	"slices"
	"strings"
)

// textWidth estimates the width of s. It errs on the wide side of the usual sans
// serif fonts, because labels that stand apart are better than labels that touch.
func textWidth(s string, size float64) float64 {
	w := 0.0
	for _, r := range s {
		switch {
		case strings.ContainsRune("ijl.,:;|'!", r):
			w += 0.32
		case r == ' ' || r == '\u00a0' || r == '(' || r == ')' || r == 'f' || r == 't' || r == 'r':
			w += 0.38
		case 'A' <= r && r <= 'Z', r == 'm', r == 'w', r == '%', r == '…':
			w += 0.76
		case r >= 0x1100:
			w += 1.05
		default:
			w += 0.61
		}
	}
	return w * size
}

// shorten cuts s with an ellipsis where it is wider than limit.
func shorten(s string, size, limit float64) string {
	if textWidth(s, size) <= limit {
		return s
	}
	runes := []rune(s)
	for len(runes) > 1 && textWidth(string(runes)+"…", size) > limit {
		runes = runes[:len(runes)-1]
	}
	return strings.TrimRight(string(runes), " ") + "…"
}

// ruler maps values to coordinates along one axis.
type ruler struct {
	low, high float64 // values
	from, to  float64 // coordinates
}

// newRuler spans low to high. An empty span is widened around its value, so that
// a total that is certain still has an axis.
func newRuler(low, high, from, to float64) ruler {
	if size := max(math.Abs(low), math.Abs(high)); !(high-low > 1e-6*size) {
		half := 0.1 * size
		if half == 0 {
			half = 1
		}
		low, high = low-half, high+half
	}
	return ruler{low, high, from, to}
}

// at returns the coordinate of x, kept on the axis.
func (r ruler) at(x float64) float64 {
	t := (x - r.low) / (r.high - r.low)
	return r.from + min(max(t, 0), 1)*(r.to-r.from)
}

// ticks returns round values on the axis and the number of decimals that tells
// them apart at a scale; as many as fit when label writes them.
func (r ruler) ticks(s scale, most int, label func(float64, int) string) ([]float64, int) {
	for n := most; n > 1; n-- {
		step := niceStep((r.high - r.low) / float64(n))
		places := max(0, -int(math.Floor(math.Log10(step/s.factor)+1e-9)))
		var values []float64
		widest := 0.0
		for k := math.Ceil(r.low/step - 1e-9); k*step <= r.high+1e-9*step && len(values) <= 2*most; k++ {
			values = append(values, k*step)
			widest = max(widest, textWidth(label(k*step, places), sizeText))
		}
		if spacing := step / (r.high - r.low) * math.Abs(r.to-r.from); widest+14 <= spacing {
			return values, places
		}
	}
	return nil, 0
}

// niceStep returns the smallest of 1, 2, 5 times a power of ten at or above x.
func niceStep(x float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(x)))
	for _, f := range []float64{1, 2, 5} {
		if x <= f*power*(1+1e-9) {
			return f * power
		}
	}
	return 10 * power
}

// flag is a label beside the top of a vertical line.
type flag struct {
	x    float64
	text string
	ink  Ink
	row  int  // 0 is the lowest
	left bool // the text stands to the left of the line
}

// span returns the horizontal extent of the flag's text.
func (f flag) span() (float64, float64) {
	w := textWidth(f.text, sizeText) + 6
	if f.left {
		return f.x - w, f.x
	}
	return f.x, f.x + w
}

// placeFlags gives each flag a side and a row such that no text meets another
// text or another flag's line, tries every way (they are few), and takes the one
// that keeps the texts between low and high in the fewest and lowest rows. It
// returns the number of rows.
func placeFlags(flags []flag, low, high float64) int {
	n := len(flags)
	ways := 1
	for range n {
		ways *= 2 * n
	}
	best, bestCost, rows := slices.Clone(flags), math.Inf(1), 0
	try := slices.Clone(flags)
	for way := range ways {
		cost, top := 0.0, 0
		for i, w := 0, way; i < n; i, w = i+1, w/(2*n) {
			try[i].left, try[i].row = w%2 == 1, w/2%n
			a, b := try[i].span()
			cost += 1000 * (max(0, low-a) + max(0, b-high))
			cost += float64(try[i].row)
			top = max(top, try[i].row+1)
		}
		cost += float64(10*top) + 1e5*float64(clashes(try))
		if cost < bestCost {
			copy(best, try)
			bestCost, rows = cost, top
		}
	}
	copy(flags, best)
	return rows
}

// clashes counts the pairs of flags of which one's text meets the other's text
// or line.
func clashes(flags []flag) int {
	count := 0
	for i, f := range flags {
		a, b := f.span()
		for j, g := range flags {
			c, d := g.span()
			sameRow := i < j && f.row == g.row && a < d && c < b
			crossed := i != j && g.row >= f.row && a < g.x && g.x < b
			if sameRow || crossed {
				count++
			}
		}
	}
	return count
}

// spreadOut moves the sorted positions (downwards) apart so that neighbours keep
// at least gap, without leaving low to high while there is room.
func spreadOut(ys []float64, gap, low, high float64) {
	for i := 1; i < len(ys); i++ {
		ys[i] = max(ys[i], ys[i-1]+gap)
	}
	limit := high
	for i := len(ys) - 1; i >= 0; i-- {
		ys[i] = min(ys[i], limit)
		limit = ys[i] - gap
	}
	for i := range ys {
		ys[i] = max(ys[i], low+float64(i)*gap)
	}
}
