package journal

import (
	"context"
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
	"iter"
	"math"
	"time"

	"turnwise/optimize"
)

const answerQuery = `SELECT a.key, a.design, m.identity, a.response
	FROM answer a JOIN model m ON m.id = a.model WHERE a.key = ? AND a.response IS NOT NULL`

// pageRows is how many rows one query fetches: no look at the journal holds
// a snapshot for longer, so the writer can always fold its log in.
const pageRows = 2048

// Since streams what was recorded after the entry with number seq, in the
// order of recording, without answers. Rows that are added meanwhile are
// included.
func (r *Reader) Since(ctx context.Context, seq int64) iter.Seq2[Entry, error] {
	return r.entriesContext(ctx, "seq > ?", "seq", seq)
}

// InOrder streams the search's evaluations by candidate, without answers and
// without the final ones.
func (r *Reader) InOrder(ctx context.Context) iter.Seq2[Entry, error] {
	return r.entriesContext(ctx, "final = 0 AND candidate > ?", "candidate", -1)
}

// Past gives the search's evaluations by candidate, bit for bit as they were
// recorded but without their answers: what a search that resumes is told.
func (r *Reader) Past(ctx context.Context) ([]optimize.Evaluation, error) {
	var past []optimize.Evaluation
	for e, err := range r.InOrder(ctx) {
		if err != nil {
			return nil, err
		}
		past = append(past, e.Evaluation)
	}
	return past, nil
}

// Final gives the last final evaluation of each candidate that has one, by
// candidate, without answers.
func (r *Reader) Final(ctx context.Context) ([]optimize.Evaluation, error) {
	var past []optimize.Evaluation
	for e, err := range r.entriesContext(ctx, `final = 1 AND candidate > ? AND seq =
		(SELECT max(f.seq) FROM evaluation f WHERE f.final = 1 AND f.candidate = evaluation.candidate)`, "candidate", -1) {
		if err != nil {
			return nil, err
		}
		past = append(past, e.Evaluation)
	}
	return past, nil
}

// Front gives the entries of the view front: best first by the first aim,
// ties by candidate.
func (r *Reader) Front(ctx context.Context) ([]Entry, error) {
	rows, err := r.db.QueryContext(ctx, "SELECT seq, "+r.insert+" FROM evaluation WHERE seq IN ("+
		r.header.frontRows()+") ORDER BY a1, candidate")
	if err != nil {
		return nil, fault(r.path, err)
	}
	return r.scan(ctx, rows)
}

func (r *Reader) entries(where, by string, after int64) iter.Seq2[Entry, error] {
	return r.entriesContext(context.Background(), where, by, after)
}

// entriesContext pages through the rows that meet a condition; its one
// parameter and the order are the column by.
func (r *Reader) entriesContext(ctx context.Context, where, by string, after int64) iter.Seq2[Entry, error] {
	query := fmt.Sprintf("SELECT seq, %s FROM evaluation WHERE %s ORDER BY %s LIMIT %d", r.insert, where, by, pageRows)
	return func(yield func(Entry, error) bool) {
		for at := after; ; {
			page, err := r.page(ctx, query, at)
			if err != nil {
				yield(Entry{}, err)
				return
			}
			for i := range page {
				if !yield(page[i], nil) {
					return
				}
			}
			if len(page) < pageRows {
				return
			}
			last := &page[len(page)-1]
			if at = last.Seq; by == "candidate" {
				at = int64(last.ID)
			}
		}
	}
}

func (r *Reader) page(ctx context.Context, query string, after int64) ([]Entry, error) {
	rows, err := r.db.QueryContext(ctx, query, after)
	if err != nil {
		return nil, r.wrong(ctx, err)
	}
	return r.scan(ctx, rows)
}

// wrong tells the end of a context from a fault of the file.
func (r *Reader) wrong(ctx context.Context, err error) error {
	if err == nil {
		return nil
	}
	if ctx.Err() != nil {
		return ctx.Err()
	}
	return fault(r.path, err)
}

// scan takes in rows of seq and the columns of an evaluation.
func (r *Reader) scan(ctx context.Context, rows *sql.Rows) ([]Entry, error) {
	defer rows.Close()
	cells := make([]any, 1+fixedCount+r.header.numbers())
	into := make([]any, len(cells))
	for i := range cells {
		into[i] = &cells[i]
	}
	var page []Entry
	for rows.Next() {
		if err := rows.Scan(into...); err != nil {
			return nil, r.wrong(ctx, err)
		}
		e, err := r.entry(cells)
		if err != nil {
			return nil, err
		}
		page = append(page, e)
	}
	if err := rows.Err(); err != nil {
		return nil, r.wrong(ctx, err)
	}
	return page, nil
}

// entry turns a row into what was recorded.
func (r *Reader) entry(cells []any) (Entry, error) {
	c := cursor{cells: cells}
	e := Entry{Seq: c.whole()}
	e.ID, e.Final, e.Rung = int(c.whole()), c.whole() == 1, int(c.whole())
	e.From, e.Status, e.Err = c.text(), optimize.Status(c.text()), c.text()
	e.Duration, e.Reused = time.Duration(c.whole()), c.whole() == 1
	e.Finished = time.UnixMicro(c.whole()).UTC()
	c.skip(3) // violation and entered follow from the rest, answers are read apart
	parts := c.whole()
	h := &r.header
	all := make([]float64, h.numbers())
	for i := range all {
		all[i] = c.number()
	}
	if c.wrong {
		return Entry{}, damaged(r.path, "row %d of evaluation holds a value of the wrong type", e.Seq)
	}
	cut := func(n int, keep bool) []float64 {
		x := all[:n:n]
		all = all[n:]
		if !keep || n == 0 {
			return nil
		}
		return x
	}
	e.Point = cut(len(h.Variables), true)
	e.Figures = cut(len(h.Figures), parts&hasFigures != 0)
	e.Aims = cut(len(h.Aims), parts&hasAims != 0)
	e.Limits = cut(len(h.Limits), parts&hasLimits != 0)
	return e, nil
}

// cursor walks along the cells of a row; a type that cannot be sets wrong.
type cursor struct {
	cells []any
	wrong bool
}

func (c *cursor) next() any {
	v := c.cells[0]
	c.cells = c.cells[1:]
	return v
}

func (c *cursor) skip(n int) { c.cells = c.cells[n:] }

func (c *cursor) whole() int64 {
	v, ok := c.next().(int64)
	c.wrong = c.wrong || !ok
	return v
}

func (c *cursor) text() string {
	switch v := c.next().(type) {
	case string:
		return v
	case nil:
		return ""
	}
	c.wrong = true
	return ""
}

func (c *cursor) number() float64 {
	switch v := c.next().(type) {
	case float64:
		return v
	case nil:
		return math.NaN()
	}
	c.wrong = true
	return 0
}

// Answer finds what was said to the question with that key. Safe for any
// number of workers at once.
func (r *Reader) Answer(ctx context.Context, key string) (a optimize.Answer, found bool, err error) {
	err = r.answer.QueryRowContext(ctx, key).Scan(&a.Key, &a.Design, &a.Model, &a.Response)
	switch {
	case errors.Is(err, sql.ErrNoRows):
		return optimize.Answer{}, false, nil
	case err != nil:
		return optimize.Answer{}, false, r.wrong(ctx, err)
	}
	return a, true, nil
}

// Questions gives the answers that one entry rested on, in order. Response
// is empty where the simulator did not answer.
func (r *Reader) Questions(ctx context.Context, seq int64) ([]optimize.Answer, error) {
	rows, err := r.db.QueryContext(ctx, `SELECT a.key, a.design, m.identity, a.response
		FROM evaluation e, json_each(e.answers) j JOIN answer a ON a.id = j.value JOIN model m ON m.id = a.model
		WHERE e.seq = ? ORDER BY j.key`, seq)
	if err != nil {
		return nil, r.wrong(ctx, err)
	}
	defer rows.Close()
	var answers []optimize.Answer
	for rows.Next() {
		var a optimize.Answer
		if err := rows.Scan(&a.Key, &a.Design, &a.Model, &a.Response); err != nil {
			return nil, r.wrong(ctx, err)
		}
		answers = append(answers, a)
	}
	return answers, r.wrong(ctx, rows.Err())
}

// Kinds of decisions that a reader looks for; any other word may be one too.
const (
	Start     = "start"     // a session of the search
	Extension = "extension" // of the budget
	Stop      = "stop"      // of a session, with its reason
	Finish    = "finish"    // of the whole run: nothing is left to do
)

// Decision is what a clock or a person decided about a run.
type Decision struct {
	Seq    int64
	Kind   string
	Detail json.RawMessage
	After  int64 // number of the last entry before it; 0: none
	At     time.Time
}

// Decisions lists all decisions in order.
func (r *Reader) Decisions(ctx context.Context) ([]Decision, error) {
	return r.decisionsSince(ctx, 0)
}

func (r *Reader) decisionsSince(ctx context.Context, seq int64) ([]Decision, error) {
	rows, err := r.db.QueryContext(ctx, "SELECT seq, kind, detail, evaluations, at_us FROM decision WHERE seq > ? ORDER BY seq", seq)
	if err != nil {
		return nil, r.wrong(ctx, err)
	}
	defer rows.Close()
	var ds []Decision
	for rows.Next() {
		var d Decision
		var detail string
		var at int64
		if err := rows.Scan(&d.Seq, &d.Kind, &detail, &d.After, &at); err != nil {
			return nil, r.wrong(ctx, err)
		}
		d.Detail, d.At = json.RawMessage(detail), time.UnixMicro(at).UTC()
		ds = append(ds, d)
	}
	return ds, r.wrong(ctx, rows.Err())
}

// Counts says how much there is of everything. Final evaluations count in
// Final alone.
type Counts struct {
	Evaluations int // of the search, however they ended
	OK          int
	Failed      int
	TimedOut    int
	Reused      int
	Feasible    int // of OK
	Final       int
	Answers     int // questions that were answered
	Decisions   int
	Bytes       int64 // of the file, without its log
}

// Counts counts afresh.
func (r *Reader) Counts(ctx context.Context) (Counts, error) {
	var c Counts
	err := r.db.QueryRowContext(ctx, `SELECT
		count(*) FILTER (WHERE final = 0),
		count(*) FILTER (WHERE final = 0 AND status = 'ok'),
		count(*) FILTER (WHERE final = 0 AND status = 'failed'),
		count(*) FILTER (WHERE final = 0 AND status = 'timed out'),
		count(*) FILTER (WHERE final = 0 AND reused = 1),
		count(*) FILTER (WHERE final = 0 AND violation <= 0),
		count(*) FILTER (WHERE final = 1),
		(SELECT count(*) FROM answer WHERE response IS NOT NULL),
		(SELECT count(*) FROM decision),
		(SELECT page_count * page_size FROM pragma_page_count, pragma_page_size)
		FROM evaluation`).Scan(&c.Evaluations, &c.OK, &c.Failed, &c.TimedOut, &c.Reused, &c.Feasible,
		&c.Final, &c.Answers, &c.Decisions, &c.Bytes)
	return c, r.wrong(ctx, err)
}

// Verify reads the whole file and names any damage it finds.
func (r *Reader) Verify(ctx context.Context) error {
	var first string
	if err := r.db.QueryRowContext(ctx, "PRAGMA quick_check(1)").Scan(&first); err != nil {
		return r.wrong(ctx, err)
	}
	if first != "ok" {
		return damaged(r.path, "%s", first)
	}
	return nil
}
