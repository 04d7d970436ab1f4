package journal

import (
	"context"
	"database/sql"
	"fmt"
	"math"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// Growth is how far the front had come when so many evaluations were on
// record, in the order of finishing.
type Growth struct {
	Evaluations int // however they ended
	Front       int // members
	// Hypervolume of the front, against Reference; it never falls. NaN with
	// more than three aims, where it would take too long.
	Hypervolume float64
	// Reference is the worst of each aim that anything feasible had; nil
	// while nothing was.
	Reference []float64
}

// growthTable is also laid into journals that were begun without it.
const growthTable = `
CREATE TABLE IF NOT EXISTS growth (
	evaluations INTEGER PRIMARY KEY,
	front INTEGER NOT NULL,
	hypervolume REAL,
	reference TEXT NOT NULL CHECK (json_valid(reference))
) STRICT;
`

// How often growth is kept: after every evaluation at first, then after every
// fiftieth part more.
const growthPart = 50

// mostMeasured is the number of aims up to which the hypervolume is computed.
const mostMeasured = 3

// grown follows the front of the finest rung.
type grown struct {
	count, next int // evaluations; those after which growth is kept again
	front       front.Archive
}

// take counts an evaluation, and shows it to the front if it is of the finest
// rung.
func (g *grown) take(e *optimize.Evaluation, finest int) {
	g.skip(g.count + 1)
	if e.Rung == finest && ranks(e) {
		g.front.Insert(e.ID, e.Value())
	}
}

// skip counts evaluations up to n.
func (g *grown) skip(n int) {
	for g.count = n; g.next < n; {
		g.next += max(1, g.next/growthPart)
	}
}

// due reports whether growth is to be kept now.
func (g *grown) due() bool { return g.count > 0 && g.count == g.next }

func (g *grown) growth() Growth {
	now := Growth{Evaluations: g.count, Front: g.front.Len(), Reference: g.front.Reference(), Hypervolume: math.NaN()}
	if len(now.Reference) <= mostMeasured {
		now.Hypervolume = g.front.Hypervolume()
	}
	return now
}

// keepGrowth writes how far the front has come.
func (w *Writer) keepGrowth(tx *sql.Tx, g Growth) error {
	if g.Evaluations == 0 {
		return nil
	}
	_, err := tx.Exec("INSERT OR IGNORE INTO growth VALUES (?, ?, ?, ?)", g.Evaluations, g.Front, number(g.Hypervolume), list(g.Reference))
	return err
}

// rememberGrowth reads back what the front of what entered it does not tell:
// how many evaluations there are, and the worst that was feasible.
func (w *Writer) rememberGrowth() error {
	query := "SELECT count(*)"
	worst := make([]sql.NullFloat64, len(w.header.Aims))
	var count int
	into := []any{&count}
	for m := range worst {
		query += fmt.Sprintf(", max(a%d) FILTER (WHERE violation <= 0 AND rung = %d)", m+1, w.header.finest())
		into = append(into, &worst[m])
	}
	if err := w.db.QueryRow(query + " FROM evaluation WHERE final = 0").Scan(into...); err != nil {
		return err
	}
	if w.grown.front.Len() > 0 {
		aims := make([]float64, len(worst))
		for m := range worst {
			aims[m] = worst[m].Float64
		}
		w.grown.front.Insert(math.MaxInt, front.Value{Aims: aims}) // covered: it only widens the reference
	}
	w.grown.skip(count)
	return nil
}

// Growth tells how the front grew, from the first evaluation to the latest
// decision. Of a journal that was begun without it, it is worked out from the
// evaluations.
func (r *Reader) Growth(ctx context.Context) ([]Growth, error) {
	there, err := r.keepsGrowth(ctx)
	if err != nil {
		return nil, err
	}
	if !there {
		return r.retrace(ctx)
	}
	rows, err := r.db.QueryContext(ctx, "SELECT evaluations, front, hypervolume, reference FROM growth ORDER BY evaluations")
	if err != nil {
		return nil, r.wrong(ctx, err)
	}
	defer rows.Close()
	var all []Growth
	for rows.Next() {
		var g Growth
		var volume sql.NullFloat64
		var reference string
		if err := rows.Scan(&g.Evaluations, &g.Front, &volume, &reference); err != nil {
			return nil, r.wrong(ctx, err)
		}
		g.Hypervolume = math.NaN()
		if volume.Valid {
			g.Hypervolume = volume.Float64
		}
		if g.Reference, err = unlist[float64](reference); err != nil {
			return nil, damaged(r.path, "growth after %d evaluations: %w", g.Evaluations, err)
		}
		all = append(all, g)
	}
	return all, r.wrong(ctx, rows.Err())
}

// keepsGrowth reports whether the journal was begun with growth.
func (r *Reader) keepsGrowth(ctx context.Context) (there bool, err error) {
	err = r.db.QueryRowContext(ctx, "SELECT count(*) FROM sqlite_master WHERE name = 'growth'").Scan(&there)
	return there, r.wrong(ctx, err)
}

// retrace works growth out of the evaluations.
func (r *Reader) retrace(ctx context.Context) ([]Growth, error) {
	var g grown
	var all []Growth
	for e, err := range r.Since(ctx, 0) {
		if err != nil {
			return nil, err
		}
		if e.Final {
			continue
		}
		g.take(&e.Evaluation, r.header.finest())
		if g.due() {
			all = append(all, g.growth())
		}
	}
	if g.count > 0 && !g.due() {
		all = append(all, g.growth())
	}
	return all, nil
}

// layGrowth gives a journal that was begun without growth what it would have
// of it.
func (w *Writer) layGrowth() error {
	ctx := context.Background()
	if there, err := w.keepsGrowth(ctx); err != nil || there {
		return err
	}
	past, err := w.retrace(ctx)
	if err != nil {
		return err
	}
	return w.transact(func(tx *sql.Tx) error {
		if _, err := tx.Exec(growthTable); err != nil {
			return err
		}
		for _, g := range past {
			if err := w.keepGrowth(tx, g); err != nil {
				return err
			}
		}
		return nil
	})
}
