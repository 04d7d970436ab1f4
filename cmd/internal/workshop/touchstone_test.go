package workshop

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/moment"
)

// TestTouchstoneAgain: what the program writes reads back as it was.
func TestTouchstoneAgain(t *testing.T) {
	d := antennas["free"]
	r, err := fullWave(t, moment.Draft).Simulator.Simulate(context.Background(), d, models.Question{Hz: d.Band.Hz()})
	if err != nil {
		t.Fatal(err)
	}
	for _, reference := range []float64{50, 75} {
		d.Feed.Impedance = reference
		p, err := ReadTouchstone("piece.s1p", Touchstone(&d, &r))
		if err != nil {
			t.Fatal(err)
		}
		if p.Reference != reference || len(p.Hz) != len(r.Samples) {
			t.Fatalf("%d frequencies against %g Ω", len(p.Hz), p.Reference)
		}
		at50 := p.Against(50)
		for i, s := range r.Samples {
			if p.Hz[i] != s.Hz || cmplx.Abs(p.Reflection[i]-models.Reflection(s.Input, reference)) > 1e-9 {
				t.Errorf("%g Hz: %g, written was %g at %g Hz", p.Hz[i], p.Reflection[i], models.Reflection(s.Input, reference), s.Hz)
			}
			if want := models.Reflection(s.Input, 50); cmplx.Abs(at50[i]-want) > 1e-9 {
				t.Errorf("against 50 Ω: %g, want %g", at50[i], want)
			}
		}
	}
}

// TestTouchstoneByHand reads files written to the specification.
func TestTouchstoneByHand(t *testing.T) {
	half := cmplx.Rect(0.5, math.Pi/6)
	for name, c := range map[string]struct {
		text      string
		reference float64
		hz        float64
		want      complex128
	}{
		"defaults without an option line":        {"1.68 0.5 30\n", 50, 1.68e9, half},
		"an option line that says nothing":       {"#\n1.68 0.5 30\n", 50, 1.68e9, half},
		"magnitude and angle in GHz":             {"! bench\n# GHZ S MA R 50\n1.68 0.5 30 ! a remark\n", 50, 1.68e9, half},
		"decibels in MHz against 75 Ω":           {"# MHz S DB R 75\n1680 -6.020599913279624 30", 75, 1.68e9, half},
		"real and imaginary in kHz":              {"# kHz S RI R 50.5\n1.68e6 .4330127018922193 0.25\n", 50.5, 1.68e9, half},
		"hertz, parts in another order":          {"# ri r 50 hz s\n1680000000 +0.4330127018922193 2.5E-1\n", 50, 1.68e9, half},
		"tabs, blank lines and ends of any kind": {"\r\n!\r\n#\tGHZ\tS\tMA\tR\t50\r\n\r\n  1.68\t0.5   -330  \r", 50, 1.68e9, half},
		"comments before the option line":        {"! one\n  ! two\n# GHZ S MA R 50!three\n1.68 0.5 30", 50, 1.68e9, half},
		"a second option line is ignored":        {"# GHZ S MA R 50\n# HZ S DB R 1\n1.68 0.5 30\n# MHZ\n", 50, 1.68e9, half},
		"a mark of byte order":                   {"\ufeff# GHZ S MA R 50\n1.68 0.5 30\n", 50, 1.68e9, half},
		"a little more than everything":          {"1.68 1.02 0", 50, 1.68e9, 1.02},
		"direct current":                         {"0 0.5 30", 50, 0, half},
	} {
		p, err := ReadTouchstone("by-hand.s1p", []byte(c.text))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if p.Reference != c.reference || len(p.Hz) != 1 || math.Abs(p.Hz[0]-c.hz) > 1e-6 || cmplx.Abs(p.Reflection[0]-c.want) > 1e-12 {
			t.Errorf("%s: %+v", name, p)
		}
	}
}

// TestTouchstoneRefused: the line is named, and what is wrong with it.
func TestTouchstoneRefused(t *testing.T) {
	for text, c := range map[string]struct {
		line int
		want string
	}{
		"":                                       {0, "holds no frequency"},
		"! nothing\n# HZ S RI R 50\n":            {0, "holds no frequency"},
		"# GHZ S MA R 50\n1 0.5\n":               {2, "2 of 3 numbers"},
		"1 0.5 30\n\n2 0.5 30 0.1 0 0.1 0 0.5 0": {3, "no one-port file"},
		"1 0.5 30\n1 0.5 30":                     {2, "does not rise"},
		"2 0.5 30\n! down\n1 0.5 30":             {3, "does not rise"},
		"1 half 30":                              {1, `"half" is not a number`},
		"1 0,5 30":                               {1, `"0,5" is not a number`},
		"1 NaN 30":                               {1, "not a number"},
		"1 0x1p-1 30":                            {1, "not a number"},
		"1 1e999 30":                             {1, "not a number"},
		"-1 0.5 30":                              {1, "a frequency of"},
		"1e9 0.5 30":                             {1, "a frequency of"},
		"1 -0.5 30":                              {1, "a magnitude of"},
		"1 50 30":                                {1, "none of an antenna"},
		"# DB\n1 400 0":                          {2, "none of an antenna"},
		"# DB\n1 1e300 0":                        {2, "none of an antenna"},
		"# RI\n1 1e300 1e300":                    {2, "none of an antenna"},
		"# GHZ Z MA R 50\n1 0.5 30":              {1, "Z-parameters"},
		"# GHZ S MA R":                           {1, "R without"},
		"# GHZ S MA R 0":                         {1, "no reference"},
		"# GHZ S MA R -50":                       {1, "no reference"},
		"# GHZ S MA R inf":                       {1, "no reference"},
		"# GHZ S MA R R":                         {1, "no reference"},
		"# THZ S MA":                             {1, `"THZ" in the option line`},
		"# GHZ MHZ":                              {1, "two of a frequency unit"},
		"# MA RI":                                {1, "two of a format"},
		"# R 50 R 75":                            {1, "two of a reference"},
		"1 0.5 30\n# GHZ S MA R 50":              {2, "after data"},
		"! v2\n[Version] 2.0\n":                  {2, "version 2"},
	} {
		_, err := ReadTouchstone("broken.s1p", []byte(text))
		var bad *MalformedFile
		if !errors.As(err, &bad) || bad.Line != c.line || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: %v, want line %d and %q", text, err, c.line, c.want)
			continue
		}
		if where := fmt.Sprintf("broken.s1p:%d: ", c.line); c.line > 0 && !strings.HasPrefix(err.Error(), where) {
			t.Errorf("%v does not begin with %s", err, where)
		}
	}
	for name, ok := range map[string]bool{"a.s1p": true, "a.S1P": true, "a.txt": true, "a.s2p": false, "a.S4P": false, "a.s12p": false} {
		if _, err := ReadTouchstone(name, []byte("1 0.5 30")); (err == nil) != ok || err != nil && !strings.Contains(err.Error(), "ports") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestTouchstoneFormats: the same reflections in every format, unit and
// reference read alike.
func TestTouchstoneFormats(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 20).Draw(t, "n")
		per := rapid.SampledFrom([]string{"HZ", "KHZ", "MHZ", "GHZ"}).Draw(t, "unit")
		unit := map[string]float64{"HZ": 1, "KHZ": 1e3, "MHZ": 1e6, "GHZ": 1e9}[per]
		format := rapid.SampledFrom([]string{"MA", "DB", "RI"}).Draw(t, "format")
		text := fmt.Sprintf("# %s S %s R 50\n", per, format)
		var hz []float64
		var gs []complex128
		for i := range n {
			f := 1e9 + 1e6*float64(i)
			size, angle := rapid.Float64Range(1e-6, 1).Draw(t, "size"), rapid.Float64Range(-360, 360).Draw(t, "angle")
			g := cmplx.Rect(size, angle*math.Pi/180)
			hz, gs = append(hz, f), append(gs, g)
			a, b := size, angle
			switch format {
			case "DB":
				a = 20 * math.Log10(size)
			case "RI":
				a, b = real(g), imag(g)
			}
			text += fmt.Sprintf("%.17g %.17g %.17g\n", f/unit, a, b)
		}
		p, err := ReadTouchstone("any.s1p", []byte(text))
		if err != nil {
			t.Fatal(err)
		}
		for i := range hz {
			if math.Abs(p.Hz[i]-hz[i]) > 1e-3 || cmplx.Abs(p.Reflection[i]-gs[i]) > 1e-9 {
				t.Fatalf("%g at %g Hz, want %g at %g Hz", p.Reflection[i], p.Hz[i], gs[i], hz[i])
			}
		}
	})
}

// TestAgainst: the impedance is the same against any reference.
func TestAgainst(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		from, to := rapid.Float64Range(1, 1000).Draw(t, "from"), rapid.Float64Range(1, 1000).Draw(t, "to")
		z := complex(rapid.Float64Range(0, 2000).Draw(t, "r"), rapid.Float64Range(-2000, 2000).Draw(t, "x"))
		p := OnePort{Reference: from, Hz: []float64{1e9}, Reflection: []complex128{models.Reflection(z, from)}}
		if got, want := p.Against(to)[0], models.Reflection(z, to); cmplx.Abs(got-want) > 1e-9 {
			t.Fatalf("%g Ω: %g against %g Ω, want %g", z, got, to, want)
		}
	})
}

// FuzzTouchstone: bytes are refused in so many words, or are a sound one-port.
func FuzzTouchstone(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := ReadTouchstone("any.s1p", data)
		if err != nil {
			var bad *MalformedFile
			if lines := 1 + strings.Count(string(data), "\n") + strings.Count(string(data), "\r"); !errors.As(err, &bad) || bad.Line > lines {
				t.Fatalf("%v of %d lines", err, lines)
			}
			if text := err.Error(); strings.ContainsAny(text, "\x00\x1b\n") || len(text) > 300 {
				t.Fatalf("%q is no message for a terminal", text)
			}
			return
		}
		if len(p.Hz) == 0 || len(p.Hz) != len(p.Reflection) || !(p.Reference > 0) {
			t.Fatalf("%+v", p)
		}
		for i, hz := range p.Hz {
			if !(hz >= 0) || i > 0 && hz <= p.Hz[i-1] || !(cmplx.Abs(p.Reflection[i]) <= mostReflection) {
				t.Fatalf("%g at %g Hz", p.Reflection[i], hz)
			}
		}
	})
}
