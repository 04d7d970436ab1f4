package folder

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"strconv"
	"strings"

	"turnwise/models"
	"turnwise/objectives"
)

// Member is one design of a front, as a row of its table.
type Member struct {
	ID       string
	Varied   []string // in the order of the table's varied columns
	Figures  objectives.Row
	Model    string
	Fidelity string
	Checked  bool
	Seed     uint64

	// Violation is how far a design of near.csv breaks its limits.
	Violation float64
	// Design is the antenna itself; a table read from a file has none.
	Design models.Design
}

// Table is a front as people and scripts see it: best first.
type Table struct {
	Varied  []string // column names of the varied quantities
	Members []Member
}

// violationColumn is the extra column of near.csv.
const violationColumn = "violation"

// CSV is the table in the form of front.csv; near adds the violation.
func (t *Table) CSV(near bool) []byte {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.Write(t.header(near))
	for i := range t.Members {
		m := &t.Members[i]
		row := append([]string{m.ID}, m.Varied...)
		for _, x := range m.Figures {
			row = append(row, figureText(x))
		}
		row = append(row, m.Model, m.Fidelity, strconv.FormatBool(m.Checked), strconv.FormatUint(m.Seed, 10))
		if near {
			row = append(row, figureText(m.Violation))
		}
		w.Write(row)
	}
	w.Flush()
	return b.Bytes()
}

func (t *Table) header(near bool) []string {
	h := append([]string{"id"}, t.Varied...)
	for _, f := range objectives.Figures {
		h = append(h, f.Column)
	}
	h = append(h, "model", "fidelity", "checked", "seed")
	if near {
		h = append(h, violationColumn)
	}
	return h
}

// figureText is a figure with 7 significant digits; one that does not apply
// is an empty cell.
func figureText(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return ""
	}
	x, _ = strconv.ParseFloat(strconv.FormatFloat(x, 'e', 6, 64), 64)
	return strconv.FormatFloat(x+0, 'f', -1, 64) // −0 + 0 is 0
}

// VariedText is a varied quantity as the shortest decimal that reads back
// exactly.
func VariedText(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

// ReadTable reads a front.csv.
func ReadTable(path string) (*Table, error) {
	text, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("cannot read %s: %w", path, plain(err))
	}
	t, err := ParseTable(text)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return t, nil
}

// ParseTable reads the text of a front.csv. Its error names the line.
func ParseTable(text []byte) (*Table, error) {
	r := csv.NewReader(bytes.NewReader(text))
	header, err := r.Read()
	if err != nil && err != io.EOF {
		return nil, err
	}
	t, err := parseHeader(header)
	if err != nil {
		return nil, err
	}
	for {
		row, err := r.Read()
		if err == io.EOF {
			return t, nil
		}
		if err != nil {
			return nil, err
		}
		m, err := parseMember(row, t.Varied)
		if err != nil {
			line, _ := r.FieldPos(0)
			return nil, fmt.Errorf("line %d: %w", line, err)
		}
		t.Members = append(t.Members, m)
	}
}

func parseHeader(row []string) (*Table, error) {
	fixed := 1 + objectives.FigureCount + 4
	if len(row) < fixed {
		return nil, errors.New("is not a front's table: its header row is missing or too short")
	}
	t := &Table{Varied: row[1 : 1+len(row)-fixed]}
	want := t.header(false)
	for i, name := range row {
		if name != want[i] {
			return nil, fmt.Errorf("line 1: column %d is %q; %q belongs there", i+1, name, want[i])
		}
	}
	return t, nil
}

func parseMember(row, varied []string) (Member, error) {
	m := Member{ID: row[0], Varied: row[1 : 1+len(varied)]}
	if !isID(m.ID) {
		return m, fmt.Errorf("id: %q is not 10 hexadecimal digits", m.ID)
	}
	for i, name := range varied {
		if name == string(objectives.Conductor) {
			continue
		}
		if _, err := parseCell(name, m.Varied[i]); err != nil {
			return m, err
		}
	}
	rest := row[1+len(varied):]
	for f := range m.Figures {
		x, err := parseCell(objectives.Figures[f].Column, rest[f])
		if err != nil {
			return m, err
		}
		m.Figures[f] = x
	}
	rest = rest[objectives.FigureCount:]
	m.Model, m.Fidelity, m.Checked = rest[0], rest[1], rest[2] == "true"
	if !m.Checked && rest[2] != "false" {
		return m, fmt.Errorf("checked: %q is neither true nor false", rest[2])
	}
	seed, err := strconv.ParseUint(rest[3], 10, 64)
	if err != nil {
		return m, fmt.Errorf("seed: %q is not a whole number", rest[3])
	}
	m.Seed = seed
	return m, nil
}

// parseCell is a number, or NaN for the empty cell of one that does not
// apply.
func parseCell(column, text string) (float64, error) {
	if text == "" {
		return math.NaN(), nil
	}
	x, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		return 0, fmt.Errorf("%s: %q is not a number", column, text)
	}
	return x, nil
}

// isID reports whether a text has the form of a design's id.
func isID(text string) bool {
	return len(text) == 10 && strings.Trim(text, "0123456789abcdef") == ""
}
