// Package migrations holds the numbered SQL that makes the database, embedded.
//
// api/store applies the files in order, under a lock. Each file is sent as one
// message and is therefore one transaction (PostgreSQL 15 documentation, 55.2.2.1
// "Multiple Statements in a Simple Query"): it takes effect as a whole or not at
// all. A new table is made after `set local role
// spanwright_owner`, begin each of its keys with organisation_id, call
// spanwright.isolate for it and grant what the service needs; the tests of this
// package find a table that lacks any of it.
package migrations

import "embed"

// FS holds NNNNNN_name.up.sql and NNNNNN_name.down.sql.
//
//go:embed *.sql
var FS embed.FS

// Latest is the number of the newest migration, and so the version of the schema
// that this program works with.
const Latest = 7
