package main

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/base64"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"maps"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/cmd/internal/workshop"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/objectives"
)

// small is the brief of most runs here.
const small = "testdata/small.yaml"

// fewer is that brief with a front of at most n designs.
func fewer(t *testing.T, n int) string {
	t.Helper()
	text, err := os.ReadFile(small)
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "fewer.yaml")
	if err := os.WriteFile(path, bytes.Replace(text, []byte("at_most: 40"), fmt.Appendf(nil, "at_most: %d", n), 1), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// madeRun searches by a brief and gives the run's folder.
func madeRun(t *testing.T, brief string) string {
	t.Helper()
	dir := filepath.Join(t.TempDir(), "run")
	var said bytes.Buffer
	code := run(context.Background(), []string{"search", brief, "--run", dir}, streams{out: io.Discard, err: &said})
	if code != exitDone {
		t.Fatalf("search ended with %d:\n%s", code, said.Bytes())
	}
	return dir
}

// command runs the program and expects an exit code.
func command(t *testing.T, want int, args ...string) (out string) {
	t.Helper()
	var said, wrong bytes.Buffer
	if code := run(context.Background(), args, streams{out: &said, err: &wrong}); code != want {
		t.Fatalf("%q ended with %d, %d is due:\n%s", args, code, want, wrong.Bytes())
	}
	return said.String()
}

// element is a node of a page.
type element struct {
	name     string
	attrs    map[string]string
	text     string
	children []*element
}

// find lists the elements of a name within, in their order.
func (e *element) find(name string) []*element {
	var found []*element
	for _, c := range e.children {
		if c.name == name {
			found = append(found, c)
		}
		found = append(found, c.find(name)...)
	}
	return found
}

var verbatim = regexp.MustCompile(`(?s)(<(script|style)>)(.*?)</(?:script|style)>`)

// parsePage reads a page as strict XML, which the template keeps to: an
// unclosed element or an unquoted attribute is an error. Script and style
// stand apart.
func parsePage(t *testing.T, page []byte) (root *element, parts map[string]string) {
	t.Helper()
	parts = map[string]string{}
	for _, m := range verbatim.FindAllSubmatch(page, -1) {
		if name := string(m[2]); parts[name] != "" {
			t.Fatalf("more than one <%s>", name)
		} else {
			parts[name] = string(m[3])
		}
	}
	d := xml.NewDecoder(bytes.NewReader(verbatim.ReplaceAll(page, []byte("$1</$2>"))))
	d.Entity = xml.HTMLEntity
	root = &element{}
	open := []*element{root}
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
		top := open[len(open)-1]
		switch x := token.(type) {
		case xml.StartElement:
			e := &element{name: x.Name.Local, attrs: map[string]string{}}
			for _, a := range x.Attr {
				e.attrs[a.Name.Local] = a.Value
			}
			top.children = append(top.children, e)
			open = append(open, e)
		case xml.EndElement:
			open = open[:len(open)-1]
			open[len(open)-1].text += top.text
		case xml.CharData:
			top.text += string(x)
		}
	}
	return root, parts
}

func readPage(t *testing.T, dir string) []byte {
	t.Helper()
	page, err := os.ReadFile(filepath.Join(dir, reportFile))
	if err != nil {
		t.Fatal(err)
	}
	return page
}

// The page is well-formed, holds together and loads nothing.
func TestReportPage(t *testing.T) {
	dir := madeRun(t, "testdata/dish.yaml")
	page := readPage(t, dir)
	root, parts := parsePage(t, page)
	if len(page) > 5e6 {
		t.Errorf("the page has %d bytes", len(page))
	}
	ids := map[string]bool{}
	var look func(e *element)
	look = func(e *element) {
		for name, value := range e.attrs {
			if name == "style" || strings.HasPrefix(name, "on") || name == "src" || strings.Contains(value, "javascript:") {
				t.Errorf("<%s %s=%q> does not pass a strict policy", e.name, name, value)
			}
		}
		if id := e.attrs["id"]; id != "" {
			if ids[id] {
				t.Errorf("two elements are called %s", id)
			}
			ids[id] = true
		}
		for _, c := range e.children {
			look(c)
		}
	}
	look(root)
	for _, a := range root.find("a") {
		if target, inside := strings.CutPrefix(a.attrs["href"], "#"); !inside || !ids[target] {
			t.Errorf("a link leads to %q, which is not on the page", a.attrs["href"])
		}
	}
	policy := root.find("meta")[1].attrs["content"]
	for _, name := range []string{"script", "style"} {
		sum := sha256.Sum256([]byte(parts[name]))
		if want := name + "-src 'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"; !strings.Contains(policy, want) {
			t.Errorf("the policy %q lacks %s", policy, want)
		}
	}
	if n := len(root.find("article")); n != mostSheets {
		t.Errorf("%d sheets, %d are due", n, mostSheets)
	}
	// What the model states of itself is on every sheet; paper needs it once.
	if n := bytes.Count(page, []byte(`<div class="repeated"><dt>model</dt><dd>`)); n != mostSheets-1 {
		t.Errorf("%d sheets repeat the first one's statement, all but one are due", n)
	}
	if strings.Contains(parts["style"], "url(") || strings.Contains(parts["style"], "@import") {
		t.Error("the style loads something")
	}
	for _, word := range []string{"NaN", "Inf", "<no value>", "ZgotmplZ"} {
		if bytes.Contains(verbatim.ReplaceAll(page, nil), []byte(word)) {
			t.Errorf("the page says %s", word)
		}
	}
	for _, c := range workshop.Cautions {
		for _, part := range strings.SplitN(c, ": ", 2) {
			if !strings.Contains(root.text, part) {
				t.Errorf("the caution %q is missing", part)
			}
		}
	}
}

// The table's cells are those of front.csv, text for text.
func TestReportTableIsFrontCSV(t *testing.T) {
	dir := madeRun(t, small)
	root, _ := parsePage(t, readPage(t, dir))
	var table *element
	for _, e := range root.find("table") {
		if e.attrs["id"] == "table" {
			table = e
		}
	}
	var lines []string
	for _, row := range table.find("tr") {
		var cells []string
		for _, c := range row.children {
			if v, ok := c.attrs["data-name"]; ok {
				cells = append(cells, v)
			} else if v, ok := c.attrs["data-v"]; ok {
				cells = append(cells, v)
			}
		}
		lines = append(lines, strings.Join(cells, ","))
	}
	want, err := os.ReadFile(filepath.Join(dir, "front.csv"))
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.Join(lines, "\n") + "\n"; got != string(want) {
		t.Errorf("the table holds\n%s\nfront.csv\n%s", got, want)
	}
}

// The report command gives the bytes that the search left; so does a second
// one, wherever the folder lies, and so do the charts.
func TestReportIsReproducible(t *testing.T) {
	dir := madeRun(t, fewer(t, 3))
	first := readPage(t, dir)
	command(t, exitDone, "report", dir, "--charts", filepath.Join(dir, "one"))
	if !bytes.Equal(first, readPage(t, dir)) {
		t.Error("turnwise report changed the search's report")
	}
	command(t, exitDone, "report", dir, "--charts", filepath.Join(dir, "two"))
	names, err := filepath.Glob(filepath.Join(dir, "one", "*"))
	if err != nil || len(names) != 2*(3+3*11)+3 {
		t.Fatalf("%d charts (%v)", len(names), err)
	}
	for _, name := range names {
		one, err1 := os.ReadFile(name)
		two, err2 := os.ReadFile(filepath.Join(dir, "two", filepath.Base(name)))
		if err := errors.Join(err1, err2); err != nil || !bytes.Equal(one, two) {
			t.Errorf("%s came out differently (%v)", filepath.Base(name), err)
		}
	}
}

// What was chosen, the knee and the ends of the front have a sheet and say so.
func TestReportMarksTheChosen(t *testing.T) {
	dir := madeRun(t, small)
	said := command(t, exitDone, "choose", dir, "--at-least", "gain=10")
	chosenID := regexp.MustCompile(`chosen-([0-9a-f]{10})\.yaml`).FindStringSubmatch(said)[1]
	command(t, exitDone, "report", dir)
	root, _ := parsePage(t, readPage(t, dir))
	roles := map[string]string{}
	for _, a := range root.find("article") {
		roles[strings.TrimPrefix(a.attrs["id"], "sheet-")] = a.find("p")[0].text
	}
	if !strings.Contains(roles[chosenID], "chosen") {
		t.Errorf("the sheet of %s, which was chosen, is headed %q", chosenID, roles[chosenID])
	}
	for _, role := range []string{"knee", "most gain", "least length"} {
		if !slices.ContainsFunc(slices.Collect(maps.Values(roles)), func(s string) bool { return strings.Contains(s, role) }) {
			t.Errorf("no sheet is marked %q", role)
		}
	}
}

// A front that names a design which the journal does not know is refused.
func TestReportRefusesAForeignFront(t *testing.T) {
	dir := madeRun(t, small)
	path := filepath.Join(dir, "front.csv")
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(string(text), "\n")
	lines[1] = "0123456789" + lines[1][10:]
	if err := os.WriteFile(path, []byte(strings.Join(lines, "\n")), 0o644); err != nil {
		t.Fatal(err)
	}
	var wrong bytes.Buffer
	if code := run(context.Background(), []string{"report", dir}, streams{out: io.Discard, err: &wrong}); code != exitWrong || !strings.Contains(wrong.String(), "0123456789") {
		t.Errorf("exit %d: %s", code, wrong.Bytes())
	}
}

// A sweep rises, holds the band's confirming sweep with its middle, and the
// band's ends and middle are where it says.
func TestSurroundings(t *testing.T) {
	for _, b := range []models.Band{
		{From: 1.66e9, To: 1.70e9, Samples: 5}, {From: 434e6, To: 434e6, Samples: 1}, {From: 1e9, To: 1.5e9, Samples: 2},
		{From: 2.33e9, To: 2.36e9, Samples: 4}, {From: 1.0e9, To: 1.15e9, Samples: 16},
	} {
		t.Run(fmt.Sprintf("%g–%g GHz", b.From/1e9, b.To/1e9), func(t *testing.T) {
			hz, in := surroundings(b)
			for i := 1; i < len(hz); i++ {
				if !(hz[i] > hz[i-1]*(1+1e-7)) {
					t.Fatalf("%g Hz follows %g Hz", hz[i], hz[i-1])
				}
			}
			if hz[in[0]] != b.From || hz[in[2]] != b.To || hz[in[1]] < b.Mid()*(1-1e-9) || hz[in[1]] > b.Mid()*(1+1e-9) {
				t.Errorf("band %g, %g, %g of %+v", hz[in[0]], hz[in[1]], hz[in[2]], b)
			}
			for _, x := range objectives.FineSweep(b) {
				if !slices.Contains(hz[in[0]:in[2]+1], x) {
					t.Errorf("%g Hz of the confirming sweep is missing", x)
				}
			}
			if hz[0] > 0.951*b.Mid() || hz[len(hz)-1] < 1.049*b.Mid() || hz[0] <= 0 {
				t.Errorf("the sweep reaches from %g to %g about %g", hz[0], hz[len(hz)-1], b.Mid())
			}
		})
	}
}

// balks answers like the closed form but refuses what lies outside the band.
type balks struct {
	models.Simulator
	from, to float64
}

func (s balks) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	for _, hz := range q.Hz {
		if hz < s.from || hz > s.to {
			return models.Response{}, errors.New("outside")
		}
	}
	return s.Simulator.Simulate(ctx, d, q)
}

// A model that refuses the surroundings of the band still gives a sheet of
// the band; one that refuses the band gives a sheet that says why.
func TestSheetOfABalkingModel(t *testing.T) {
	b, err := configs.ReadBrief(small)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		to      float64
		samples int
		says    string
	}{{b.Spec.Band.To, len(objectives.FineSweep(b.Spec.Band)), ""}, {b.Spec.Band.Mid(), 0, "outside"}} {
		p, err := objectives.NewProblem(b.Spec, objectives.Rung{Simulator: balks{closedform.New(), b.Spec.Band.From, c.to}, Model: "closed-form", Indicative: true})
		if err != nil {
			t.Fatal(err)
		}
		sheet := balkedSheet(t, p)
		if sheet.Err != c.says {
			t.Errorf("the sheet says %q, want %q", sheet.Err, c.says)
		}
		if got := sampleCount(sheet); got != c.samples {
			t.Errorf("%d samples, want %d", got, c.samples)
		}
		r := report.Run{
			Brief: b, Problem: p, Table: &folder.Table{Varied: columnNames(p), Members: []folder.Member{*sheet.Member}}, Sheets: []report.Sheet{*sheet},
			Cautions: workshop.Cautions,
		}
		page, err := r.HTML()
		if err != nil {
			t.Fatal(err)
		}
		root, _ := parsePage(t, page)
		if says := strings.Contains(root.text, "could not be simulated: "+sheet.Err); says != (c.says != "") {
			t.Errorf("says that it could not be simulated: %v", says)
		}
	}
}

func balkedSheet(t *testing.T, p *objectives.Problem) *report.Sheet {
	t.Helper()
	middle := make([]float64, len(p.Layout.Space))
	for i := range middle {
		middle[i] = 0.5
	}
	d := p.Layout.Design(p.Layout.Space.FromUnit(middle))
	sheet := &report.Sheet{Member: &folder.Member{ID: d.ID(), Design: d, Varied: make([]string, len(p.Layout.Columns))}}
	simulateSheet(t.Context(), &report.Run{Problem: p}, sheet)
	return sheet
}

func sampleCount(s *report.Sheet) int {
	if s.Simulation == nil {
		return 0
	}
	return len(s.Simulation.Response.Samples)
}

func columnNames(p *objectives.Problem) []string {
	var names []string
	for _, c := range p.Layout.Columns {
		names = append(names, c.Name)
	}
	return names
}
