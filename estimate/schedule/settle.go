package schedule

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// Ids of the register entries of settings left blank.
const (
	basisEntry      = "default/design basis"
	factorEntry     = "default/factor"
	classEntry      = "default/estimate class"
	confidenceEntry = "default/confidence"
	currencyEntry   = "default/currency"
)

// jobFault reports a value of the job.
func (r *reader) jobFault(id jobID, wrong *complaint) {
	e := r.job.entries[id]
	r.report(e.address, e.header, wrong.found, wrong.problem, wrong.remedy)
}

// jobText reads a value as text; blank and faulty ones are empty.
func (r *reader) jobText(id jobID) string {
	c := r.job.entries[id].cell
	if c.Kind == lostKind {
		return ""
	}
	t, wrong := readText(c, longestText, "text such as "+jobKeys[id].Example)
	if wrong != nil {
		r.jobFault(id, wrong)
	}
	if t.state == blank {
		r.job.given[id] = false
	}
	return t.value
}

// settle reads every value and fills in the defaults.
func (r *reader) settle() {
	s := &r.job.Settings
	s.Project, s.Scheme = r.jobText(jobProject), r.jobText(jobScheme)
	s.Coating, s.ExecutionClass = r.jobText(jobCoating), r.jobExecution()
	r.readPurchase()
	s.DesignBasis = r.designBasis()
	s.Factor = r.jobFactor()
	s.Grade = r.jobGrade()
	s.DeflectionLimit = r.jobLimit()
	s.FrequencyFloor = r.jobFrequency()
	s.Restraint = r.jobRestraint()
	s.ConnectionClass = r.jobConnection()
	s.Definition = r.definition
	s.EstimateClass = r.estimateClass()
	s.Currency = r.currency()
	s.BaseDate = r.jobDate(jobBaseDate)
	r.readSpending()
	s.Confidence = r.confidence()
	s.WindSpeed, s.Terrain = r.windSpeed(), r.terrain()
	s.GroundSnow = r.siteQuantity(jobGroundSnow, unit.AreaLoad, snows)
	s.SiteConditions, s.HaulDistance = r.siteConditions(), r.haulDistance()
}

// setting enters the default of a setting left blank.
func (r *reader) setting(id, value, statement string, c assumption.Confidence, feeds ...string) {
	r.defaults.enter(assumption.Entry{ID: id, Statement: statement, Value: value, Confidence: c, Feeds: feeds})
}

// jobQuantity reads a plain number within bounds.
func (r *reader) jobQuantity(id jobID, d unit.Dimension, s span) number {
	e := r.job.entries[id]
	if e.cell.Kind == lostKind {
		return number{state: bad}
	}
	n, wrong := readQuantity(e.cell, e.comma, d, e.unit, s.words)
	if wrong == nil && n.state == given && !s.holds(n.value) {
		wrong = &complaint{shorten(e.cell.Text), "is out of bounds", s.words}
		n.state = bad
	}
	if wrong != nil {
		r.jobFault(id, wrong)
	}
	if n.state == blank {
		r.job.given[id] = false
	}
	return n
}

func (r *reader) jobFactor() float64 {
	n := r.jobQuantity(jobFactor, unit.Number, yieldFactor)
	switch basis := r.job.DesignBasis; {
	case r.job.entries[jobStandard].cell.Kind == lostKind: // the factor may belong to what was meant
	case basis != defaultBasis && n.state == given:
		r.jobFault(jobFactor, &complaint{shorten(r.job.entries[jobFactor].cell.Text), "is a factor of design basis allowable, and Standard says " + basis, "leave it blank: " + basis + " has its own factors"})
		return 0
	case basis != defaultBasis:
		return 0
	}
	if n.state == blank {
		r.setting(factorEntry, fixedText(defaultFactor), "The factor on yield is 3, a comfortable first pass where loads are rough.", assumption.Low)
		return defaultFactor
	}
	return n.value
}

func (r *reader) jobGrade() string {
	found := r.jobText(jobGrade)
	if found == "" {
		if r.job.given[jobGrade] {
			return ""
		}
		return defaultGrade
	}
	g := findGrade(found)
	if g.wrong != nil {
		r.jobFault(jobGrade, g.wrong)
	}
	return g.name
}

func (r *reader) jobLimit() float64 {
	e := r.job.entries[jobLimit]
	if e.cell.Kind == lostKind {
		return defaultLimit
	}
	n, wrong := readLimit(e.cell, e.comma)
	if wrong != nil {
		r.jobFault(jobLimit, wrong)
	}
	if n.state == blank {
		r.job.given[jobLimit] = false
		return defaultLimit
	}
	return n.value
}

func (r *reader) jobRestraint() float64 {
	if isFullSpan(r.job.entries[jobRestraint].cell) {
		return 0
	}
	return r.jobQuantity(jobRestraint, unit.Length, lengths).value
}

func (r *reader) jobFrequency() float64 {
	if isNone(r.job.entries[jobFrequency].cell) {
		return 0
	}
	return r.jobQuantity(jobFrequency, unit.Frequency, frequencies).value
}

func (r *reader) jobConnection() string {
	found := r.jobText(jobConnection)
	if found == "" {
		return ""
	}
	class, ok := r.findClass(found)
	if !ok {
		r.jobFault(jobConnection, &complaint{shorten(found), "is no connection class", r.classRemedy(found)})
	}
	return class
}

// findClass finds a connection class whatever its letter case and spaces.
func (r *reader) findClass(found string) (string, bool) {
	i := slices.IndexFunc(r.classes, func(c string) bool { return fold(c) == fold(found) })
	if i < 0 {
		return "", false
	}
	return r.classes[i], true
}

func (r *reader) classRemedy(found string) string {
	return didYouMean(near(found, r.classes), "one of "+strings.Join(r.classes, ", "))
}

func (r *reader) estimateClass() int {
	e := r.job.entries[jobClass]
	if e.cell.Kind == lostKind {
		return defaultClass
	}
	if e.cell.Kind == sheet.Text {
		e.cell.Text = strings.TrimPrefix(strings.ToLower(strings.TrimSpace(e.cell.Text)), "class")
	}
	n, s, wrong := readCount(e.cell, e.comma, 5, "an estimate class from 5 to 1")
	if wrong != nil {
		r.jobFault(jobClass, wrong)
	}
	if s == blank {
		r.job.given[jobClass] = false
		return r.classByDefinition()
	}
	return n
}

// classByDefinition is the class of the checklist, else the least defined one.
func (r *reader) classByDefinition() int {
	if len(r.definition) == 0 {
		r.setting(classEntry, strconv.Itoa(defaultClass), "The estimate is of class 5, the least defined.", assumption.Medium)
		return defaultClass
	}
	class, _, why := ClassFromDefinition(r.definition)
	r.setting(classEntry, strconv.Itoa(class), fmt.Sprintf("The estimate is of class %d by its definition. %s", class, why), assumption.Medium)
	return class
}

func (r *reader) currency() string {
	found := r.jobText(jobCurrency)
	if found == "" {
		if !r.job.given[jobCurrency] {
			r.setting(currencyEntry, defaultCurrency, "The estimate is in EUR.", assumption.Medium)
		}
		return defaultCurrency
	}
	c, err := money.FindCurrency(strings.ToUpper(found))
	if err != nil {
		remedy := "an ISO 4217 code such as EUR"
		if _, accepted, ok := strings.Cut(err.Error(), "accepted: "); ok {
			remedy = accepted
		}
		r.jobFault(jobCurrency, &complaint{shorten(found), "is no currency", remedy})
	}
	return c.Code
}

// jobDate reads a date cell or yyyy-mm-dd; blank stays empty.
func (r *reader) jobDate(id jobID) string {
	c := r.job.entries[id].cell
	if c.Kind == sheet.Date {
		day, _, _ := strings.Cut(c.Text, "T")
		c = sheet.Cell{Kind: sheet.Text, Text: day}
	}
	if c.Kind == lostKind {
		return ""
	}
	t, wrong := readText(c, longestText, "a date such as "+jobKeys[id].Example)
	if t.state == blank {
		r.job.given[id] = false
		return ""
	}
	if wrong == nil && !isDay(t.value) {
		wrong = &complaint{shorten(t.value), "is no date", "yyyy-mm-dd, such as " + jobKeys[id].Example + ", or a date cell"}
	}
	if wrong != nil {
		r.jobFault(id, wrong)
	}
	return t.value
}

var confidences = span{0.01, 0.99, true, "0.01 to 0.99, such as 0.8, 80 % or P80"}

// confidence reads 0.8, 80 % and P80.
func (r *reader) confidence() float64 {
	e := &r.job.entries[jobConfidence]
	c := e.cell
	dimension := unit.Number
	switch word := strings.ToLower(strings.TrimSpace(c.Text)); {
	case c.Kind == sheet.Text && strings.HasPrefix(word, "p"):
		e.cell.Text, dimension = strings.TrimSpace(word[1:])+" %", unit.Percent
	case strings.HasSuffix(word, "%"), !e.unit.IsZero():
		dimension = unit.Percent
	}
	n := r.jobQuantity(jobConfidence, dimension, confidences)
	if n.state == blank {
		r.setting(confidenceEntry, fixedText(defaultConfidence), "The contingency reaches the cost that is not exceeded with probability 0.8.", assumption.Medium, "contingency")
		return defaultConfidence
	}
	return n.value
}
