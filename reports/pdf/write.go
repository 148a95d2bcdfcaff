package pdf

import (
	"bytes"
	"fmt"
	"io"

	"codeberg.org/go-pdf/fpdf"

	"phaselag/reports/figure"
)

// Write writes d as PDF. An error comes from w or from the library that builds
// the file; nothing is written then that could be taken for a document.
func Write(w io.Writer, d figure.Document) error {
	b, err := Bytes(d)
	if err != nil {
		return err
	}
	_, err = w.Write(b)
	return err
}

// Bytes returns d as PDF. The document is set twice: "page n of N" needs N.
func Bytes(d figure.Document) ([]byte, error) {
	pages := set(d, 0).pdf.PageCount()
	b := set(d, pages)
	var out bytes.Buffer
	if err := b.pdf.Output(&out); err != nil {
		return nil, fmt.Errorf("pdf: %w", err)
	}
	return out.Bytes(), nil
}

// sheet is a size of paper and its margins in mm.
type sheet struct{ width, height, left, right, bottom float64 }

// The measure is that of A4 on every paper.
const (
	top     = 22.0
	measure = 170.0
)

func paper(p figure.Paper) sheet {
	w, h := 210.0, 297.0
	if p == figure.Letter {
		w, h = 215.9, 279.4
	}
	left := (w - measure) / 2
	return sheet{width: w, height: h, left: left, right: left + measure, bottom: h - 20}
}

// set builds the document, telling its pages that there are so many.
func set(d figure.Document, pages int) *builder {
	page := paper(d.Paper)
	pdf := fpdf.NewCustom(&fpdf.InitType{OrientationStr: "P", UnitStr: "mm", Size: fpdf.SizeType{Wd: page.width, Ht: page.height}})
	pdf.SetAutoPageBreak(false, 0)
	pdf.SetMargins(page.left, top, page.width-page.right)
	pdf.SetCatalogSort(true)
	pdf.SetCreationDate(d.When())
	pdf.SetModificationDate(d.When())
	pdf.SetProducer("phaselag", true)
	pdf.SetCreator("phaselag", true)
	pdf.SetTitle(figure.Plain(d.Title), true)
	pdf.SetAuthor(figure.Plain(d.Author), true)
	pdf.SetSubject(figure.Plain(d.Subject), true)
	pdf.SetLang("en")
	addFonts(pdf)
	b := &builder{pdf: pdf, page: page, text: setter{pdf}, doc: d, pages: pages}
	b.newPage()
	b.title()
	b.blocks(d.Lead)
	for _, s := range d.Sections {
		b.section(s, 0)
	}
	return b
}
