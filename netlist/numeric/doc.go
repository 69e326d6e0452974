// Package numeric holds mathematics without trade words: the extremes of many
// quantities over a box of variables, and root finding in a bracket.
package numeric
