// Package pdf renders a document as PDF: A4 pages with running lines,
// bookmarks, tables that repeat their headings, and figures as vectors.
//
// [Write] is the front door. Fonts are embedded as subsets, text can be
// searched and copied, and equal documents give equal bytes: the only date in
// the file is the document's own.
//
// Characters that the built-in fonts do not have (Liberation Sans: Latin,
// Greek, Cyrillic, signs; no East Asian scripts) are printed as an empty box.
package pdf
