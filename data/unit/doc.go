// Package unit reads and writes quantities with units at the border of the
// program; inside, everything is SI.
package unit
