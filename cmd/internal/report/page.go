package report

import (
	"bytes"
	"crypto/sha256"
	_ "embed"
	"encoding/base64"
	"fmt"
	"html/template"
	"strings"
	"time"

	"turnwise/cmd/internal/folder"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/objectives"
)

// Run is all that the report tells of a run. The same Run always gives the
// same bytes.
type Run struct {
	Name    string // of the folder
	Brief   configs.Brief
	Problem *objectives.Problem
	// Table is the front; where it is empty, Near holds the nearest misses.
	Table, Near *folder.Table
	// Origin is the stage that found a design, by its id.
	Origin map[string]string
	// Knee is the id of the front's knee, empty without one; Chosen are the
	// ids of the designs that were chosen.
	Knee   string
	Chosen map[string]bool
	Search Search
	Sheets []Sheet
	// Cautions are fixed: what they are worth, then "Title: what to do" each.
	Cautions []string
}

// Search is how the front came about.
type Search struct {
	Started  time.Time
	Seconds  float64 // that its sessions took
	Planned  int
	Stopped  string // why the last session ended; empty: not yet
	Finished bool
	Program  string
	Model    string // its identity
	Digest   string // of the brief

	Evaluations, Failed, TimedOut, Feasible, Reused, Final int
	Stages                                                 []Stage
	Stretches                                              []Stretch
	History                                                []Step
}

// Sheet is one design looked at closely.
type Sheet struct {
	Member *folder.Member
	// Simulation covers the band and some of its surroundings; Band are the
	// indices of the band's ends and its middle among the samples.
	Simulation *Simulation
	Band       [3]int
	// Pattern is mid-band's far field, empty where the model has none.
	Pattern []models.Cut
	// Wire is the centre line, m, close enough for straight pieces.
	Wire [][3]float64
	// Laws are turn, diameter and spacing along the winding, m.
	Laws [][3]float64
	// Err says why there is no simulation.
	Err string
	// Tolerance is a study of copies, nil where none was asked for or, as
	// ToleranceErr says, none could be made.
	Tolerance    *Tolerance
	ToleranceErr string
}

var (
	//go:embed page/page.html
	pageHTML string
	//go:embed page/page.css
	pageCSS string
	//go:embed page/page.js
	pageJS string
)

var pageTemplate = template.Must(template.New("page").Parse(pageHTML))

// HTML is the report as one self-contained page: it loads nothing, works
// without scripts, and its content policy lets only its own script and style
// in, by their hashes.
func (r *Run) HTML() ([]byte, error) {
	v, err := r.view()
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := pageTemplate.Execute(&b, v); err != nil {
		return nil, fmt.Errorf("the report's page: %w", err)
	}
	return b.Bytes(), nil
}

// page is what the template fills in.
type page struct {
	Policy string
	Style  template.CSS
	Script template.JS

	Title, Run, Date string
	Tiles            []tile
	Warning          string // over everything else
	Brief            briefView
	Front            frontView
	Sheets           []sheetView
	Search           searchView
	Cautions         []pair
	CautionsLead     string
}

// tile is one fact to see first.
type tile struct{ Name, Value, Note string }

func (r *Run) view() (*page, error) {
	v := &page{
		Policy: policy(pageCSS, pageJS), Style: template.CSS(pageCSS), Script: template.JS(pageJS),
		Title: titleOr(r.Brief.Spec.Title, r.Name), Run: r.Name, Date: dateText(r.Search.Started),
		Tiles: r.tiles(), Warning: r.warning(), Brief: r.briefView(), Search: r.searchView(),
		CautionsLead: r.Cautions[0],
	}
	for _, c := range r.Cautions[1:] {
		name, text, _ := strings.Cut(c, ": ")
		v.Cautions = append(v.Cautions, pair{name, text})
	}
	var err error
	if v.Front, err = r.frontView(); err != nil {
		return nil, err
	}
	for i := range r.Sheets {
		v.Sheets = append(v.Sheets, r.sheetView(i))
	}
	return v, nil
}

// policy is the page's content policy: nothing from anywhere but the one
// style and the one script that it holds.
func policy(style, script string) string {
	return fmt.Sprintf("default-src 'none'; style-src '%s'; script-src '%s'; base-uri 'none'; form-action 'none'", hashOf(style), hashOf(script))
}

func hashOf(text string) string {
	sum := sha256.Sum256([]byte(text))
	return "sha256-" + base64.StdEncoding.EncodeToString(sum[:])
}

func dateText(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.UTC().Format("2 January 2006, 15:04") + " UTC"
}

// listed is the front, or the nearest misses where it is empty.
func (r *Run) listed() *folder.Table {
	if len(r.Table.Members) == 0 && r.Near != nil {
		return r.Near
	}
	return r.Table
}

func (r *Run) empty() bool { return len(r.Table.Members) == 0 }

// warning is what must be known before anything is read.
func (r *Run) warning() string {
	switch {
	case r.empty() && r.Search.Finished:
		return "Nothing met the limits. Shown below are the designs that miss them least, and by how much."
	case r.empty():
		return "Nothing has met the limits yet, and the search is not finished. Shown below are the designs that miss them least."
	case !r.Search.Finished:
		return "The search is not finished: this is its front so far. Its figures are not yet confirmed over a fine sweep."
	}
	return ""
}
