// Package workbook reads the sheets of spreadsheet files: Office Open XML workbooks
// (ISO/IEC 29500, .xlsx) and OpenDocument spreadsheets (ISO/IEC 26300, .ods).
//
// Numbers come with all their digits, not as they are displayed; dates as they are
// displayed, or as ISO 8601 says them. Formulas give their last value. Nothing is
// understood here: package table makes tables of the cells.
package workbook
