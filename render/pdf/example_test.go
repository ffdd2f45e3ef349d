package pdf_test

import (
	"bytes"
	"fmt"

	"steelyard/render/page"
	"steelyard/render/pdf"
)

// A document is written and its attachment taken out again.
func Example() {
	doc := &page.Document{
		Title: "Invented", Language: "en", Paper: "a4", Created: "2026-03-14",
		Blocks: []page.Block{
			page.Heading{Level: 0, Text: page.T("Invented")},
			page.Paragraph{Text: page.T("One line.")},
		},
		Attachments: []page.Attachment{{Name: "record.toml", Media: "application/toml", Relation: "Source", Bytes: []byte("title = \"Invented\"\n")}},
	}
	var b bytes.Buffer
	if err := pdf.Write(&b, doc); err != nil {
		fmt.Println(err)
		return
	}
	file, err := pdf.Read(b.Bytes())
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, a := range file.Attachments {
		fmt.Printf("%s (%s): %s", a.Name, a.Relation, a.Bytes)
	}
	fmt.Println(pdf.WrittenBySteelyard(b.Bytes()), file.Intact)
	// Output:
	// record.toml (Source): title = "Invented"
	// true true
}
