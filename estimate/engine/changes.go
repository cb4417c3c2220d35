package engine

import (
	_ "embed" // the change list
	"encoding/json"
	"fmt"
)

// Change is one entry of the engine's change list: which stage answers
// differently from a version on, and for whom.
type Change struct {
	Version  int    `json:"version"`
	Stage    string `json:"stage"`
	Old      string `json:"old"`
	New      string `json:"new"`
	Affected string `json:"affected"`
}

//go:embed changes.json
var changesJSON []byte

// Changes returns the change list, oldest first.
func Changes() ([]Change, error) {
	var out []Change
	if err := json.Unmarshal(changesJSON, &out); err != nil {
		return nil, fmt.Errorf("reading the change list: %w", err)
	}
	return out, nil
}
