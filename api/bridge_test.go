package api

import (
	"encoding/json"
	"fmt"
	"strings"
	"testing"

	"spanwright/estimate/bridge"
	"spanwright/estimate/money"
)

func bridging(from, to string) call {
	return call{method: "POST", path: "/v1/bridges", body: fmt.Sprintf(`{"from":"%s","to":"%s"}`, from, to)}
}

func bridged(t *testing.T, w *world, from, to string) bridge.Bridge {
	t.Helper()
	rec, _ := w.want(200, bridging(from, to))
	a, _ := build(Config{Exports: offered})
	checkAnswer(t, a, "bridge-estimates", 200, rec.Body.Bytes())
	var b bridge.Bridge
	if err := json.Unmarshal(rec.Body.Bytes(), &b); err != nil {
		t.Fatal(err)
	}
	return b
}

// One piece more is scope and nothing else; to itself nothing moves.
func TestBridge(t *testing.T) {
	w, ids := explained(t)
	for _, to := range []string{"second", "estimate"} {
		b := bridged(t, w, ids["estimate"], ids[to])
		var sum money.Decimal
		for _, s := range b.Shares {
			sum = sum.Add(s.Amount)
			if moves := to == "second" && s.Cause == bridge.Scope; (s.Amount.Sign() != 0) != moves {
				t.Errorf("to %s: %s has %s", to, s.Cause, s.Amount)
			}
		}
		if !sum.Equal(b.Change) || !b.Change.Equal(b.To.Total.Sub(b.From.Total)) {
			t.Errorf("to %s: shares of %s, a change of %s", to, sum, b.Change)
		}
	}
	rec, _ := w.want(200, bridging(ids["estimate"], ids["second"]).with("Accept", "text/plain, application/json;q=0.5"))
	for _, want := range []string{"Scope raises the cost by", "quantity 4 → 5"} {
		if !strings.Contains(rec.Body.String(), want) {
			t.Errorf("the text does not hold %q:\n%s", want, rec.Body)
		}
	}
}
