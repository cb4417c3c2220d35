package auth

import (
	"bytes"
	"strings"
	"testing"
)

func TestTokensRoundTripAndDiffer(t *testing.T) {
	a, b := NewToken(), NewToken()
	if a.Text == b.Text || a.PublicID == b.PublicID {
		t.Fatal("two tokens are alike")
	}
	if !strings.HasPrefix(a.Text, Prefix) {
		t.Errorf("%q has no prefix for secret scanners", a.Text)
	}
	id, sum, err := ParseToken(a.Text)
	if err != nil || id != a.PublicID || !Matches(sum, a.SHA256) {
		t.Errorf("ParseToken: %q, %x, %v", id, sum, err)
	}
	if Matches(sum, b.SHA256) || Matches(nil, nil) {
		t.Error("Matches says yes to another secret or to none")
	}
	if strings.Contains(a.Text, string(a.SHA256)) || bytes.Equal(a.SHA256, []byte(a.Text)) {
		t.Error("what is stored is in what is sent")
	}
}

func TestParseTokenRefuses(t *testing.T) {
	good := NewToken().Text
	for _, text := range []string{"", "swt_", good[1:], good[:len(good)-1], good + "A", strings.Replace(good, "_", "-", 2), "Bearer " + good, good + "\n"} {
		if _, _, err := ParseToken(text); err == nil {
			t.Errorf("%q was accepted", text)
		}
	}
	s := NewSession()
	if sum, err := ParseSession(s.Text); err != nil || !Matches(sum, s.SHA256) {
		t.Errorf("ParseSession: %v", err)
	}
	if _, err := ParseSession(s.Text[2:]); err == nil {
		t.Error("half a session was accepted")
	}
}

// Each role may do all that the ones before it may, and nothing unknown.
func TestPolicy(t *testing.T) {
	for o, need := range least {
		allowed := false
		for _, r := range Roles() {
			allowed = allowed || r == need
			if got := Allow(r, o); got != allowed {
				t.Errorf("%s, %s: got %v, want %v", r, o, got, allowed)
			}
		}
		if Allow("owner", o) || Allow("", o) {
			t.Errorf("%s: an unknown role is allowed", o)
		}
	}
	if Allow(Administrator, "launch") {
		t.Error("an unknown operation is allowed")
	}
	for o, want := range map[Operation]Role{ReadProjects: Viewer, MakeEstimates: Estimator, ReadAudit: Manager, ManageTokens: Administrator} {
		if LeastRole(o) != want {
			t.Errorf("%s: least role %s, want %s", o, LeastRole(o), want)
		}
	}
	if _, err := ParseRole("boss"); err == nil || !strings.Contains(err.Error(), "estimator") {
		t.Errorf("ParseRole: %v", err)
	}
}
