// Package html renders a document as one page that needs nothing else: its
// style and its figures are inside, and nothing is fetched.
//
// [Write] is the front door. The page reads on paper (print style), on a
// telephone (tables scroll within their own frame) and by a screen reader
// (headings, captions, and a sentence for every figure). Equal documents give
// equal bytes.
//
// [BytesLive] adds a part that works by script. The page's policy allows that very
// script and nothing else; without it, and on paper, the page is the static one.
package html
