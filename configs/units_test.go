package configs

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Every unit, with what two of it are in the program's own unit. Inch, foot,
// ounce and pound are exact by the international yard and pound agreement of
// 1959; the others are decimal, or minutes, hours and days.
var unitTable = []struct {
	d    Dimension
	unit string
	two  float64
}{
	{Length, "mm", 0.002}, {Length, "m", 2}, {Length, "cm", 0.02}, {Length, "um", 2e-6}, {Length, "\u00b5m", 2e-6}, {Length, "\u03bcm", 2e-6}, {Length, "km", 2000},
	{Length, "in", 0.0508}, {Length, "inch", 0.0508}, {Length, "inches", 0.0508}, {Length, "ft", 0.6096},
	{Frequency, "GHz", 2e9}, {Frequency, "MHz", 2e6}, {Frequency, "kHz", 2000}, {Frequency, "Hz", 2},
	{Angle, "deg", 2}, {Angle, "degree", 2}, {Angle, "degrees", 2}, {Angle, "°", 2}, {Angle, "rad", 360 / math.Pi},
	{Revolution, "turn", 2}, {Revolution, "turns", 2},
	{Decibel, "dB", 2}, {CircularDecibel, "dBic", 2},
	{Impedance, "ohm", 2}, {Impedance, "ohms", 2}, {Impedance, "\u03a9", 2}, {Impedance, "\u2126", 2}, {Impedance, "kohm", 2000}, {Impedance, "kΩ", 2000},
	{Power, "W", 2}, {Power, "mW", 0.002}, {Power, "kW", 2000},
	{Time, "s", 2}, {Time, "ms", 0.002}, {Time, "min", 120}, {Time, "m", 120}, {Time, "h", 7200}, {Time, "d", 172800},
	{Time, "second", 2}, {Time, "seconds", 2}, {Time, "minute", 120}, {Time, "minutes", 120}, {Time, "hour", 7200}, {Time, "hours", 7200}, {Time, "day", 172800}, {Time, "days", 172800},
	{Percent, "%", 2}, {Percent, "percent", 2},
	{Conductivity, "MS/m", 2e6}, {Conductivity, "S/m", 2},
	{Density, "g/cm3", 2000}, {Density, "g/cm³", 2000}, {Density, "kg/m3", 2}, {Density, "kg/m³", 2},
	{Mass, "g", 0.002}, {Mass, "kg", 2}, {Mass, "mg", 2e-6}, {Mass, "oz", 0.05669904625}, {Mass, "lb", 0.90718474},
}

func TestEveryUnit(t *testing.T) {
	tested := 0
	for _, c := range unitTable {
		tested++
		for _, space := range []string{"", " ", "  ", "\t", "\u00a0"} {
			if got, err := Parse("2"+space+c.unit, c.d); err != nil || got != c.two {
				t.Errorf("2%s%s: %v, %v, want %v", space, c.unit, got, err, c.two)
			}
		}
		for d := Dimension(0); d < Dimension(dimensionCount); d++ {
			_, err := Parse("2 "+c.unit, d)
			if mine := d == c.d || c.unit == "m" && (d == Length || d == Time); mine != (err == nil) {
				t.Errorf("2 %s as %s: %v", c.unit, dimensions[d].name, err)
			}
		}
	}
	for d := range dimensions {
		tested -= len(dimensions[d].units)
	}
	if tested != 0 {
		t.Errorf("%d units more in the table than there are", tested)
	}
}

// The case of a unit matters only where another would mean something else.
func TestCaseOfUnits(t *testing.T) {
	for _, c := range []struct {
		text string
		d    Dimension
		want float64
	}{
		{"1.7GHz", Frequency, 1.7e9}, {"1.7 ghz", Frequency, 1.7e9}, {"1.7 GHZ", Frequency, 1.7e9}, {"1.7 mhz", Frequency, 1.7e6}, {"1.7 MHZ", Frequency, 1.7e6}, {"1.7 khz", Frequency, 1700},
		{"58 MM", Length, 0.058}, {"58 Cm", Length, 0.58}, {"2 IN", Length, 0.0508}, {"50 Ohm", Impedance, 50}, {"50 OHM", Impedance, 50}, {"2 w", Power, 2}, {"2 KW", Power, 2000},
		{"8 H", Time, 28800}, {"10 MIN", Time, 600}, {"3 db", Decibel, 3}, {"3 dbic", CircularDecibel, 3}, {"13 Deg", Angle, 13}, {"8.9 G/cm3", Density, 8900}, {"350 G", Mass, 0.35},
	} {
		if got, err := Parse(c.text, c.d); err != nil || got != c.want {
			t.Errorf("%s: %v, %v, want %v", c.text, got, err, c.want)
		}
	}
	for _, c := range []struct {
		text   string
		d      Dimension
		remedy string
	}{
		{"58 Mm", Length, "write mm"}, {"58 M", Length, "write m"}, {"58 Km", Length, "write km"}, {"1.7 mHz", Frequency, "write MHz"}, {"2 MW", Power, "write mW"},
		{"10 M", Time, "write min"}, {"10 MS", Time, "write ms"}, {"10 Ms", Time, "write ms"}, {"10 Mg", Mass, "write mg"}, {"10 MG", Mass, "write mg"},
		{"58 mS/m", Conductivity, "did you mean MS/m?"}, {"58 ms/m", Conductivity, "did you mean MS/m?"}, {"2 Kohm", Impedance, "did you mean kohm?"}, {"2 Mw", Power, "did you mean mW?"},
		{"1.7 GZ", Frequency, "did you mean GHz?"}, {"8 dBi", CircularDecibel, "did you mean dBic?"}, {"8 dBm", Decibel, "did you mean dB?"}, {"2 meters", Length, "58 mm"}, {"8 hurs", Time, "did you mean hours?"},
	} {
		if got, err := Parse(c.text, c.d); err == nil || !strings.Contains(err.Error(), c.remedy) {
			t.Errorf("%s: %v, %v, want a refusal with %q", c.text, got, err, c.remedy)
		}
	}
}

func TestNumbers(t *testing.T) {
	for text, want := range map[string]float64{
		"58 mm": 0.058, "+58 mm": 0.058, " 58 mm ": 0.058, "58. mm": 0.058, ".058 m": 0.058, "0058 mm": 0.058, "5.8e1 mm": 0.058, "5.8E+1mm": 0.058, "580e-1 mm": 0.058, "-58 mm": -0.058, "0 mm": 0, "-0 mm": 0,
		"1e-10 m": 1e-10, "0.1 mm": 0.0001, "1e39 m": 1e39,
	} {
		if got, err := Parse(text, Length); err != nil || got != want {
			t.Errorf("%q: %v, %v, want %v", text, got, err, want)
		}
	}
	for text, what := range map[string]string{
		"": "is not a number", "mm": "is not a number", "- 58 mm": "is not a number", "--58 mm": "is not a number", "\u221258 mm": "is not a number", "0x10 mm": `"x10 mm" is no unit`, "1_000 mm": "is no unit",
		"58": "has no unit", "58 mm mm": "is no unit", "58 mm 3": "is no unit", "1,7 mm": "has a decimal comma", "1.000,7 mm": "is no unit", "1,000.7 mm": "has a decimal comma", "5/8 in": "is no unit",
		"NaN mm": "not a finite number", "nan": "not a finite number", "inf mm": "not a finite number", "-Infinity mm": "not a finite number", "+.inf": "not a finite number",
		"1e41 m": "out of all range", "1e99 m": "out of all range", "1e100 m": "out of all range", "1e999999999999 m": "out of all range", "1e-999999999999 m": "out of all range", "1e-41 m": "out of all range",
		strings.Repeat("9", 61) + " m": "out of all range", strings.Repeat("9", 201) + " m": "is not a length", "0.5 wl": "no size here",
	} {
		if got, err := Parse(text, Length); err == nil || !strings.Contains(err.Error(), what) {
			t.Errorf("%q: %v, %v, want a refusal with %q", text, got, err, what)
		}
	}
}

func TestTimes(t *testing.T) {
	for text, want := range map[string]float64{
		"8h": 28800, "8 h": 28800, "1.5h": 5400, "1h30m": 5400, "1h 30min": 5400, "1 h 30 min 15 s": 5415, "1d12h": 129600, "250 ms": 0.25, "2 days": 172800, "1e3s": 1000,
	} {
		if got, err := Parse(text, Time); err != nil || got != want {
			t.Errorf("%q: %v s, %v, want %v", text, got, err, want)
		}
	}
	for text, what := range map[string]string{
		"8": "has no unit", "1h30": "has no unit", "h": "is not a number", "1h x": "is not a number", "1,5 h": "decimal comma", "8h, 3m": "is no unit", "1 fortnight": "is no unit of a time",
		strings.Repeat("1s", 200_000): "is not a time", "NaN s": "not a finite number", "1e99h": "out of all range",
	} {
		if got, err := Parse(text, Time); err == nil || !strings.Contains(err.Error(), what) {
			t.Errorf("%.40q: %v, %v, want a refusal with %q", text, got, err, what)
		}
	}
}

func TestParseFrequency(t *testing.T) {
	if hz, err := ParseFrequency("1.66GHz"); err != nil || hz != 1.66e9 {
		t.Errorf("1.66GHz: %v, %v", hz, err)
	}
	for text, what := range map[string]string{
		"1.66": "has no unit", "1 Hz": "from 100000 Hz to 1000 GHz", "2 THz": "is no unit", "1001 GHz": "from 100000 Hz to 1000 GHz", "0 GHz": "out of range", "-1 GHz": "out of range",
	} {
		if hz, err := ParseFrequency(text); err == nil || hz != 0 || !strings.Contains(err.Error(), what) {
			t.Errorf("%s: %v, %v, want a refusal with %q", text, hz, err, what)
		}
	}
}

// Whatever is shown reads back to the same double, in every dimension.
func TestShowThenParseIsTheIdentity(t *testing.T) {
	for d := Dimension(0); d < Dimension(dimensionCount); d++ {
		t.Run(dimensions[d].name, rapid.MakeCheck(func(t *rapid.T) {
			x := rapid.Float64Range(1, 10).Draw(t, "mantissa") * math.Pow(10, float64(rapid.IntRange(-30, 30).Draw(t, "exponent")))
			if rapid.Bool().Draw(t, "negative") {
				x = -x
			}
			for _, x := range []float64{x, 0, onGrid(x, d)} {
				text := show(x, d)
				if got, err := Parse(text, d); err != nil || got != x {
					t.Fatalf("%v is shown as %q and read as %v, %v", x, text, got, err)
				}
			}
		}))
	}
}

func TestShow(t *testing.T) {
	for _, c := range []struct {
		x    float64
		d    Dimension
		want string
	}{
		{0.058, Length, "58 mm"}, {0.0000015, Length, "0.0015 mm"}, {1.5, Length, "1.5 m"}, {-0.25, Length, "-250 mm"}, {0, Length, "0 mm"}, {math.Copysign(0, -1), Length, "0 mm"}, {1e20, Length, "100000000000000000000 m"},
		{1.66e9, Frequency, "1.66 GHz"}, {433e6, Frequency, "433 MHz"}, {1e5, Frequency, "100000 Hz"}, {123456789, Frequency, "123.456789 MHz"},
		{58e6, Conductivity, "58 MS/m"}, {8890, Density, "8.89 g/cm3"}, {0.35, Mass, "0.35 kg"}, {13.5, Angle, "13.5 deg"}, {-20, Decibel, "-20 dB"}, {11.5, CircularDecibel, "11.5 dBic"},
		{50, Impedance, "50 ohm"}, {2, Power, "2 W"}, {600, Time, "600 s"}, {10, Percent, "10 %"}, {8.25, Revolution, "8.25"}, {2, Plain, "2"}, {math.Nextafter(0.3, 1), Plain, "0.30000000000000004"},
	} {
		if got := show(c.x, c.d); got != c.want {
			t.Errorf("%v: %q, want %q", c.x, got, c.want)
		}
	}
}

// The example beside every dimension is right, and so is the first unit.
func TestExamplesAreRight(t *testing.T) {
	for d := range dimensions {
		if _, err := Parse(dimensions[d].example, Dimension(d)); err != nil {
			t.Errorf("%s: %v", dimensions[d].name, err)
		}
	}
}

// The grid is idempotent, never half a step away, and free of last bits.
func TestGrid(t *testing.T) {
	for d, per := range gridsPerUnit {
		t.Run(dimensions[d].name, rapid.MakeCheck(func(t *rapid.T) {
			x := rapid.Float64Range(-1000, 1000).Draw(t, "x")
			y := onGrid(x, d)
			if onGrid(y, d) != y || math.Abs(x-y) > 0.5000001/per {
				t.Fatalf("%v became %v, then %v", x, y, onGrid(y, d))
			}
			if digits := len(decimal(math.Abs(y), 0)); digits > 4+1+int(math.Log10(per)) {
				t.Fatalf("%v has last bits: %s", x, decimal(y, 0))
			}
		}))
	}
}

func TestNearest(t *testing.T) {
	known := []string{"turns", "diameter", "spacing", "feed_height", "vswr"}
	for word, want := range map[string]string{
		"turn": "turns", "trun": "turns", "Diameter": "diameter", "diametre": "diameter", "spaceing": "spacing", "feed-height": "feed_height", "vsrw": "vswr", "": "", "x": "", "gain": "", strings.Repeat("turns", 20): "",
	} {
		if got := nearest(word, known); got != want {
			t.Errorf("%q: %q, want %q", word, got, want)
		}
	}
	for words, want := range map[string]string{"": "", "a": "a", "a b": "a or b", "a b c": "a, b or c"} {
		if got := oneOf(strings.Fields(words)); got != want {
			t.Errorf("%q: %q, want %q", words, got, want)
		}
	}
}

// Optimal string alignment is symmetric, zero for equal words alone, and no
// more than the longer word.
func TestDistance(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := rapid.StringN(0, 12, -1).Draw(t, "a"), rapid.StringN(0, 12, -1).Draw(t, "b")
		ab, ba := distance(a, b), distance(b, a)
		if ab != ba || (ab == 0) != (a == b) || ab > max(len([]rune(a)), len([]rune(b))) {
			t.Fatalf("%q, %q: %d and %d", a, b, ab, ba)
		}
	})
}
