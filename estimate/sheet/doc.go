// Package sheet turns bytes into cells and cells into bytes. It knows CSV and
// XLSX files, and nothing of what the cells mean.
//
//	posted bytes → Open (sniffs, limits) → Book → Rows → cells with address and kind
//	faults found by readers of cells → Faults, sorted by sheet, row and column
//	values → Builder → XLSX bytes, the same bytes for the same values
//	values → WriteCSV → RFC 4180 text
//
// A workbook is read as a stream by a small XML scanner of our own: the cells'
// types matter (a date is no number, a formula may lack its value) and the
// memory must not grow with the rows. The workbook library only writes.
package sheet
