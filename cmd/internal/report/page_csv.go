package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"reflect"
	"strconv"
)

// SweepCSV is a sheet's sweep, one frequency a row, under the names that
// simulate --json gives them; a cell that does not apply is empty.
func (s *Sheet) SweepCSV() ([]byte, error) {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	kind := reflect.TypeFor[sweepRow]()
	header := make([]string, kind.NumField())
	for i := range header {
		header[i] = kind.Field(i).Tag.Get("json")
	}
	w.Write(header)
	for _, r := range s.Simulation.rows() {
		cells := make([]string, len(header))
		for i := range cells {
			text, err := json.Marshal(reflect.ValueOf(r).Field(i).Interface())
			if err != nil {
				return nil, fmt.Errorf("%s: %w", header[i], err)
			}
			if cells[i] = string(text); cells[i] == "null" {
				cells[i] = ""
			} else if plain, err := strconv.Unquote(cells[i]); err == nil {
				cells[i] = plain
			}
		}
		w.Write(cells)
	}
	w.Flush()
	return b.Bytes(), w.Error()
}
