// Package quality looks at a series of batches and at single decisions: control charts,
// capability, acceptance with guard bands, outliers and the comparison of two means.
//
// # Conventions
//
//   - "Not measured" is NaN. An infinite value counts as not measured. Charts keep the
//     place of such a point and pass over it; decisions answer NotDecided with a reason.
//   - U95 is half the length of a 95 % interval, k·u with k the 97.5 % quantile of
//     Student's t at the stated degrees of freedom; 0, NaN or infinite degrees of freedom
//     stand for very many, k = 1.959964.
//   - A limit that is NaN or infinite is absent.
//   - Values, limits, sigmas and U95 share one unit, which the caller knows. Nothing
//     here depends on it.
//   - σ within is the scatter inside a batch or from batch to batch, as a chart takes
//     it; s overall is the plain standard deviation of the whole series.
//
// The functions are pure. Faults of the data are errors in lower case; nothing panics on
// a number.
package quality
