// Package claim holds claims, as they are to be decided, and the records of
// what was decided. It decides nothing.
package claim
