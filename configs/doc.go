// Package configs reads and writes what people keep in files: briefs and
// designs. It is strict: every value carries its unit, a key it does not know
// is an error, and all that is wrong with a file is said at once, each fault
// with its line, its key and a remedy. What it hands on is resolved, in SI,
// and needs no second look.
package configs
