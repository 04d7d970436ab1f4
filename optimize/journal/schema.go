package journal

import (
	"fmt"
	"strings"
)

const (
	applicationID = 0x54774A6C
	schemaVersion = 1
)

const tables = `
CREATE TABLE run (
	id INTEGER PRIMARY KEY CHECK (id = 1),
	brief TEXT NOT NULL, digest TEXT NOT NULL, program TEXT NOT NULL,
	seed INTEGER NOT NULL, machine TEXT NOT NULL, created_us INTEGER NOT NULL,
	models TEXT NOT NULL, variables TEXT NOT NULL, figures TEXT NOT NULL,
	aims TEXT NOT NULL, limits TEXT NOT NULL
) STRICT;
CREATE TABLE model (id INTEGER PRIMARY KEY, identity TEXT NOT NULL UNIQUE) STRICT;
CREATE TABLE answer (
	id INTEGER PRIMARY KEY,
	key TEXT NOT NULL UNIQUE,
	design TEXT NOT NULL,
	model INTEGER NOT NULL REFERENCES model,
	response BLOB
) STRICT;
CREATE TABLE decision (
	seq INTEGER PRIMARY KEY,
	kind TEXT NOT NULL,
	detail TEXT NOT NULL CHECK (json_valid(detail)),
	evaluations INTEGER NOT NULL,
	at_us INTEGER NOT NULL
) STRICT;
CREATE TABLE evaluation (
	seq INTEGER PRIMARY KEY,
	candidate INTEGER NOT NULL,
	final INTEGER NOT NULL,
	rung INTEGER NOT NULL,
	stage TEXT NOT NULL,
	status TEXT NOT NULL CHECK (status IN ('ok', 'failed', 'timed out')),
	reason TEXT,
	duration_ns INTEGER NOT NULL,
	reused INTEGER NOT NULL,
	finished_us INTEGER NOT NULL,
	violation ANY,
	entered INTEGER NOT NULL,
	answers TEXT,
	parts INTEGER NOT NULL%s
) STRICT;
CREATE UNIQUE INDEX evaluation_candidate ON evaluation (candidate) WHERE final = 0;
CREATE INDEX evaluation_final ON evaluation (candidate) WHERE final = 1;
CREATE INDEX evaluation_entered ON evaluation (rung) WHERE entered = 1;
` + growthTable

// views does not hold evaluations and front, which depend on the header.
const views = `
CREATE VIEW answers AS
	SELECT a.id, a.key, a.design, m.identity AS model, CAST(a.response AS TEXT) AS response
	FROM answer a JOIN model m ON m.id = a.model;
CREATE VIEW questions AS
	SELECT e.seq, e.candidate, j.key + 1 AS position, a.key AS question, a.design, a.model, a.response
	FROM evaluation e, json_each(e.answers) j JOIN answers a ON a.id = j.value;
CREATE VIEW decisions AS
	SELECT seq, kind, detail, evaluations, %s AS at FROM decision;
CREATE VIEW failures AS
	SELECT status, reason, count(*) AS evaluations FROM evaluation
	WHERE status <> 'ok' GROUP BY status, reason ORDER BY count(*) DESC, reason;
`

// schema is the whole of the data definition for a header.
func (h *Header) schema() string {
	var numbers strings.Builder
	for _, c := range h.numberColumns() {
		numbers.WriteString(",\n\t" + c + " ANY")
	}
	return fmt.Sprintf(tables, numbers.String()) + fmt.Sprintf(views, isoTime("at_us")) +
		h.evaluationsView() + h.frontView() +
		fmt.Sprintf("PRAGMA application_id = %d;\nPRAGMA user_version = %d;\n", applicationID, schemaVersion)
}

// numberColumns names the columns of doubles: point, figures, aims, limits.
func (h *Header) numberColumns() []string {
	cs := make([]string, 0, h.numbers())
	add := func(letter string, n int) {
		for i := range n {
			cs = append(cs, fmt.Sprintf("%s%d", letter, i+1))
		}
	}
	add("p", len(h.Variables))
	add("f", len(h.Figures))
	add("a", len(h.Aims))
	add("l", len(h.Limits))
	return cs
}

func (h *Header) evaluationsView() string {
	var b strings.Builder
	b.WriteString("CREATE VIEW evaluations AS\n\tSELECT ")
	for i, c := range h.columns() {
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%s AS \"%s\"", c.from, c.name)
	}
	b.WriteString("\n\tFROM evaluation e LEFT JOIN answer w ON w.id = e.answers ->> 0 LEFT JOIN model m ON m.id = w.model;\n")
	return b.String()
}

// frontRows selects the rows of the front. What was dominated when it came
// is dominated for good, by something that entered, so only entered rows are
// compared; a candidate that was simulated again counts by its last final
// figures, whatever it was before.
func (h *Header) frontRows() string {
	var aims, notWorse, better strings.Builder
	for i := range h.Aims {
		a := fmt.Sprintf("a%d", i+1)
		aims.WriteString(", " + a)
		fmt.Fprintf(&notWorse, "o.%s <= m.%s AND ", a, a)
		fmt.Fprintf(&better, "o.%s < m.%s OR ", a, a)
	}
	return fmt.Sprintf(`WITH member AS MATERIALIZED (
		SELECT seq, candidate%s FROM evaluation WHERE violation <= 0 AND seq IN (
			SELECT seq FROM evaluation WHERE entered = 1 AND rung = %d
				AND candidate NOT IN (SELECT candidate FROM evaluation WHERE final = 1)
			UNION ALL SELECT max(seq) FROM evaluation WHERE final = 1 GROUP BY candidate))
	SELECT m.seq FROM member m WHERE NOT EXISTS (
		SELECT 1 FROM member o WHERE %s(%so.candidate < m.candidate))`,
		aims.String(), h.finest(), notWorse.String(), better.String())
}

func (h *Header) frontView() string {
	return "CREATE VIEW front AS\n\tSELECT * FROM evaluations WHERE seq IN (" + h.frontRows() +
		")\n\tORDER BY \"aim_" + h.Aims[0] + "\", candidate;\n"
}
