package workbook

import (
	"spanwright/estimate/document"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// spreadCells are distribution, low, likely, high, and what low and high are.
// What the distribution does not use stays blank.
func spreadCells(s *spread.Spread) []sheet.Value {
	cells := make([]sheet.Value, 5)
	if s == nil {
		return cells
	}
	cells[0] = text(string(s.Distribution))
	if s.Likely != 0 || s.Distribution != spread.Uniform && s.Distribution != spread.Lognormal {
		cells[2] = number(document.Number(s.Likely), general)
	}
	if s.Distribution == spread.Fixed {
		return cells
	}
	bounds := s.Bounds
	switch {
	case s.Distribution == spread.Lognormal:
		bounds = spread.BoundsPercentiles
	case bounds == "":
		bounds = spread.BoundsLimits
	}
	cells[1], cells[3], cells[4] = number(document.Number(s.Low), general), number(document.Number(s.High), general), text(bounds)
	return cells
}
