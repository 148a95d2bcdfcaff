// Package figure draws the figures that a laboratory hands out, and holds the
// document they stand in.
//
// A [Figure] is plain data: panels with axes, series, bands, reference lines
// and notes. [SVG] renders it as a file of its own, [Draw] on any canvas (the
// PDF builder uses that). Equal figures give equal bytes.
//
// # Conventions
//
//   - Lengths of the figure are millimetres on paper; type is 7.5 to 9 points.
//     Every panel has the same fixed margins, so panels of equal size have
//     equal data rectangles.
//   - Text may carry subscripts and superscripts as _{…} and ^{…}; a hyphen in
//     front of a number on an axis is drawn as a true minus sign.
//   - A NaN coordinate is a gap; on a logarithmic axis so is anything that is
//     not positive. Infinite values are treated like NaN. Slices of unequal
//     length are read up to the shortest.
//   - A line can carry its name in a gap of itself ([Series].Mark), so that contours and
//     curves are read without a legend and without colour; [Area] fills or hatches.
//   - Colours are those of Okabe and Ito, which people with colour-deficient
//     sight can tell apart; dash and glyph say the same a second time. Bands
//     are opaque pale tints, which look the same in every format.
//
// # Documents
//
// A [Document] is sections of blocks: paragraphs, lists, facts, grids, pictures
// and callouts. It is written once and rendered by the packages pdf and html.
package figure
