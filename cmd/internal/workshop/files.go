// Package workshop writes what others take from a design: Touchstone and
// pattern files, and the pack that a workshop builds from, with its sheet, its
// 1:1 template, its centre line and the design as it was drawn.
package workshop

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"

	"turnwise/models"
	"turnwise/objectives"
)

// Touchstone is the input reflection as a one-port file, Touchstone 1.1 (IBIS
// Open Forum, 2002): hertz, real and imaginary part, ascending frequency.
func Touchstone(d *models.Design, r *models.Response) []byte {
	var b bytes.Buffer
	title := d.Title
	if title == "" {
		title = d.ID()
	}
	fmt.Fprintf(&b, "! %s\n! design %s\n! %s\n", title, d.ID(), r.Statement)
	fmt.Fprintf(&b, "# HZ S RI R %s\n", exact(d.Feed.Impedance))
	for i := range r.Samples {
		s := &r.Samples[i]
		z0 := complex(d.Feed.Impedance, 0)
		g := (s.Input - z0) / (s.Input + z0)
		fmt.Fprintf(&b, "%s %s %s\n", exact(s.Hz), exact(real(g)), exact(imag(g)))
	}
	return b.Bytes()
}

// PatternCSV is the far field's cuts, one direction a row.
func PatternCSV(r *models.Response) []byte {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.Write([]string{"frequency_hz", "plane_deg", "angle_deg", "gain_right_dbic", "gain_left_dbic", "axial_ratio_db"})
	for i := range r.Samples {
		s := &r.Samples[i]
		for _, cut := range s.Pattern {
			for _, ray := range cut.Rays {
				w.Write([]string{
					exact(s.Hz), degrees(cut.Plane), degrees(ray.Angle),
					decibels(ray.Gain.Right), decibels(ray.Gain.Left), fixed(ray.AxialRatio, 4),
				})
			}
		}
	}
	w.Flush()
	return b.Bytes()
}

func exact(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }

func fixed(x float64, digits int) string { return strconv.FormatFloat(x, 'f', digits, 64) }

func degrees(rad float64) string {
	return exact(math.Round(rad*180/math.Pi*1e6) / 1e6)
}

func decibels(ratio float64) string { return fixed(objectives.Decibels(ratio), 4) }
