package tolerance

import (
	"regexp"

	"turnwise/objectives"
)

// count fills in yields and failures.
func (s *Study) count(res *Result) {
	same := !s.Spreads.Any()
	kept := make([]int, len(res.Limits))
	all := 0
	for i := range res.Copies {
		c := &res.Copies[i]
		if c.Err != "" {
			continue
		}
		res.Answered++
		if c.kept() {
			all++
		}
		for k, x := range c.Limits {
			if x <= 0 {
				kept[k]++
			}
		}
	}
	failed := len(res.Copies) - res.Answered
	res.Yield = yieldOf(all, res.Answered, failed, same)
	for _, k := range kept {
		res.LimitYield = append(res.LimitYield, yieldOf(k, res.Answered, failed, same))
	}
	res.Failures = reasons(res.Copies)
}

// amount is a number within a reason: copies that fail alike differ in it.
var amount = regexp.MustCompile(`[-+]?[0-9]+(\.[0-9]+)?([eE][-+]?[0-9]+)?`)

// reasons groups the failures, those met first in front.
func reasons(copies []Copy) []Failure {
	var out []Failure
	place := map[string]int{}
	for i := range copies {
		if copies[i].Err == "" {
			continue
		}
		key := amount.ReplaceAllString(copies[i].Err, "#")
		at, ok := place[key]
		if !ok {
			at = len(out)
			place[key] = at
			out = append(out, Failure{Reason: copies[i].Err})
		}
		out[at].Count++
	}
	return out
}

// Values are a figure's over the copies that were answered.
func (res *Result) Values(f objectives.Figure) []float64 {
	var out []float64
	for i := range res.Copies {
		if res.Copies[i].Err == "" {
			out = append(out, res.Copies[i].Figures[f])
		}
	}
	return out
}
