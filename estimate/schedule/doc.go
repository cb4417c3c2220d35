// Package schedule reads the member list of a scheme.
//
//	sheet.Book or JSON → cells → Job sheet → Settings, what is blank filled in
//	header row → layout: which column means what, in which unit
//	each row → fields (text, quantities in SI) → Member, or faults by cell
//	members sorted by mark, defaults taken → register entries, omissions, echo
//
// Reading never stops at the first fault: all faults come back at once, each with
// its cell and its remedy, and one mistake is reported once. The same members in
// another order, other units or another encoding give the same Schedule.
package schedule
