package configs

import (
	"math"
	"strconv"
	"strings"
	"time"
)

// decimal is x·10^shift as the shortest plain decimal that reads back to x
// once the shift is undone.
func decimal(x float64, shift int) string {
	s := strconv.FormatFloat(x, 'e', -1, 64)
	mantissa, exponent, _ := strings.Cut(s, "e")
	sign := ""
	if strings.HasPrefix(mantissa, "-") {
		sign, mantissa = "-", mantissa[1:]
	}
	e, _ := strconv.Atoi(exponent)
	digits := strings.Replace(mantissa, ".", "", 1)
	point := 1 + e + shift // digits before the decimal point
	switch {
	case strings.Trim(digits, "0") == "":
		return "0"
	case point <= 0:
		return sign + "0." + strings.Repeat("0", -point) + digits
	case point >= len(digits):
		return sign + digits + strings.Repeat("0", point-len(digits))
	}
	return sign + digits[:point] + "." + digits[point:]
}

// show is a value as a file has it, with its unit. It reads back to the same
// value.
func show(x float64, d Dimension) string {
	size := math.Abs(x)
	switch d {
	case Length:
		if size >= 1 {
			return decimal(x, 0) + " m"
		}
		return decimal(x, 3) + " mm"
	case Frequency:
		switch {
		case size >= 1e9:
			return decimal(x, -9) + " GHz"
		case size >= 1e6:
			return decimal(x, -6) + " MHz"
		}
		return decimal(x, 0) + " Hz"
	case Conductivity:
		return decimal(x, -6) + " MS/m"
	case Density:
		return decimal(x, -3) + " g/cm3"
	case Mass:
		return decimal(x, 0) + " kg"
	case Angle:
		return decimal(x, 0) + " deg"
	case Decibel:
		return decimal(x, 0) + " dB"
	case CircularDecibel:
		return decimal(x, 0) + " dBic"
	case Impedance:
		return decimal(x, 0) + " ohm"
	case Power:
		return decimal(x, 0) + " W"
	case Time:
		return decimal(x, 0) + " s"
	case Percent:
		return decimal(x, 0) + " %"
	}
	return decimal(x, 0)
}

// showTime is a duration as a file has it.
func showTime(t time.Duration) string { return show(t.Seconds(), Time) }

// quote makes a text safe for YAML.
func quote(s string) string { return strconv.Quote(s) }
