package folder

import (
	"cmp"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"slices"
	"strings"

	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
)

// nearCount is how many designs near.csv holds.
const nearCount = 10

// NewTable lists members best first by the problem's first aim, ties by id.
func NewTable(p *objectives.Problem, members []optimize.Member, seed uint64) *Table {
	t := emptyTable(p)
	aims := map[string]float64{}
	for i := range members {
		m := newMember(p, &members[i].Evaluation, seed)
		m.Checked = members[i].Checked
		aims[m.ID] = members[i].Aims[0]
		t.Members = append(t.Members, m)
	}
	slices.SortFunc(t.Members, func(a, b Member) int {
		return cmp.Or(cmp.Compare(aims[a.ID], aims[b.ID]), cmp.Compare(a.ID, b.ID))
	})
	return t
}

// NearTable lists the evaluations that break their limits least.
func NearTable(p *objectives.Problem, all []optimize.Evaluation, seed uint64) *Table {
	t := emptyTable(p)
	seen := map[string]bool{}
	order := make([]int, 0, len(all))
	for i := range all {
		if all[i].Status == optimize.OK {
			order = append(order, i)
		}
	}
	violation := func(i int) float64 { v := all[i].Value(); return v.Violation }
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(violation(a), violation(b)) })
	for _, i := range order {
		m := newMember(p, &all[i], seed)
		if seen[m.ID] {
			continue
		}
		seen[m.ID] = true
		m.Violation = violation(i)
		if t.Members = append(t.Members, m); len(t.Members) == nearCount {
			break
		}
	}
	return t
}

func emptyTable(p *objectives.Problem) *Table {
	t := &Table{}
	for _, c := range p.Layout.Columns {
		t.Varied = append(t.Varied, c.Name)
	}
	return t
}

func newMember(p *objectives.Problem, e *optimize.Evaluation, seed uint64) Member {
	r := p.Finest()
	m := Member{Design: p.Layout.Design(e.Point), Model: r.Model, Fidelity: r.Fidelity, Seed: seed}
	m.ID = m.Design.ID()
	copy(m.Figures[:], e.Figures)
	for i, c := range p.Layout.Columns {
		text := VariedText(e.Point[i])
		if c.Quantity == objectives.Conductor {
			text = p.Layout.Stock(e.Point).Name
		}
		m.Varied = append(m.Varied, text)
	}
	return m
}

// WriteFront writes front.csv alone, as a search does on its way.
func (f Folder) WriteFront(t *Table) error { return WriteFile(f.Path(FrontFile), t.CSV(false)) }

// WriteResult writes the final front: the table, a design file for each
// member and, where there is no member, the nearest misses.
func (f Folder) WriteResult(t, near *Table) error {
	if err := os.MkdirAll(f.Path(DesignsDir), 0o755); err != nil {
		return fmt.Errorf("cannot make %s: %w", f.Path(DesignsDir), plain(err))
	}
	keep := map[string]bool{}
	for i := range t.Members {
		m := &t.Members[i]
		name := m.ID + ".yaml"
		keep[name] = true
		if err := WriteFile(f.Path(DesignsDir, name), configs.WriteDesign(m.Design)); err != nil {
			return err
		}
	}
	if err := f.WriteFront(t); err != nil {
		return err
	}
	if len(t.Members) == 0 {
		if err := WriteFile(f.Path(NearFile), near.CSV(true)); err != nil {
			return err
		}
	} else if err := os.Remove(f.Path(NearFile)); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("cannot remove %s: %w", f.Path(NearFile), plain(err))
	}
	return f.dropDesigns(keep)
}

// dropDesigns removes the design files of members that have left the front.
func (f Folder) dropDesigns(keep map[string]bool) error {
	files, err := os.ReadDir(f.Path(DesignsDir))
	if err != nil {
		return fmt.Errorf("cannot read %s: %w", f.Path(DesignsDir), plain(err))
	}
	for _, file := range files {
		id, isDesign := strings.CutSuffix(file.Name(), ".yaml")
		if !isDesign || !isID(id) || keep[file.Name()] {
			continue
		}
		path := f.Path(DesignsDir, file.Name())
		if err := os.Remove(path); err != nil {
			return fmt.Errorf("cannot remove %s: %w", path, plain(err))
		}
	}
	return nil
}
