// Package suspect tells which fault explains what was measured of a unit.
package suspect
