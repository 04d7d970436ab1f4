package workshop

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/objectives"
)

// File is a file of a pack.
type File struct {
	Name string
	Data []byte
}

// Pack makes everything a workshop takes of a settled design: the sheet, the
// 1:1 template, the centre line, the bill of materials and the design file.
// The brief (nil: none) gives tolerances and stock.
func Pack(ctx context.Context, rung objectives.Rung, settled *Settled, brief *objectives.Spec, power Power) ([]File, error) {
	s := &sheet{Settled: settled, former: newFormer(&settled.Design, settled.Curve), power: power, stock: stockOf(&settled.Design, brief)}
	if brief != nil {
		s.margins = brief.Margins
	}
	var err error
	if s.trim, err = newTrimChart(ctx, rung, &settled.Design, settled.Curve); err != nil {
		return nil, fmt.Errorf("trim chart: %w", err)
	}
	name := "design " + settled.Design.ID()
	t := template(settled)
	sheetPDF, sheetErr := drawing.PDF("Workshop sheet, "+name, s.pages())
	templatePDF, templateErr := drawing.PDF("Winding template, "+name, templatePages(t, "Winding template, "+name))
	if err := errors.Join(sheetErr, templateErr); err != nil {
		return nil, err
	}
	return []File{
		{"sheet.pdf", sheetPDF},
		{"template.pdf", templatePDF},
		{"template.svg", t.SVG(5)},
		{"template.dxf", t.DXF("Winding template 1:1, " + name + ", millimetres")},
		{"centreline.csv", centreLineCSV(settled.Curve)},
		{"centreline.dxf", centreLineDXF(settled.Curve, "Centre line of the conductor, "+name+", millimetres")},
		{"bom.csv", s.billCSV()},
		{"design.yaml", settled.File},
	}, nil
}

// WriteDir writes a pack as a new folder: whole under a temporary name beside
// it, then renamed. A folder that is there already is an [fs.ErrExist].
func WriteDir(dir string, files []File) (err error) {
	if _, err := os.Lstat(dir); !errors.Is(err, fs.ErrNotExist) {
		if err == nil {
			err = fs.ErrExist
		}
		return fmt.Errorf("%s: %w", dir, err)
	}
	temporary, err := os.MkdirTemp(filepath.Dir(dir), "."+filepath.Base(dir)+".*")
	if err != nil {
		return fmt.Errorf("cannot write %s: %w", dir, err)
	}
	defer func() {
		if err != nil {
			err = errors.Join(fmt.Errorf("cannot write %s: %w", dir, err), os.RemoveAll(temporary))
		}
	}()
	for _, f := range files {
		if err := os.WriteFile(filepath.Join(temporary, f.Name), f.Data, 0o644); err != nil {
			return err
		}
	}
	if err := os.Chmod(temporary, 0o755); err != nil {
		return err
	}
	return os.Rename(temporary, dir)
}
