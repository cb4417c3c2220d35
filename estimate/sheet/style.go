package sheet

import "github.com/xuri/excelize/v2"

// Colours of the exported workbooks, chosen to stay legible in grey print.
const (
	// Those of the workbook's plain cells; a font without a family is drawn with
	// serifs by some programs.
	fontFamily = "Calibri"
	fontSize   = 11
	inkNote    = "595959"
	fillHead   = "E3E8EC"
	fillInput  = "FFF8DC"
	rule       = "7F8C97"
)

// style finds or makes the library's style of a look; 0 is the plain one.
func (b *Builder) style(l look) (int, error) {
	if l == (look{}) {
		return 0, nil
	}
	if id, ok := b.styles[l]; ok {
		return id, nil
	}
	id, err := b.file.NewStyle(l.style())
	if err != nil {
		return 0, err
	}
	b.styles[l] = id
	return id, nil
}

func (l look) style() *excelize.Style {
	s := &excelize.Style{}
	if l.format != General {
		code := string(l.format)
		s.CustomNumFmt = &code
	}
	fill := func(colour string) excelize.Fill {
		return excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{colour}}
	}
	if l.input {
		s.Fill = fill(fillInput)
	}
	if l.wrap {
		s.Alignment = &excelize.Alignment{WrapText: true}
	}
	if l.note {
		s.Font = &excelize.Font{Italic: true, Color: inkNote, Family: fontFamily, Size: fontSize}
		s.Alignment = &excelize.Alignment{WrapText: true, Vertical: "top"}
	}
	if l.total {
		s.Font = &excelize.Font{Bold: true, Family: fontFamily, Size: fontSize}
		s.Border = []excelize.Border{{Type: "top", Color: rule, Style: 1}}
	}
	if l.head {
		s.Font = &excelize.Font{Bold: true, Family: fontFamily, Size: fontSize}
		s.Fill = fill(fillHead)
		s.Border = []excelize.Border{{Type: "bottom", Color: rule, Style: 1}}
		s.Alignment = &excelize.Alignment{WrapText: true, Vertical: "center"}
	}
	return s
}
