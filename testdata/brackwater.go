// Package testdata embeds the demo job as its users would post it: the
// Brackwater loading quay, an invented job with invented loads.
//
//	brackwater.xlsx            scheme with an inner support of the boom
//	brackwater-end-tower.xlsx  scheme with a tower at the end of the boom
package testdata

import _ "embed" // the workbooks

// InnerSupport is the workbook of the first scheme.
//
//go:embed brackwater.xlsx
var InnerSupport []byte

// EndTower is the workbook of the second scheme.
//
//go:embed brackwater-end-tower.xlsx
var EndTower []byte
