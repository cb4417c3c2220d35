// Package job is the frozen input of an estimate: all that decides the result,
// and nothing else.
//
//	schedule + rate book + multipliers in force + choices → Job
//	Job → canonical bytes → SHA-256, stored beside the document
//	Job → engine.Run → document; the same job gives the same document
package job

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"sort"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// Source says where the schedule came from.
type Source struct {
	Name   string `json:"name"`
	SHA256 string `json:"sha256" doc:"of the bytes as posted, hexadecimal"`
}

// Sampling are the choices of the simulation.
type Sampling struct {
	Seed       uint64 `json:"seed"`
	Replicates int    `json:"replicates"`
	Trials     int    `json:"trials" doc:"per replicate"`
}

// Data names the embedded data that the result depends on, by SHA-256.
type Data struct {
	Catalogue string `json:"catalogue"`
	Grades    string `json:"grades"`
}

// Job is everything that decides an estimate.
type Job struct {
	EngineVersion int                   `json:"engine_version"`
	Build         string                `json:"build,omitempty" doc:"of the program that froze the job; no part of the result"`
	Source        Source                `json:"source"`
	Settings      schedule.Settings     `json:"settings"`
	Members       []schedule.Member     `json:"members"`
	Defaults      []assumption.Entry    `json:"defaults"`
	Omissions     []string              `json:"omissions"`
	Risks         []schedule.Risk       `json:"risks,omitempty"`
	Book          ratebook.Book         `json:"rate_book"`
	BookSHA256    string                `json:"rate_book_sha256"`
	Multipliers   []ratebook.Multiplier `json:"multipliers" doc:"in force: those of the book, then the edited ones"`
	Sampling      Sampling              `json:"sampling"`
	Data          Data                  `json:"data"`
}

// DefaultSampling is 32 replicates of 4096 trials.
func DefaultSampling() Sampling { return Sampling{Seed: 1, Replicates: 32, Trials: 4096} }

// Limits of the sampling that a job may ask for.
const (
	MinReplicates = 32
	MaxTrials     = 10_000_000 // replicates × trials
)

// Freeze makes a job. Multipliers edited in the service are handed in after
// those of the book, and the job sorts them so that their order of arrival does
// not matter.
func Freeze(s schedule.Schedule, src Source, book ratebook.Book, edited []ratebook.Multiplier, sampling Sampling) (Job, error) {
	if _, err := book.ExchangeTo(s.Settings.Currency); err != nil {
		return Job{}, fmt.Errorf("the job is in %s and the rate book %q in %s: %w", s.Settings.Currency, book.Name, book.Currency, err)
	}
	if err := sampling.Validate(); err != nil {
		return Job{}, err
	}
	_, sum, err := book.Canonical()
	if err != nil {
		return Job{}, err
	}
	ms := slices.Concat(book.Multipliers, siteMultipliers(book, s.Settings.SiteConditions), edited)
	for _, m := range edited {
		if err := m.Validate(); err != nil {
			return Job{}, err
		}
		if _, ok := book.Correlation[m.Group]; m.Group != "" && !ok {
			return Job{}, fmt.Errorf("multiplier %q is of the correlation group %q, which the rate book %q does not have", m.Name, m.Group, book.Name)
		}
	}
	sortMultipliers(ms)
	settings, defaults := s.Settings, s.Defaults
	if settings.BaseDate == "" {
		settings.BaseDate = book.BaseDate
		defaults = append(defaults[:len(defaults):len(defaults)], assumption.Entry{
			ID: "default/base date", Kind: assumption.Default, Statement: "The base date is that of the rate book", Value: book.BaseDate,
			Source: "rate book " + book.Name, Owner: "Spanwright", Confidence: assumption.Medium, Feeds: []string{},
		})
	}
	if s := settings; s.SpendDate != "" && s.SpendDate < s.BaseDate {
		return Job{}, fmt.Errorf("spend date: found %s, before the base date %s; accepted: a date not before it", s.SpendDate, s.BaseDate)
	}
	defaults = takeSystems(&settings, book, defaults)
	return Job{
		Source: src, Settings: settings, Members: s.Members, Defaults: defaults, Omissions: s.Omissions, Risks: s.Risks,
		Book: book, BookSHA256: sum, Multipliers: ms, Sampling: sampling,
	}, nil
}

// takeSystems fills in the coating and the execution class that a job leaves blank,
// where the book prices blank ones as a system of its own, and says so.
func takeSystems(s *schedule.Settings, book ratebook.Book, defaults []assumption.Entry) []assumption.Entry {
	for _, d := range []struct {
		into     *string
		what     string
		category string
		of       func(ratebook.Selection) []string
	}{
		{&s.Coating, "coating", ratebook.Coating, func(x ratebook.Selection) []string { return x.Coatings }},
		{&s.ExecutionClass, "execution class", ratebook.Inspection, func(x ratebook.Selection) []string { return x.Executions }},
	} {
		if *d.into != "" {
			continue
		}
		for _, r := range book.Rates {
			list := d.of(r.Select)
			i := slices.IndexFunc(list, func(n string) bool { return n != "" })
			if r.Category != d.category || i < 0 || !slices.Contains(list, "") {
				continue
			}
			*d.into = list[i]
			defaults = append(defaults[:len(defaults):len(defaults)], assumption.Entry{
				ID: "default/" + d.what, Kind: assumption.Default, Statement: "The " + d.what + " is that which the rate book takes where none is named", Value: list[i],
				Source: "rate book " + book.Name, Owner: "Spanwright", Confidence: assumption.Low, Feeds: []string{},
			})
			break
		}
	}
	return defaults
}

// siteMultipliers are those that the site conditions put in force.
func siteMultipliers(book ratebook.Book, conditions []string) []ratebook.Multiplier {
	var out []ratebook.Multiplier
	for _, m := range book.Site {
		if slices.Contains(conditions, m.Condition) {
			out = append(out, m.Multiplier)
		}
	}
	return out
}

func sortMultipliers(ms []ratebook.Multiplier) {
	key := func(m ratebook.Multiplier) string { return m.Name + "\x00" + string(m.Scope) + "\x00" + m.Subject }
	sort.SliceStable(ms, func(i, j int) bool { return key(ms[i]) < key(ms[j]) })
}

// Validate refuses a sampling that is too small for its standard errors or too
// large to run.
func (s Sampling) Validate() error {
	switch {
	case s.Replicates < MinReplicates:
		return fmt.Errorf("replicates: found %d; accepted: %d or more, so that standard errors mean something", s.Replicates, MinReplicates)
	case s.Trials < 64:
		return fmt.Errorf("trials: found %d per replicate; accepted: 64 or more", s.Trials)
	case s.Replicates > MaxTrials/s.Trials:
		return fmt.Errorf("sampling: found %d × %d trials; accepted: %d in all", s.Replicates, s.Trials, MaxTrials)
	}
	return nil
}

// Money returns the job's currency.
func (j Job) Money() (money.Currency, error) { return money.FindCurrency(j.Settings.Currency) }

// Canonical returns the job's canonical bytes and their SHA-256 in hex.
func (j Job) Canonical() ([]byte, string, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(j); err != nil {
		return nil, "", fmt.Errorf("writing the job: %w", err)
	}
	sum := sha256.Sum256(b.Bytes())
	return b.Bytes(), hex.EncodeToString(sum[:]), nil
}

// Parse reads a job from its canonical bytes.
func Parse(data []byte) (Job, error) {
	var j Job
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(&j); err != nil {
		return Job{}, fmt.Errorf("reading a job: %w", err)
	}
	if _, err := d.Token(); !errors.Is(err, io.EOF) {
		return Job{}, errors.New("reading a job: something follows its end")
	}
	return j, nil
}
