package main

import (
	"cmp"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"math"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"sync"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/chart"
	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/cmd/internal/workshop"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/journal"
)

// reportFile is the report's name in a run's folder.
const reportFile = "report.html"

// How many designs are looked at closely, of a front and of the nearest
// misses where there is none.
const (
	mostSheets     = 12
	mostNearSheets = 4
)

func reportCommand(s streams) *cobra.Command {
	var charts string
	var copies int
	c := &cobra.Command{
		Use:   "report RUN",
		Short: "Writes a run's report, one self-contained HTML file",
		Long: `Writes report.html into a run's folder: the brief in words, how the search
went, the front as a picture and a table, and for up to twelve designs along it
a sheet with drawing, charts, hand formulas and warnings. The file needs no
network and no scripts, and can be printed.

--tolerance N also makes N copies of each chosen design, of the knee where none
is chosen, as turnwise tolerance does by default, and tells on its sheet what
workshop errors do.

--charts also writes every chart as PNG and SVG, and each sheet's sweep as CSV,
into a folder of your own.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			return reportRun(c.Context(), s, args[0], charts, copies)
		},
	}
	c.Flags().IntVar(&copies, "tolerance", 0, "number of copies for a section on workshop errors; 0 for none")
	c.Flags().StringVar(&charts, "charts", "", "also write the charts and sweeps into this folder")
	return c
}

// reportRun writes the report of a run, and its charts and a study of so many
// copies where they are asked for.
func reportRun(ctx context.Context, s streams, run, charts string, copies int) error {
	if copies < 0 || copies > mostCopies {
		return wrong(fmt.Errorf("--tolerance %d: give 0 to %d", copies, mostCopies))
	}
	f, err := folder.Open(run)
	if err != nil {
		return wrong(err)
	}
	if err := vacant(charts); err != nil {
		return wrong(err)
	}
	b, err := configs.ReadBrief(f.Path(folder.BriefFile))
	if err != nil {
		return wrong(err)
	}
	p, err := newProblem(b, b.Spec)
	if err != nil {
		return wrong(err)
	}
	defer closeModels(p)
	r, err := gather(ctx, s, f, b, p)
	if err != nil {
		return err
	}
	if copies > 0 {
		if err := studySheets(ctx, s, r, copies); err != nil {
			return err
		}
	}
	if err := writeReport(f, r); err != nil {
		return failed(err)
	}
	if charts != "" {
		if err := writeCharts(ctx, charts, r); err != nil {
			return err
		}
	}
	if _, err := fmt.Fprintln(s.out, f.Path(reportFile)); err != nil {
		return failed(err)
	}
	if len(r.Table.Members) == 0 {
		return unmet("the front of %s is empty: nothing met the limits; the report shows the nearest misses", run)
	}
	return nil
}

// report ends a search with its report. A report that fails takes nothing
// away from the search: it is said, and can be made later.
func (ses *session) report(ctx context.Context) {
	r, err := gather(ctx, ses.s, ses.folder, ses.brief, ses.problem)
	if err == nil {
		err = writeReport(ses.folder, r)
	}
	if err != nil {
		fmt.Fprintf(ses.s.err, "the report could not be made: %v; turnwise report %s makes it\n", err, ses.folder.Dir)
		return
	}
	fmt.Fprintf(ses.s.out, "report        %s\n", ses.folder.Path(reportFile))
}

func writeReport(f folder.Folder, r *report.Run) error {
	page, err := r.HTML()
	if err != nil {
		return err
	}
	return folder.WriteFile(f.Path(reportFile), page)
}

// vacant refuses a folder for charts that holds something.
func vacant(dir string) error {
	if dir == "" {
		return nil
	}
	entries, err := os.ReadDir(dir)
	switch {
	case errors.Is(err, os.ErrNotExist):
		return nil
	case err != nil:
		return fmt.Errorf("--charts %s: cannot be used as a folder; name another", dir)
	case len(entries) > 0:
		return fmt.Errorf("--charts %s: holds something already; name another folder", dir)
	}
	return nil
}

// writeCharts writes every chart twice and every sweep.
func writeCharts(ctx context.Context, dir string, r *report.Run) error {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return failed(fmt.Errorf("cannot make %s: %w", dir, err))
	}
	write := func(name string, data []byte) error {
		return os.WriteFile(filepath.Join(dir, name), data, 0o644)
	}
	for _, c := range r.Charts() {
		if ctx.Err() != nil {
			return stopped(ctx.Err())
		}
		whole := chart.Titled{Title: c.Title, Figure: c.Figure}
		png, err := chart.PNG(whole)
		if err := errors.Join(err, write(c.Name+".svg", chart.SVG(whole, c.Title))); err != nil {
			return failed(err)
		}
		if err := write(c.Name+".png", png); err != nil {
			return failed(err)
		}
	}
	for i := range r.Sheets {
		sheet := &r.Sheets[i]
		if sheet.Simulation == nil {
			continue
		}
		sweep, err := sheet.SweepCSV()
		if err != nil {
			return failed(err)
		}
		if err := write(sheet.Member.ID+"-sweep.csv", sweep); err != nil {
			return failed(err)
		}
	}
	return nil
}

// gather reads all of a run that its report tells, and simulates the designs
// that get a sheet.
func gather(ctx context.Context, s streams, f folder.Folder, b configs.Brief, p *objectives.Problem) (*report.Run, error) {
	t, err := folder.ReadTable(f.Path(folder.FrontFile))
	if err != nil {
		return nil, wrong(err)
	}
	book, err := journal.Read(f.Path(folder.JournalFile))
	if err != nil {
		return nil, wrong(err)
	}
	defer book.Close()
	past, err := book.Past(ctx)
	if err != nil {
		return nil, failed(err)
	}
	past = finest(past, p)
	r := &report.Run{Name: folderName(f.Dir), Brief: b, Problem: p, Table: t, Chosen: chosen(f), Cautions: workshop.Cautions}
	if r.Origin, err = adopt(p, t, past); err != nil {
		return nil, wrong(fmt.Errorf("%s: %w", f.Path(folder.FrontFile), err))
	}
	if k := kneeOf(&b.Spec, figureRows(t)); k >= 0 {
		r.Knee = t.Members[k].ID
	}
	if r.Search, err = tellSearch(ctx, book, past, r.Origin); err != nil {
		return nil, failed(err)
	}
	addSheets(r, past)
	if err := simulateSheets(ctx, s, r); err != nil {
		return nil, stopped(err)
	}
	return r, nil
}

// folderName is a folder's own name, however it was called.
func folderName(dir string) string {
	if whole, err := filepath.Abs(dir); err == nil {
		dir = whole
	}
	return filepath.Base(dir)
}

// chosen are the ids of the designs that were chosen in a run.
func chosen(f folder.Folder) map[string]bool {
	ids := map[string]bool{}
	files, _ := filepath.Glob(f.Path("chosen-*.yaml"))
	for _, path := range files {
		ids[strings.TrimSuffix(strings.TrimPrefix(filepath.Base(path), "chosen-"), ".yaml")] = true
	}
	return ids
}

// adopt gives the members of a table their designs, out of what was
// evaluated, and tells which stage found each.
func adopt(p *objectives.Problem, t *folder.Table, past []optimize.Evaluation) (map[string]string, error) {
	wantedAt := map[string]int{}
	for i := range t.Members {
		wantedAt[t.Members[i].ID] = i
	}
	origin := map[string]string{}
	for i := range past {
		if len(origin) == len(wantedAt) {
			break
		}
		d := p.Layout.Design(past[i].Point)
		id := d.ID()
		k, listed := wantedAt[id]
		if _, known := origin[id]; !listed || known {
			continue
		}
		t.Members[k].Design = d
		origin[id] = past[i].From
	}
	for i := range t.Members {
		if id := t.Members[i].ID; origin[id] == "" {
			return nil, fmt.Errorf("row %d: the design %s is not in the run's journal; leave the file as the search wrote it", i+2, id)
		}
	}
	return origin, nil
}

// tellSearch reads how a search went out of its journal.
func tellSearch(ctx context.Context, book *journal.Reader, past []optimize.Evaluation, origin map[string]string) (report.Search, error) {
	ds, errDecisions := book.Decisions(ctx)
	n, errCounts := book.Counts(ctx)
	if err := errors.Join(errDecisions, errCounts); err != nil {
		return report.Search{}, err
	}
	h := book.Header()
	found := map[string]int{}
	for _, stage := range origin {
		found[stage]++
	}
	s := report.Search{
		Program: h.Program, Model: strings.Join(h.Models, "; "), Digest: h.Digest[:min(10, len(h.Digest))],
		Evaluations: n.Evaluations, Failed: n.Failed, TimedOut: n.TimedOut, Feasible: n.Feasible, Reused: n.Reused, Final: n.Final,
		Stages: report.Stages(past, found), Stretches: report.Stretches(past), History: report.History(past),
	}
	s.Planned, _ = decided(ds)
	for i, d := range ds {
		if i == 0 {
			s.Started = d.At
		}
		var x stopDetail
		switch d.Kind {
		case journal.Start:
			s.Stopped = ""
		case journal.Stop:
			if json.Unmarshal(d.Detail, &x) == nil {
				s.Stopped, s.Seconds = x.Reason, s.Seconds+x.Seconds
			}
		case journal.Finish:
			s.Finished = true
		case journal.Extension:
			s.Finished = false
		}
	}
	return s, nil
}

// addSheets settles which designs get a sheet.
func addSheets(r *report.Run, past []optimize.Evaluation) {
	if len(r.Table.Members) == 0 {
		r.Near = folder.NearTable(r.Problem, past, r.Brief.Seed)
		for i := range min(mostNearSheets, len(r.Near.Members)) {
			r.Sheets = append(r.Sheets, report.Sheet{Member: &r.Near.Members[i]})
		}
		return
	}
	named := slices.Sorted(maps.Keys(r.Chosen))
	if r.Knee != "" {
		named = append(named, r.Knee)
	}
	for _, i := range report.Pick(r.Problem, r.Table, named, mostSheets) {
		r.Sheets = append(r.Sheets, report.Sheet{Member: &r.Table.Members[i]})
	}
}

// simulateSheets answers the designs with a sheet, as many at a time as there
// are processors. A design that cannot be answered says so on its sheet.
func simulateSheets(ctx context.Context, s streams, r *report.Run) error {
	show := newProgress(s)
	defer show.end()
	var wait sync.WaitGroup
	var guard sync.Mutex
	done := 0
	free := make(chan struct{}, runtime.NumCPU())
	for i := range r.Sheets {
		free <- struct{}{}
		wait.Go(func() {
			defer func() { <-free }()
			simulateSheet(ctx, r, &r.Sheets[i])
			guard.Lock()
			defer guard.Unlock()
			done++
			show.show(standing{stage: "simulating the report's sheets", done: done, total: len(r.Sheets), front: len(r.Table.Members)})
		})
	}
	wait.Wait()
	return ctx.Err()
}

// simulateSheet answers one design over the band and its surroundings; where
// these cannot be answered, over the band alone.
func simulateSheet(ctx context.Context, r *report.Run, sheet *report.Sheet) {
	d := sheet.Member.Design
	curve, err := helix.Wind(&d)
	if err != nil {
		sheet.Err = err.Error()
		return
	}
	sheet.Wire, sheet.Laws = wireOf(curve), lawsOf(curve)
	rung, band := r.Problem.Finest(), r.Problem.Band
	ask := func(hz []float64, what models.Outputs) (models.Response, error) {
		q := models.Question{Hz: hz, Outputs: what}
		if r.Problem.Cone > 0 && what != models.Axis {
			q.Outputs |= models.Cone
			q.Cone = r.Problem.Cone
		}
		return rung.Simulator.Simulate(ctx, d, q)
	}
	const all = models.Axis | models.Cuts | models.Balance | models.Spread | models.Pattern
	hz, in := surroundings(band)
	answer, err := ask(hz, all)
	if err != nil {
		hz, in = hz[in[0]:in[2]+1], [3]int{0, in[1] - in[0], in[2] - in[0]}
		answer, err = ask(hz, all)
	}
	if err != nil {
		sheet.Err = firstLine(err.Error())
		return
	}
	if ends, err := ask(slices.Compact([]float64{band.From, band.To}), models.Axis); err == nil {
		// What leaves the model's range is told of the band alone.
		answer.Warnings = ends.Warnings
	}
	sheet.Band, sheet.Pattern = in, answer.Samples[in[1]].Pattern
	for i := range answer.Samples {
		answer.Samples[i].Pattern = nil // but for mid-band nobody looks at it
	}
	hand, err := closedform.HandFormulas(&d, band.Mid())
	if err != nil {
		sheet.Err = err.Error()
		return
	}
	inBand := answer
	inBand.Samples = answer.Samples[in[0] : in[2]+1]
	sheet.Simulation = &report.Simulation{
		Design: d, Model: rung.Model, Fidelity: rung.Fidelity, Response: answer, Geometry: curve.Geometry(),
		ExcessPhase: curve.ExcessPhase(band.To), Figures: objectives.Read(&d, curve.Geometry(), &inBand),
		Hand: report.HandFigures(hand), DesignJSON: d,
	}
	if objectives.WrongSense(&d, &inBand) {
		sheet.Simulation.Warnings = append(sheet.Simulation.Warnings, fmt.Sprintf("somewhere in the band it radiates the %s-hand sense on the axis", -d.Wanted()))
	}
}

// wireSteps is how many straight pieces a turn is drawn in.
const wireSteps = 48

// wireOf is the centre line from the plane to the open end.
func wireOf(c *helix.Curve) [][3]float64 {
	foot := c.At(0).Pos
	wire := [][3]float64{{foot.X, foot.Y, 0}}
	n := int(math.Ceil(c.Turns() * wireSteps))
	for i := range n + 1 {
		p := c.At(c.Turns() * float64(i) / float64(n)).Pos
		wire = append(wire, [3]float64{p.X, p.Y, p.Z})
	}
	return wire
}

// lawsOf are diameter and spacing along the winding, at every break of the
// laws twice, so that a jump stands upright.
func lawsOf(c *helix.Curve) [][3]float64 {
	var laws [][3]float64
	put := func(t float64) { laws = append(laws, [3]float64{t, c.Diameter(t), c.Spacing(t)}) }
	n := int(math.Ceil(c.Turns() * 8))
	for i := range n + 1 {
		put(c.Turns() * float64(i) / float64(n))
	}
	for _, t := range c.Breaks() {
		put(math.Max(t-1e-6, 0))
		put(math.Min(t+1e-6, c.Turns()))
	}
	slices.SortFunc(laws, func(a, b [3]float64) int { return cmp.Compare(a[0], b[0]) })
	return laws
}

// Reach of a sheet's sweep to either side of mid-band: three times the
// band's own half, within bounds.
const (
	leastReach = 0.05
	mostReach  = 0.10
	outside    = 12 // frequencies on either side of the band
)

// surroundings lists a sheet's frequencies: the confirming sweep of the band
// with its middle, and as far again on either side as tells how the design
// leaves it. It also gives the band's ends and middle among them.
func surroundings(b models.Band) (hz []float64, in [3]int) {
	mid := b.Mid()
	own := (b.To - b.From) / 2 / mid
	reach := mid * max(min(max(3*own, leastReach), mostReach), 1.25*own)
	for i := range outside {
		hz = append(hz, mid-reach+(b.From-mid+reach)*float64(i)/outside)
	}
	in[0] = len(hz)
	hz = append(hz, objectives.FineSweep(b)...)
	at, _ := slices.BinarySearch(hz, mid*(1-1e-9))
	if hz[at] > mid*(1+1e-9) {
		hz = slices.Insert(hz, at, mid)
	}
	in[1], in[2] = at, len(hz)-1
	for i := range outside {
		hz = append(hz, b.To+(mid+reach-b.To)*float64(i+1)/outside)
	}
	return hz, in
}
