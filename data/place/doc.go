// Package place says where in a file something stands, and holds the one error
// type for faults in what the user wrote.
//
// Lines and columns count from 1; a column counts characters of the line, not
// bytes. Zero means that the position is not known.
package place
