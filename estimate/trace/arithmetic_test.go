package trace_test

import (
	"fmt"
	"math/big"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"spanwright/estimate/trace"
)

// The arithmetic of every sum, product, quantity and check, read from the text as a
// reviewer would and computed again by a parser of the test's own, gives the value
// shown after the rounding that the node states.
func TestArithmeticGivesTheValueShown(t *testing.T) {
	everyEstimate(t, func(t *testing.T, tracer *trace.Tracer, figures []trace.Summary) {
		done := map[string]bool{}
		count := map[trace.Kind]int{}
		for _, s := range figures {
			tree, err := tracer.Tree(s.Figure, trace.Limits{Depth: 4})
			if err != nil {
				t.Fatal(err)
			}
			walk(tree, func(n trace.Node) {
				if n.Repeated || n.Arithmetic == "" || n.Cut > 0 || n.Kind == trace.Percentile || done[n.Figure+n.Arithmetic] {
					return
				}
				done[n.Figure+n.Arithmetic] = true
				count[n.Kind]++
				if err := again(n); err != nil {
					t.Errorf("%s: %s: %v (rounding: %s)", n.Figure, n.Arithmetic, err, n.Rounding)
				}
			})
		}
		for kind, least := range map[trace.Kind]int{trace.Sum: 10, trace.Product: 30, trace.Quantity: 10, trace.Check: 5} {
			if count[kind] < least {
				t.Errorf("only %d nodes of kind %s were computed again", count[kind], kind)
			}
		}
	})
}

var roundTo = regexp.MustCompile(`to (\d+)`)

// again computes a node's arithmetic again.
func again(n trace.Node) error {
	at := strings.LastIndex(n.Arithmetic, " = ")
	left, right := n.Arithmetic[:at], n.Arithmetic[at+3:]
	listed := regexp.MustCompile(`sum of (\d+) figures`).FindStringSubmatch(left)
	if listed != nil {
		terms, _ := strconv.Atoi(listed[1])
		total := new(big.Rat)
		for _, c := range n.Children[:terms] {
			x, ok := new(big.Rat).SetString(c.Value)
			if !ok {
				return fmt.Errorf("the term %s shows %q", c.Figure, c.Value)
			}
			total.Add(total, x)
		}
		left = strings.Replace(left, listed[0], total.FloatString(30), 1)
	}
	p := &reader{words: lex(left)}
	got := p.sum()
	if p.err != nil {
		return fmt.Errorf("cannot be read: %w", p.err)
	}
	if len(p.words) > 0 {
		return fmt.Errorf("%q is left over", p.words)
	}
	want, ok := new(big.Rat).SetString(n.Value)
	shown := &reader{words: lex(right)}
	if !ok || shown.sum().Cmp(want) != 0 {
		return fmt.Errorf("shows %q and states %s", right, n.Value)
	}
	for _, m := range roundTo.FindAllStringSubmatch(n.Rounding, -1) {
		places, _ := strconv.Atoi(m[1])
		got = half(got, places)
	}
	if strings.Contains(n.Rounding, "to the kilogram") {
		got = half(got, 0)
	}
	diff := new(big.Rat).Sub(got, want)
	if diff.Sign() == 0 {
		return nil
	}
	// Of a float printed to d digits half a unit of the last is open, of each operand
	// and of the result: at most 5·10⁻ᵈ of it. Of sums of positive terms the same.
	digits := map[bool]int{true: 8, false: 12}[strings.Contains(n.Rounding, "8 significant")]
	if !strings.Contains(n.Rounding, "significant") {
		return fmt.Errorf("gives %s", got.FloatString(8))
	}
	open := big.NewRat(5*int64(p.operands+1), 1)
	for range digits {
		open.Quo(open, big.NewRat(10, 1))
	}
	if diff.Abs(diff).Cmp(open.Mul(open, new(big.Rat).Abs(want))) > 0 {
		return fmt.Errorf("gives %s", got.FloatString(14))
	}
	return nil
}

// half rounds half away from zero, by the decimal text of big.Rat.
func half(x *big.Rat, places int) *big.Rat {
	out, _ := new(big.Rat).SetString(x.FloatString(places))
	return out
}

var (
	number = regexp.MustCompile(`^−?\d+(\.\d+)?(e[+-]\d+)?$`)
	three  = regexp.MustCompile(`^\d{3}(\.\d+)?$`)
)

// lex parts a text into numbers, signs and parentheses; units are left out.
func lex(text string) []string {
	var out []string
	after := false // directly behind digits that a further group may continue
	for _, w := range strings.Fields(strings.NewReplacer("(", "( ", ")", " )").Replace(text)) {
		switch {
		case after && three.MatchString(w):
			out[len(out)-1] += w
			after = !strings.Contains(w, ".")
		case number.MatchString(w):
			out, after = append(out, w), !strings.Contains(w, ".")
		case strings.Contains("+ − × ÷ ( )", w):
			out, after = append(out, w), false
		default:
			after = false
		}
	}
	return out
}

// reader computes sums of products.
type reader struct {
	words    []string
	operands int
	err      error
}

func (r *reader) take(signs string) string {
	if len(r.words) == 0 || !strings.Contains(signs, r.words[0]) {
		return ""
	}
	w := r.words[0]
	r.words = r.words[1:]
	return w
}

func (r *reader) sum() *big.Rat {
	x := r.product()
	for {
		switch r.take("+ −") {
		case "+":
			x = new(big.Rat).Add(x, r.product())
		case "−":
			x = new(big.Rat).Sub(x, r.product())
		default:
			return x
		}
	}
}

func (r *reader) product() *big.Rat {
	x := r.factor()
	for {
		switch r.take("× ÷") {
		case "×":
			x = new(big.Rat).Mul(x, r.factor())
		case "÷":
			y := r.factor()
			if y.Sign() == 0 {
				r.err = fmt.Errorf("division by zero")
				return x
			}
			x = new(big.Rat).Quo(x, y)
		default:
			return x
		}
	}
}

func (r *reader) factor() *big.Rat {
	if r.take("(") != "" {
		x := r.sum()
		if r.take(")") == "" {
			r.err = fmt.Errorf("a parenthesis is not closed")
		}
		return x
	}
	r.operands++
	if len(r.words) > 0 {
		if x, ok := new(big.Rat).SetString(strings.Replace(r.words[0], "−", "-", 1)); ok {
			r.words = r.words[1:]
			return x
		}
	}
	r.err = fmt.Errorf("a number is missing before %q", r.words)
	return new(big.Rat)
}
