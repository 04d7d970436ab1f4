package journal

import (
	"encoding/json"
	"fmt"
	"math/rand"
	"os"
	"path/filepath"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

// night is a header as wide as a large brief gives, and nightRow an
// evaluation of it with the answer of a full-wave sweep over five
// frequencies.
func night() Header {
	h := Header{Brief: "title: weather balloon\n", Models: []string{"full-wave standard 1"}}
	for i := range 9 {
		h.Variables = append(h.Variables, Variable{Name: fmt.Sprint("v", i)})
	}
	for i := range 18 {
		h.Figures = append(h.Figures, fmt.Sprint("f", i))
	}
	h.Aims = []string{"gain", "length"}
	h.Limits = []string{"axial_ratio", "vswr", "length", "widest", "wire_length"}
	return h
}

func nightRow(id int, r *rand.Rand) optimize.Evaluation {
	numbers := func(n int) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = r.Float64()
		}
		return x
	}
	type sample struct {
		FrequencyHz float64    `json:"frequency_hz"`
		PortOhm     [2]float64 `json:"port_ohm"`
		InputOhm    [2]float64 `json:"input_ohm"`
		Gain        [2]float64 `json:"gain"`
		AxialRatio  float64    `json:"axial_ratio_db"`
		Sense       string     `json:"sense"`
		Directivity float64    `json:"directivity"`
		Efficiency  float64    `json:"efficiency"`
		Peak        float64    `json:"peak_directivity"`
		Beamwidth   float64    `json:"beamwidth_rad"`
		Sidelobe    float64    `json:"sidelobe_db"`
		Rear        float64    `json:"rear_gain"`
	}
	var response struct {
		Samples []sample `json:"samples"`
	}
	for i := range 5 {
		x := numbers(14)
		response.Samples = append(response.Samples, sample{1.66e9 + 1e7*float64(i), [2]float64{140 * x[0], x[1]}, [2]float64{50 * x[2], x[3]},
			[2]float64{15 * x[4], x[5]}, x[6], "right", 16 * x[7], x[8], 16 * x[9], x[10], -13 * x[11], x[12]})
	}
	js, err := json.Marshal(response)
	if err != nil {
		panic(err)
	}
	return optimize.Evaluation{
		Candidate: optimize.Candidate{ID: id, Point: space.Point(numbers(9)), From: "genetic"},
		Score: optimize.Score{Figures: numbers(18), Aims: numbers(2), Limits: numbers(5),
			Answers: []optimize.Answer{{Key: key("q", id), Design: key("d", id), Model: "full-wave standard 1", Response: js}}},
		Status: optimize.OK, Duration: 80 * time.Millisecond,
	}
}

// size is how many bytes an evaluation is made of.
func size(e *optimize.Evaluation) int {
	n := 8*(len(e.Point)+len(e.Figures)+len(e.Aims)+len(e.Limits)+5) + len(e.From) + len(e.Status)
	for _, a := range e.Answers {
		n += len(a.Key) + len(a.Design) + len(a.Response) + 8
	}
	return n
}

// BenchmarkJournal compares, on the disk of the temporary folder, one row a
// commit with appending the same bytes to a plain file and syncing it, and
// groups of 64 waiting rows with one row a commit. The three take turns, so
// that a disk shared with others is as slow for each.
func BenchmarkJournal(b *testing.B) {
	const turn, group = 64, 64
	dir := b.TempDir()
	w, err := Create(filepath.Join(dir, File), night())
	must(b, err)
	defer w.Close()
	plain, err := os.Create(filepath.Join(dir, "plain"))
	must(b, err)
	defer plain.Close()
	r := rand.New(rand.NewSource(1))
	var single, grouped, appended time.Duration
	var rows, groupRows, id, bytes int
	for b.Loop() {
		rowsOf := func(n int) []optimize.Evaluation {
			evs := make([]optimize.Evaluation, n)
			for i := range evs {
				evs[i] = nightRow(id, r)
				id++
				bytes += size(&evs[i])
			}
			return evs
		}
		one, many := rowsOf(turn), rowsOf(8*group)
		start := time.Now()
		for i := range one {
			must(b, w.Record(one[i:i+1]))
		}
		single += time.Since(start)
		start = time.Now()
		for i := 0; i < len(many); i += group {
			must(b, w.Record(many[i:i+group]))
		}
		grouped += time.Since(start)
		start = time.Now()
		for i := range one {
			_, err := plain.Write(make([]byte, size(&one[i])))
			must(b, err)
			must(b, plain.Sync())
		}
		appended += time.Since(start)
		rows, groupRows = rows+turn, groupRows+len(many)
	}
	rate := func(n int, d time.Duration) float64 { return float64(n) / d.Seconds() }
	s, g, a := rate(rows, single), rate(groupRows, grouped), rate(rows, appended)
	b.ReportMetric(a, "synced-appends/s")
	b.ReportMetric(s, "single/s")
	b.ReportMetric(g, "grouped/s")
	b.ReportMetric(s/a, "single/append")
	b.ReportMetric(g/s, "grouped/single")
	b.ReportMetric(g/a, "grouped/append")
	c, err := w.Counts(ctx)
	must(b, err)
	b.ReportMetric(float64(c.Bytes)/float64(id), "disk-B/row")
	b.ReportMetric(float64(bytes)/float64(id), "payload-B/row")
}
