// Package workbook brings scorecard workbooks (.xlsx) in and writes them out.
//
// # In
//
// A workbook arrives on a stick or by mail, from programs we do not know, so
// nothing about it is believed. Read goes through four steps:
//
//   - sniff.go tells from the bytes what kind of file it is;
//   - parts.go inflates every part once, counting, and sees that all XML is
//     well formed to its end;
//   - book.go and sheet.go make the one pass that keeps what the cells hold,
//     and lists what must not be there: hidden or merged cells, cells twice or
//     out of order, macros, links to elsewhere;
//   - cells.go turns each cell into the canonical text its column asks for,
//     and read.go has package model judge what the texts say together.
//
// Cells are read by this pass alone, not by the library that writes: that one
// takes a sheet cut in half for a short one, picks one of two cells with the
// same address, and does not say which cells a shared or an array formula
// fills. With one reader there are no two opinions about a cell.
//
// Everything wrong is listed at once, with sheet and cell. Nothing is changed
// in the file; a Reading can write a copy that has the problems as comments,
// or values in place of formulas.
//
// # Out
//
// Write writes a scorecard as a workbook that Read takes back with the same
// fingerprint, also after LibreOffice or Gnumeric has saved it again. Besides
// the scorecard's own sheets it has the sheet "Try it", whose formulas score
// an applicant from the other sheets. Blank writes the workbook that head
// office fills in.
package workbook
