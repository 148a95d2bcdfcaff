// Package reports turns a fitting.Result and a models.Compound into what
// people read and hand out: terminal summaries, tables, figures, and the
// datasheet as PDF and as one HTML file. It computes nothing that a result does
// not hold but the curves of the compound.
package reports
