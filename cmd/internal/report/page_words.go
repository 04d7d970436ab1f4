package report

import (
	"math"
	"strconv"
	"strings"

	"turnwise/models"
	"turnwise/objectives"
)

// minus writes a true minus sign and a degree sign, as print has them.
func minus(text string) string {
	text = strings.ReplaceAll(text, " deg", "°")
	if strings.HasPrefix(text, "-") {
		text = "−" + text[1:]
	}
	return text
}

// said is a figure's value with its unit on the page.
func said(f objectives.Figure, x float64) string {
	if math.IsNaN(x) {
		return "–"
	}
	return minus(Quantity(f, x))
}

// saidAmount is a figure's value without its unit on the page.
func saidAmount(f objectives.Figure, x float64) string { return minus(Amount(f, x)) }

// figureName is a figure's name in a sentence.
func figureName(f objectives.Figure) string {
	if f == objectives.AxialRatioCone {
		return "axial ratio in the cone"
	}
	return named(f.String())
}

func named(name string) string {
	words := strings.Split(strings.ReplaceAll(name, "_", " "), " ")
	for i, w := range words {
		if w == "vswr" {
			words[i] = "VSWR"
		}
	}
	return strings.Join(words, " ")
}

func capital(text string) string {
	if text == "" {
		return ""
	}
	return strings.ToUpper(text[:1]) + text[1:]
}

// trimmed is a number with at most the given decimals and no idle zeros.
func trimmed(x float64, decimals int) string {
	text := strconv.FormatFloat(x, 'f', decimals, 64)
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	if text == "-0" {
		text = "0"
	}
	return minus(text)
}

func millimetres(m float64) string { return trimmed(m*1e3, 3) + " mm" }

// frequencyUnit is the unit a band is read in.
func frequencyUnit(b models.Band) (per float64, unit string) {
	if b.From >= 1e9 {
		return 1e9, "GHz"
	}
	return 1e6, "MHz"
}

func frequency(hz float64, b models.Band) string {
	per, unit := frequencyUnit(b)
	return trimmed(hz/per, 6) + " " + unit
}

// bandWords is a band in words: "1.66 to 1.7 GHz".
func bandWords(b models.Band) string {
	if b.From == b.To {
		return frequency(b.From, b)
	}
	per, unit := frequencyUnit(b)
	return trimmed(b.From/per, 6) + " to " + trimmed(b.To/per, 6) + " " + unit
}

// threadWords says how a winding turns to someone with a screw in hand.
func threadWords(s models.Sense) string {
	if s == models.Left {
		return "opposite to an ordinary screw thread"
	}
	return "like an ordinary screw thread"
}

// limitWords is a limit as it was asked for: "at most 3 dB".
func limitWords(l objectives.Limit) string {
	if l.AtLeast {
		return "at least " + bound(l)
	}
	return "at most " + bound(l)
}

// bound is a limit's value with its unit, without idle zeros.
func bound(l objectives.Limit) string {
	text := trimmed(scale(l.Figure, l.Value), 6)
	switch u := unitMark(l.Figure); u {
	case "", "°":
		return text + u
	default:
		return text + " " + u
	}
}

// boundMark is a limit as a sign: "≤ 2".
func boundMark(l objectives.Limit) string {
	if l.AtLeast {
		return "≥ " + bound(l)
	}
	return "≤ " + bound(l)
}

// limitMark is a limit for a chart: "VSWR ≤ 2".
func limitMark(l objectives.Limit) string { return figureName(l.Figure) + " " + boundMark(l) }

// room is how far a figure is inside a limit, negative beyond it.
func room(l objectives.Limit, x float64) float64 {
	if l.AtLeast {
		return x - l.Value
	}
	return l.Value - x
}

// roomWords is that distance with its sign; of levels it is in plain decibels.
func roomWords(f objectives.Figure, away float64) string {
	text := strings.Replace(said(f, math.Abs(away)), "dBic", "dB", 1)
	if away < 0 {
		return "−" + text
	}
	return "+" + text
}

func aimWords(a objectives.Aim) string {
	if a.Most {
		return "most " + figureName(a.Figure)
	}
	return "least " + figureName(a.Figure)
}

// lawWords is a law in millimetres, from the feed to the open end.
func lawWords(l models.Law) string {
	parts := make([]string, len(l))
	for i, x := range l {
		parts[i] = trimmed(x*1e3, 3)
	}
	return strings.Join(parts, " → ") + " mm"
}

// and joins a list as a sentence does.
func and(parts []string) string {
	switch n := len(parts); n {
	case 0:
		return ""
	case 1:
		return parts[0]
	default:
		return strings.Join(parts[:n-1], ", ") + " and " + parts[n-1]
	}
}

func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}
