// Package schedule reads the member list of a scheme.
//
//	sheet.Book or JSON → cells → sheet Definition → checklist, for the estimate class
//	Job sheet → Settings, what is blank filled in; sheet Risks → Risks, sorted
//	header row → layout: which column means what, in which unit
//	each row → fields (text, quantities in SI) → Member, or faults by cell
//	load sets → ready loads in blank cells; marks of one size tied
//	members sorted by mark, defaults taken → register entries, omissions, echo
//
// Template writes the empty workbook from the same columns. Reading never stops at
// the first fault: all faults come back at once, each with its cell and its remedy,
// and one mistake is reported once. The same members in another order, other units
// or another encoding give the same Schedule.
package schedule
