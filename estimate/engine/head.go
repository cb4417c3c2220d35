package engine

import (
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

func (r *run) head() (document.Job, error) {
	j := r.job
	result := j
	result.Source, result.Build = job.Source{}, ""
	_, sum, err := result.Canonical()
	if err != nil {
		return document.Job{}, err
	}
	set := j.Settings
	return document.Job{
		Project: set.Project, Scheme: set.Scheme, Source: j.Source.Name, SourceSHA256: j.Source.SHA256, JobSHA256: sum,
		Coating: set.Coating, ExecutionClass: set.ExecutionClass, StockLengths: lengths(set.StockLengths), Purchase: set.Purchase,
		DesignBasis: set.DesignBasis, Factor: document.Number(set.Factor), EstimateClass: set.EstimateClass,
		Currency: set.Currency, BaseDate: set.BaseDate, SpendDate: set.SpendDate, SiteConditions: set.SiteConditions, Money: r.moneyWords(),
		RateBook: j.Book.Name, RateBookKind: j.Book.Kind, RateBookNote: j.Book.Note, RateBookSHA256: j.BookSHA256, ReferencePrice: r.referencePrice(),
		CatalogueSHA256: j.Data.Catalogue, GradesSHA256: j.Data.Grades,
		Seed: j.Sampling.Seed, Replicates: j.Sampling.Replicates, Trials: j.Sampling.Trials,
	}, nil
}

// moneyWords say in which money the totals are, and that they are net of taxes.
func (r *run) moneyWords() string {
	s := r.job.Settings
	if s.Money == schedule.MoneyOutturn && !r.escalated() {
		return "base-date money of " + s.BaseDate + ", net of taxes; outturn money was asked for, and the rate book has no index"
	}
	if s.Money == schedule.MoneyOutturn {
		return "outturn money, spent about " + s.SpendDate + ", escalated from " + s.BaseDate + ", net of taxes"
	}
	return "base-date money of " + s.BaseDate + ", net of taxes"
}

// escalated tells whether any price was carried to the spend date.
func (r *run) escalated() bool {
	return slices.ContainsFunc(r.priced.Lines, func(l pricing.Line) bool {
		return slices.ContainsFunc(l.Parts, func(p pricing.Part) bool { return p.Name == pricing.EscalationToSpend })
	})
}

func (r *run) referencePrice() string {
	if r.job.Book.Kind != ratebook.KindRatio {
		return ""
	}
	return r.job.Book.ReferencePrice.String()
}

// lengths writes stock lengths in metres.
func lengths(list []float64) string {
	if len(list) == 0 {
		return ""
	}
	words := make([]string, len(list))
	for i, l := range list {
		words[i] = strconv.FormatFloat(l, 'g', -1, 64)
	}
	return strings.Join(words, "; ") + " m"
}
