package folder

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
)

func ids(t *Table) []string {
	var out []string
	for i := range t.Members {
		out = append(out, t.Members[i].ID)
	}
	return out
}

// Best first by the first aim, here most gain, and ties by id whatever order
// they came in.
func TestTableIsBestFirst(t *testing.T) {
	p := problem(t)
	front := members(
		answer(8, 0.10, 0, 12, 0.5),
		answer(9, 0.10, 1, 13, 0.6),
		answer(5, 0.09, 0, 12, 0.5),
		answer(6, 0.09, 0, 12, 0.5),
		answer(3, 0.08, 0, 9, 0.2),
	)
	front[4].Checked = false
	got := NewTable(p, front, 7)
	var ties []string
	for _, i := range []int{0, 2, 3} {
		d := p.Layout.Design(front[i].Point)
		ties = append(ties, d.ID())
	}
	slices.Sort(ties)
	best, last := p.Layout.Design(front[1].Point), p.Layout.Design(front[4].Point)
	want := append(append([]string{best.ID()}, ties...), last.ID())
	if !slices.Equal(ids(got), want) {
		t.Errorf("order %v, want %v", ids(got), want)
	}
	slices.Reverse(front)
	if again := NewTable(p, front, 7); !slices.Equal(ids(again), want) {
		t.Errorf("the other way about the order is %v, want %v", ids(again), want)
	}
	m := got.Members[0]
	if !slices.Equal(m.Varied, []string{"9", "0.1", "0.1", `rod, 1/8"`}) {
		t.Errorf("varied %q", m.Varied)
	}
	if m.Figures[objectives.Gain] != 13 || m.Model != "full-wave" || m.Fidelity != "standard" || m.Seed != 7 || !m.Checked || got.Members[4].Checked {
		t.Errorf("member %+v", m)
	}
	if m.Design.ID() != m.ID || m.Design.Turns != 9 {
		t.Errorf("design %+v under the id %s", m.Design, m.ID)
	}
	if !slices.Equal(got.Varied, []string{"turns", "diameter_1_m", "diameter_2_m", "conductor"}) {
		t.Errorf("columns %v", got.Varied)
	}
}

// The ten that break their limits least, each once; of equals the first
// asked. Failures are not among them.
func TestNearTable(t *testing.T) {
	p := problem(t)
	var all []optimize.Evaluation
	miss := func(turns, violation float64) {
		e := answer(turns, 0.1, 0, 10, 0.5)
		e.Limits = []float64{violation, -1}
		all = append(all, e)
	}
	for i := range 14 {
		miss(3+0.25*float64(i), 2-0.1*float64(i))
	}
	miss(6.25, 0.7) // again, as replayed from a journal
	miss(12, 0.8)   // as near as the thirteenth
	all = append(all, optimize.Evaluation{Status: optimize.Failed, Candidate: optimize.Candidate{Point: all[0].Point}})
	got := NearTable(p, all, 7)
	var near []string
	for _, m := range got.Members {
		near = append(near, fmt.Sprintf("%s %.1f", m.Varied[0], m.Violation))
	}
	want := []string{"6.25 0.7", "6 0.8", "12 0.8", "5.75 0.9", "5.5 1.0", "5.25 1.1", "5 1.2", "4.75 1.3", "4.5 1.4", "4.25 1.5"}
	if !slices.Equal(near, want) {
		t.Errorf("nearest %v\nwant    %v", near, want)
	}
	if none := NearTable(p, nil, 7); len(none.Members) != 0 || len(none.Varied) != 4 {
		t.Errorf("of nothing %+v", none)
	}
}

// Among many equals the first asked stay, in the order of asking.
func TestNearTableKeepsTheOrderOfAsking(t *testing.T) {
	p := problem(t)
	var all []optimize.Evaluation
	for i := range 36 {
		e := answer(12-0.25*float64(i), 0.1, 0, 10, 0.5)
		e.Limits = []float64{0.5 * float64(i%2)}
		all = append(all, e)
	}
	for i, m := range NearTable(p, all, 7).Members {
		if want := VariedText(12 - 0.5*float64(i)); m.Varied[0] != want {
			t.Errorf("place %d has %s turns, want %s", i, m.Varied[0], want)
		}
	}
}

func write(t *testing.T, path, text string) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

func read(t *testing.T, path string) string {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

func names(t *testing.T, dir string) []string {
	t.Helper()
	files, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	for _, f := range files {
		out = append(out, f.Name())
	}
	return out
}

// A result is a table, a design file for each member that reads back as that
// design, and no design file of one that has left; what else lies there stays.
func TestWriteResult(t *testing.T) {
	p := problem(t)
	f, err := Create(filepath.Join(t.TempDir(), "run"))
	if err != nil {
		t.Fatal(err)
	}
	first := NewTable(p, members(answer(8, 0.1, 0, 12, 0.5), answer(9, 0.1, 1, 13, 0.6)), 7)
	if err := f.WriteResult(first, NearTable(p, nil, 7)); err != nil {
		t.Fatal(err)
	}
	own := []string{"my-antenna.yaml", "parabolica.yaml", "0123456789.txt", "0123456789.yaml.old"}
	for _, name := range own {
		write(t, f.Path(DesignsDir, name), "mine")
	}
	second := NewTable(p, members(answer(9, 0.1, 1, 13, 0.6), answer(10, 0.1, 0, 14, 0.7)), 7)
	if err := f.WriteResult(second, NearTable(p, nil, 7)); err != nil {
		t.Fatal(err)
	}
	want := slices.Clone(own)
	for _, id := range ids(second) {
		want = append(want, id+".yaml")
		d, err := configs.ReadDesign(f.Path(DesignsDir, id+".yaml"))
		if err != nil {
			t.Fatal(err)
		}
		if d.ID() != id {
			t.Errorf("the design file of %s reads back as %s", id, d.ID())
		}
	}
	slices.Sort(want)
	if got := names(t, f.Path(DesignsDir)); !slices.Equal(got, want) {
		t.Errorf("designs %v, want %v", got, want)
	}
	if got := names(t, f.Dir); !slices.Equal(got, []string{DesignsDir, FrontFile}) {
		t.Errorf("folder holds %v", got)
	}
	table, err := ReadTable(f.Path(FrontFile))
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(ids(table), ids(second)) {
		t.Errorf("front.csv lists %v, want %v", ids(table), ids(second))
	}
}

// With no member the nearest misses are told; with one they go again.
func TestNearestMissesComeAndGo(t *testing.T) {
	p := problem(t)
	f, err := Create(filepath.Join(t.TempDir(), "run"))
	if err != nil {
		t.Fatal(err)
	}
	e := answer(8, 0.1, 0, 12, 0.5)
	e.Limits = []float64{0.25}
	near := NearTable(p, []optimize.Evaluation{e}, 7)
	empty := NewTable(p, nil, 7)
	if err := f.WriteResult(empty, near); err != nil {
		t.Fatal(err)
	}
	if got := read(t, f.Path(FrontFile)); strings.Count(got, "\n") != 1 {
		t.Errorf("front.csv of no member:\n%s", got)
	}
	if got := read(t, f.Path(NearFile)); got != string(near.CSV(true)) || !strings.HasSuffix(got, ",0.25\n") {
		t.Errorf("near.csv:\n%s", got)
	}
	if err := f.WriteResult(NewTable(p, members(e), 7), near); err != nil {
		t.Fatal(err)
	}
	if got := names(t, f.Dir); slices.Contains(got, NearFile) {
		t.Errorf("folder still holds %v", got)
	}
}

// A folder's name is a name, no pattern: a run in run[1] leaves the designs
// of run1 alone.
func TestNamesAreNoPatterns(t *testing.T) {
	p := problem(t)
	dir := t.TempDir()
	neighbour := filepath.Join(dir, "run1", DesignsDir, "0123456789.yaml")
	write(t, neighbour, "mine")
	f, err := Create(filepath.Join(dir, "run[1]"))
	if err != nil {
		t.Fatal(err)
	}
	stale := f.Path(DesignsDir, "0123456789.yaml")
	write(t, stale, "stale")
	if err := f.WriteResult(NewTable(p, nil, 7), NearTable(p, nil, 7)); err != nil {
		t.Fatal(err)
	}
	if read(t, neighbour) != "mine" {
		t.Error("the neighbour's design is not what it was")
	}
	if len(names(t, f.Path(DesignsDir))) != 0 {
		t.Error("the stale design is still there")
	}
}

// What cannot be written is told with its path.
func TestWriteResultThatCannot(t *testing.T) {
	p := problem(t)
	table, none := NewTable(p, members(answer(8, 0.1, 0, 12, 0.5)), 7), NewTable(p, nil, 7)
	for _, x := range []struct {
		name  string
		table *Table
		block func(f Folder)
		path  []string
	}{
		{"designs is a file", table, func(f Folder) { write(t, f.Path(DesignsDir), "") }, []string{DesignsDir}},
		{"a folder in a design's place", table, func(f Folder) { write(t, f.Path(DesignsDir, table.Members[0].ID+".yaml", "x"), "") }, []string{DesignsDir, table.Members[0].ID + ".yaml"}},
		{"a folder in the front's place", table, func(f Folder) { write(t, f.Path(FrontFile, "x"), "") }, []string{FrontFile}},
		{"a folder in place of the nearest misses", none, func(f Folder) { write(t, f.Path(NearFile, "x"), "") }, []string{NearFile}},
		{"a folder that should go", table, func(f Folder) { write(t, f.Path(NearFile, "x"), "") }, []string{NearFile}},
		{"a folder in a stale design's place", table, func(f Folder) { write(t, f.Path(DesignsDir, "0123456789.yaml", "x"), "") }, []string{DesignsDir, "0123456789.yaml"}},
	} {
		f := Folder{Dir: t.TempDir()}
		x.block(f)
		if err := f.WriteResult(x.table, none); err == nil || !strings.Contains(err.Error(), f.Path(x.path...)+": ") {
			t.Errorf("%s: %v", x.name, err)
		}
	}
}
