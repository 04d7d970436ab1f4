package journal

import (
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// fixedColumns are the columns of an evaluation before its numbers, without
// seq.
const fixedColumns = "candidate final rung stage status reason duration_ns reused finished_us violation entered answers parts"

// fixedCount is their number.
var fixedCount = len(strings.Fields(fixedColumns))

// What a score held, in the column parts.
const (
	hasFigures = 1 << iota
	hasAims
	hasLimits
)

// statements are what a writer does over and over.
type statements struct {
	evaluation, answer, answerID, late, model, modelID, decision *sql.Stmt
}

func (w *Writer) prepare() error {
	n := fixedCount + w.header.numbers()
	marks := strings.TrimSuffix(strings.Repeat("?, ", n), ", ")
	var errs []error
	make := func(query string) *sql.Stmt {
		s, err := w.db.Prepare(query)
		errs = append(errs, err)
		return s
	}
	w.stmts = statements{
		evaluation: make("INSERT INTO evaluation (" + w.insert + ") VALUES (" + marks + ")"),
		answer:     make("INSERT INTO answer (key, design, model, response) VALUES (?, ?, ?, ?) ON CONFLICT (key) DO NOTHING"),
		answerID:   make("SELECT id, response IS NULL FROM answer WHERE key = ?"),
		late:       make("UPDATE answer SET response = ? WHERE id = ?"),
		model:      make("INSERT INTO model (identity) VALUES (?)"),
		modelID:    make("SELECT id FROM model WHERE identity = ?"),
		decision: make(`INSERT INTO decision (kind, detail, evaluations, at_us)
			VALUES (?, ?, (SELECT coalesce(max(seq), 0) FROM evaluation), ?)`),
	}
	return errors.Join(errs...)
}

func (s *statements) close() error {
	var errs []error
	for _, st := range []*sql.Stmt{s.evaluation, s.answer, s.answerID, s.late, s.model, s.modelID, s.decision} {
		if st != nil {
			errs = append(errs, st.Close())
		}
	}
	return errors.Join(errs...)
}

// Record appends finished evaluations in their order, as one transaction: on
// return all are on the disk, or with an error none is, and the same call
// may be made again. Each candidate is recorded once. Infinities are refused;
// NaN is kept.
func (w *Writer) Record(evs []optimize.Evaluation) error { return w.append(evs, false) }

// RecordFinal appends evaluations of candidates of the front that were
// simulated again after the search. They do not count towards its budget,
// and the last one of a candidate counts.
func (w *Writer) RecordFinal(evs []optimize.Evaluation) error { return w.append(evs, true) }

func (w *Writer) append(evs []optimize.Evaluation, final bool) error {
	if len(evs) == 0 {
		return nil
	}
	if err := w.acceptable(evs); err != nil {
		return err
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	err := w.transact(func(tx *sql.Tx) error {
		ins := tx.Stmt(w.stmts.evaluation)
		args := make([]any, fixedCount+w.header.numbers())
		for i := range evs {
			answers, err := w.keep(tx, evs[i].Answers)
			if err != nil {
				return err
			}
			w.fill(args, &evs[i], final, answers)
			if _, err := ins.Exec(args...); err != nil {
				return fmt.Errorf("candidate %d: %w", evs[i].ID, err)
			}
			if final {
				continue
			}
			if w.grown.take(&evs[i], w.header.finest()); w.grown.due() {
				if err := w.keepGrowth(tx, w.grown.growth()); err != nil {
					return err
				}
			}
		}
		return nil
	})
	if err != nil {
		// What was noted of rows that are not there must go.
		return fault(w.path, errors.Join(err, w.remember()))
	}
	return nil
}

// transact runs do inside one durable transaction.
func (w *Writer) transact(do func(tx *sql.Tx) error) error {
	tx, err := w.db.Begin()
	if err != nil {
		return err
	}
	if err := do(tx); err != nil {
		// SQLite may have rolled back by itself, on a full disk for one.
		_ = tx.Rollback()
		return err
	}
	return tx.Commit()
}

// acceptable names every evaluation that the header does not describe.
func (w *Writer) acceptable(evs []optimize.Evaluation) error {
	h := &w.header
	var faults []error
	for i := range evs {
		e := &evs[i]
		check := func(what string, x []float64, n int, optional bool) {
			if len(x) != n && !(optional && len(x) == 0) {
				faults = append(faults, fmt.Errorf("journal: candidate %d has %d %s, the header names %d", e.ID, len(x), what, n))
			}
			for k, v := range x {
				if math.IsInf(v, 0) {
					faults = append(faults, fmt.Errorf("journal: candidate %d: number %d of its %s is infinite; an evaluation that ends so has failed", e.ID, k+1, what))
				}
			}
		}
		check("coordinates", e.Point, len(h.Variables), false)
		check("figures", e.Figures, len(h.Figures), e.Status != optimize.OK)
		check("aims", e.Aims, len(h.Aims), e.Status != optimize.OK)
		check("limits", e.Limits, len(h.Limits), e.Status != optimize.OK)
		if e.Status != optimize.OK && e.Status != optimize.Failed && e.Status != optimize.TimedOut {
			faults = append(faults, fmt.Errorf("journal: candidate %d has the unknown status %q", e.ID, e.Status))
		}
	}
	return errors.Join(faults...)
}

// fill lays an evaluation out as the arguments of its insertion.
func (w *Writer) fill(args []any, e *optimize.Evaluation, final bool, answers any) {
	var violation, reason any
	entered := false
	if e.Status == optimize.OK {
		violation = number(front.Violation(e.Limits))
		entered = !final && w.enter(e)
	}
	if e.Err != "" {
		reason = e.Err
	}
	parts := 0
	for i, x := range [][]float64{e.Figures, e.Aims, e.Limits} {
		if len(x) > 0 {
			parts |= hasFigures << i
		}
	}
	h := &w.header
	fixed := append(args[:0], e.ID, bit(final), e.Rung, e.From, string(e.Status), reason, int64(e.Duration),
		bit(e.Reused), w.now().UnixMicro(), violation, bit(entered), answers, parts)
	rest := put(fixed, e.Point, len(h.Variables))
	rest = put(rest, e.Figures, len(h.Figures))
	rest = put(rest, e.Aims, len(h.Aims))
	put(rest, e.Limits, len(h.Limits))
}

// put appends n numbers, all NULL where x is empty.
func put(args []any, x []float64, n int) []any {
	for i := range n {
		if i < len(x) {
			args = append(args, number(x[i]))
		} else {
			args = append(args, nil)
		}
	}
	return args
}

// number is NULL for NaN.
func number(x float64) any {
	if math.IsNaN(x) {
		return nil
	}
	return x
}

func bit(b bool) int {
	if b {
		return 1
	}
	return 0
}

// keep stores the answers that are new and gives the JSON list of the ids of
// all of them, nil for none.
func (w *Writer) keep(tx *sql.Tx, answers []optimize.Answer) (any, error) {
	if len(answers) == 0 {
		return nil, nil
	}
	ids := []byte{'['}
	for i := range answers {
		id, err := w.keepOne(tx, &answers[i])
		if err != nil {
			return nil, err
		}
		if i > 0 {
			ids = append(ids, ',')
		}
		ids = strconv.AppendInt(ids, id, 10)
	}
	return string(append(ids, ']')), nil
}

func (w *Writer) keepOne(tx *sql.Tx, a *optimize.Answer) (int64, error) {
	model, err := w.modelID(tx, a.Model)
	if err != nil {
		return 0, err
	}
	var response any
	if len(a.Response) > 0 {
		response = a.Response
	}
	res, err := tx.Stmt(w.stmts.answer).Exec(a.Key, a.Design, model, response)
	if err != nil {
		return 0, err
	}
	if n, err := res.RowsAffected(); err != nil || n > 0 {
		id, lerr := res.LastInsertId()
		return id, errors.Join(err, lerr)
	}
	var id int64
	var open bool
	if err := tx.Stmt(w.stmts.answerID).QueryRow(a.Key).Scan(&id, &open); err != nil {
		return 0, err
	}
	if open && response != nil {
		_, err = tx.Stmt(w.stmts.late).Exec(response, id)
	}
	return id, err
}

func (w *Writer) modelID(tx *sql.Tx, identity string) (int64, error) {
	if id, ok := w.models[identity]; ok {
		return id, nil
	}
	var id int64
	err := tx.Stmt(w.stmts.modelID).QueryRow(identity).Scan(&id)
	if errors.Is(err, sql.ErrNoRows) {
		res, ierr := tx.Stmt(w.stmts.model).Exec(identity)
		if ierr != nil {
			return 0, ierr
		}
		id, err = res.LastInsertId()
	}
	if err == nil {
		w.models[identity] = id
	}
	return id, err
}

// Decide records a decision that a clock or a person made. The detail is
// anything that has a JSON form; nil gives null.
func (w *Writer) Decide(kind string, detail any) error {
	js, err := json.Marshal(detail)
	if err != nil {
		return fmt.Errorf("journal: the detail of the decision %q has no JSON form: %w", kind, err)
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	return fault(w.path, w.transact(func(tx *sql.Tx) error {
		_, err := tx.Stmt(w.stmts.decision).Exec(kind, string(js), w.now().UnixMicro())
		return errors.Join(err, w.keepGrowth(tx, w.grown.growth()))
	}))
}

// Entry is an evaluation on record.
type Entry struct {
	Seq      int64 // position in the journal, from 1
	Final    bool  // simulated again for the final front
	Finished time.Time
	optimize.Evaluation
}
