package configs

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"sort"
	"strings"

	"go.yaml.in/yaml/v3"

	"turnwise/models"
	"turnwise/objectives"
)

// page is a YAML file being written.
type page struct {
	b      bytes.Buffer
	indent int
	varies map[objectives.Quantity]bool // of a brief: written as ranges
}

func (p *page) line(format string, a ...any) {
	p.b.WriteString(strings.Repeat("  ", p.indent))
	fmt.Fprintf(&p.b, format, a...)
	p.b.WriteByte('\n')
}

// block writes a key whose lines stand further in.
func (p *page) block(key string, inside func()) {
	p.line("%s:", key)
	p.indent++
	inside()
	p.indent--
}

// WriteDesign is a design file: metric, on the grid of written designs. A
// design whose dimensions lie on that grid reads back exactly.
func WriteDesign(d models.Design) []byte {
	var p page
	if d.Title != "" {
		p.line("title: %s", quote(d.Title))
	}
	p.winding(&d, true)
	p.line("ground: %s", groundText(d.Ground))
	if d.Band != (models.Band{}) {
		p.line("band: %s", bandText(d.Band))
	}
	if d.Sense != 0 {
		p.line("sense: %s", d.Sense)
	}
	if d.FeedsReflector {
		p.line("feeds_reflector: true")
	}
	return p.b.Bytes()
}

func rounded(x float64, d Dimension) string { return show(onGrid(x, d), d) }

func lawText(l models.Law) string {
	texts := make([]string, len(l))
	for i, x := range l {
		texts[i] = rounded(x, Length)
	}
	return "[" + strings.Join(texts, ", ") + "]"
}

func bandText(b models.Band) string {
	return fmt.Sprintf("{from: %s, to: %s, samples: %d}", show(b.From, Frequency), show(b.To, Frequency), b.Samples)
}

// groundText leaves the sheet that nobody has to name unnamed.
func groundText(g models.Ground) string {
	if !g.Finite() {
		return "{kind: infinite}"
	}
	text := "{kind: " + string(g.Kind)
	if g.Diameter > 0 {
		text += ", diameter: " + rounded(g.Diameter, Length)
	}
	if g.Rim > 0 && g.Kind == models.Cup {
		text += ", rim: " + rounded(g.Rim, Length)
	}
	if g.Thickness > 0 {
		text += ", thickness: " + rounded(g.Thickness, Length)
	}
	if g.Material != (models.Material{}) {
		text += ", " + materialText(g.Material)
	}
	return text + "}"
}

func materialText(m models.Material) string {
	if known, ok := material(m.Name); ok && known == m {
		return "material: " + m.Name
	}
	text := "conductivity: " + show(m.Conductivity, Conductivity) + ", density: " + show(m.Density, Density)
	if m.Permeability != 0 && m.Permeability != 1 {
		text += ", permeability: " + decimal(m.Permeability, 0)
	}
	return text
}

// wallText is a tube's wall, at most half of the diameter as it is written.
func wallText(diameter, wall float64) string {
	if wall <= 0 {
		return ""
	}
	half := math.Floor(math.Round(diameter*1e6)/2) / 1e6
	return ", wall: " + rounded(math.Min(wall, half), Length)
}

func insulationText(i models.Insulation) string {
	return fmt.Sprintf("{thickness: %s, permittivity: %s}", rounded(i.Thickness, Length), decimal(i.Permittivity, 0))
}

// winding writes what a brief may fix of a design, as far as it is there.
func (p *page) winding(d *models.Design, whole bool) {
	if d.Turns > 0 {
		p.line("turns: %s", rounded(d.Turns, Revolution))
	}
	if len(d.Diameter) > 0 {
		p.line("diameter: %s", lawText(d.Diameter))
	}
	if len(d.Spacing) > 0 {
		p.line("spacing: %s", lawText(d.Spacing))
	}
	if d.Handedness != 0 {
		p.line("handedness: %s", d.Handedness)
	}
	if c := d.Conductor; c.Diameter > 0 {
		text := "{"
		if c.Stock != "" {
			text += "stock: " + quote(c.Stock) + ", "
		}
		text += "diameter: " + rounded(c.Diameter, Length)
		text += wallText(c.Diameter, c.Wall)
		p.line("conductor: %s, %s}", text, materialText(c.Material))
	}
	if d.Insulation.Thickness > 0 {
		p.line("insulation: %s", insulationText(d.Insulation))
	}
	f := d.Feed
	if !whole {
		f.Impedance = 0
	}
	inside := page{indent: p.indent + 1, varies: p.varies}
	if inside.feed(&f); inside.b.Len() > 0 {
		p.line("feed:")
		p.b.Write(inside.b.Bytes())
	}
}

func (p *page) feed(f *models.Feed) {
	if f.Height > 0 {
		p.line("height: %s", rounded(f.Height, Length))
	}
	if f.Pin > 0 {
		p.line("pin: %s", rounded(f.Pin, Length))
	}
	if f.Impedance > 0 {
		p.line("impedance: %s", rounded(f.Impedance, Impedance))
	}
	l, s, t := f.Lead, f.Strip, f.Transformer
	lead := p.pair(half{"turns", l.Turns, objectives.LeadTurns}, half{"spacing", l.Spacing, objectives.LeadSpacing})
	if l.Shape != "" {
		lead = append(lead, "shape: "+string(l.Shape))
	}
	p.inline("lead", lead)
	p.inline("strip", p.pair(half{"turns", s.Turns, objectives.StripTurns}, half{"width", s.Width, objectives.StripWidth}))
	line := p.pair(half{"impedance", t.Impedance, objectives.TransformerImpedance}, half{"length", t.Length, objectives.TransformerLength})
	if t.Velocity > 0 {
		line = append(line, "velocity: "+decimal(t.Velocity, 0))
	}
	p.inline("transformer", line)
}

func (p *page) inline(key string, parts []string) {
	if len(parts) > 0 {
		p.line("%s: {%s}", key, strings.Join(parts, ", "))
	}
}

// half is one of two dimensions that stand together or not at all.
type half struct {
	key   string
	value float64
	q     objectives.Quantity
}

// pair writes two halves. One that is zero is written where the other is
// there, and neither where it varies.
func (p *page) pair(a, b half) []string {
	a.value, b.value = onGrid(a.value, varied[a.q].d), onGrid(b.value, varied[b.q].d)
	if a.value == 0 && b.value == 0 && !p.varies[a.q] && !p.varies[b.q] {
		return nil
	}
	var parts []string
	for _, h := range []half{a, b} {
		if !p.varies[h.q] {
			parts = append(parts, h.key+": "+show(h.value, varied[h.q].d))
		}
	}
	return parts
}

// Write is the brief as a file: resolved, defaults filled in. It reads back
// to the same brief.
func (br *Brief) Write() []byte {
	p := page{varies: map[objectives.Quantity]bool{}}
	s := &br.Spec
	for _, v := range s.Vary {
		p.varies[v.Quantity] = true
	}
	if s.Title != "" {
		p.line("title: %s", quote(s.Title))
	}
	p.line("band: %s", bandText(s.Band))
	space := s.Base.Sense
	if s.Base.FeedsReflector {
		space = -space
	}
	p.line("sense: %s", space)
	p.line("feeds_reflector: %t", s.Base.FeedsReflector)
	p.line("feed: {impedance: %s}", rounded(s.Base.Feed.Impedance, Impedance))
	p.line("ground: %s", groundText(s.Base.Ground))
	p.model(br)
	p.stock(s)
	p.block("vary", func() {
		for _, v := range s.Vary {
			p.line("%s: %s", v.Quantity, varyText(v))
		}
	})
	p.block("design", func() { p.winding(&s.Base, false) })
	p.block("aims", func() {
		for _, a := range s.Aims {
			want := "least"
			if a.Most {
				want = "most"
			}
			p.line("- {figure: %s, want: %s}", a.Figure, want)
		}
	})
	p.limits(s.Limits)
	p.line("cone: %s", show(degrees(s.Cone), Angle))
	p.line("trust_indicative: %t", s.TrustIndicative)
	if m := s.Margins; m.Any() {
		at := "worst"
		if m.Percentile > 0 {
			at = show(m.Percentile, Percent)
		}
		p.line("margins: {diameter: %s, spacing: %s, feed_height: %s, at: %s}", rounded(m.Diameter, Length), rounded(m.Spacing, Length), rounded(m.FeedHeight, Length), at)
	}
	p.line("search: {sample: %s, genetic: %s, simplex: %s}", share(br.Search.Sample), share(br.Search.Genetic), share(br.Search.Simplex))
	if len(br.StartFrom) > 0 {
		texts := make([]string, len(br.StartFrom))
		for i, path := range br.StartFrom {
			texts[i] = quote(path)
		}
		p.line("start_from: [%s]", strings.Join(texts, ", "))
	}
	p.budget(&br.Budget)
	p.line("front: {at_most: %d}", br.FrontAtMost)
	p.line("seed: %d", br.Seed)
	return p.b.Bytes()
}

// degrees is an angle in degrees without the last bits of the conversion.
func degrees(rad float64) float64 { return math.Round(rad*180/math.Pi*1e9) / 1e9 }

// share is a part in per cent, without the last bits of the conversion.
func share(x float64) string { return show(math.Round(x*1e11)/1e9, Percent) }

func varyText(v objectives.Vary) string {
	if v.Quantity == objectives.Conductor {
		return "stock"
	}
	d := varied[v.Quantity].d
	text := "{from: " + show(v.From, d) + ", to: " + show(v.To, d)
	if v.Step > 0 {
		text += ", step: " + show(v.Step, d)
	}
	if v.Quantity.IsLaw() {
		text += fmt.Sprintf(", knots: %d", v.Knots)
	}
	return text + "}"
}

func (p *page) model(br *Brief) {
	fidelity := ""
	for _, r := range br.Ladder {
		if r.Fidelity != "" {
			fidelity = r.Fidelity
		}
	}
	switch {
	case br.Ladder[0].Model == ExternalModel:
		texts := make([]string, len(br.External.Command))
		for i, word := range br.External.Command {
			texts[i] = quote(word)
		}
		p.line("model: {external: [%s], timeout: %s}", strings.Join(texts, ", "), showTime(br.External.Timeout))
	case len(br.Ladder) == 1:
		p.line("model: %s", br.Ladder[0].Model)
	default:
		texts := make([]string, len(br.Ladder))
		for i, r := range br.Ladder {
			texts[i] = strings.TrimSpace(r.Model + " " + r.Fidelity)
		}
		p.line("model: {ladder: [%s]}", strings.Join(texts, ", "))
	}
	if fidelity != "" {
		p.line("fidelity: %s", fidelity)
	}
}

// stock writes every row as a conductor of its own. A conductor that the
// design fixes is written there.
func (p *page) stock(s *objectives.Spec) {
	p.block("stock", func() {
		for i := range s.Stock {
			row := &s.Stock[i]
			text := "name: " + quote(row.Name) + ", diameter: " + rounded(row.Diameter, Length)
			text += wallText(row.Diameter, row.Wall) + ", " + materialText(row.Material)
			if row.Insulation.Thickness > 0 {
				text += ", insulation: " + insulationText(row.Insulation)
			}
			if row.Coil > 0 {
				text += ", coil: " + rounded(row.Coil, Length)
			}
			if row.LeastBendRadius > 0 {
				text += ", least_bend_radius: " + rounded(row.LeastBendRadius, Length)
			}
			p.line("- {%s}", text)
		}
	})
}

func (p *page) limits(ls []objectives.Limit) {
	if len(ls) == 0 {
		return
	}
	p.block("limits", func() {
		for i := 0; i < len(ls); i++ {
			l := ls[i]
			text := boundText(l)
			if i+1 < len(ls) && ls[i+1].Figure == l.Figure {
				i++
				text += ", " + boundText(ls[i])
			}
			p.line("%s: {%s}", l.Figure, text)
		}
	})
}

func boundText(l objectives.Limit) string {
	key := "at_most"
	if l.AtLeast {
		key = "at_least"
	}
	return key + ": " + show(l.Value, dimensionOf(l.Figure))
}

func (p *page) budget(b *Budget) {
	var parts []string
	if b.Evaluations > 0 {
		parts = append(parts, fmt.Sprintf("evaluations: %d", b.Evaluations))
	}
	if b.Time > 0 {
		parts = append(parts, "time: "+showTime(b.Time))
	}
	if b.Stagnation.Evaluations > 0 {
		parts = append(parts, fmt.Sprintf("stagnation: {evaluations: %d, share: %s}", b.Stagnation.Evaluations, share(b.Stagnation.Share)))
	}
	if len(parts) > 0 {
		p.line("budget: {%s}", strings.Join(parts, ", "))
	}
}

// free are the keys that a run may be resumed with other values of.
var free = map[string]bool{"budget": true}

// Digest is the SHA-256 of everything in the brief that decides an answer:
// all but the budget. Designs to start from count with what they hold.
func (br *Brief) Digest() string {
	h := sha256.New()
	own := br.byContent()
	own.Budget = Budget{}
	h.Write(own.Write())
	return hex.EncodeToString(h.Sum(nil))
}

// byContent is the brief with its designs to start from named by what they
// hold, not by where they lie.
func (br *Brief) byContent() Brief {
	own := *br
	own.StartFrom = make([]string, len(br.Starts))
	for i := range br.Starts {
		own.StartFrom[i] = br.Starts[i].Hash()
	}
	return own
}

// Diff names the keys in which two briefs differ, the budget's not among
// them.
func Diff(a, b *Brief) []string {
	x, y := a.keys(), b.keys()
	var names []string
	for k := range x {
		if _, ok := y[k]; !ok || x[k] != y[k] {
			names = append(names, k)
		}
	}
	for k := range y {
		if _, ok := x[k]; !ok {
			names = append(names, k)
		}
	}
	sort.Strings(names)
	return names
}

// keys are the top keys and one level below, each with its text.
func (br *Brief) keys() map[string]string {
	var doc map[string]yaml.Node
	own := br.byContent()
	if err := yaml.Unmarshal(own.Write(), &doc); err != nil {
		panic("configs: a brief was written that does not read: " + err.Error())
	}
	out := map[string]string{}
	for k, n := range doc {
		if free[k] {
			continue
		}
		if n.Kind != yaml.MappingNode {
			out[k] = nodeText(&n)
			continue
		}
		for i := 0; i+1 < len(n.Content); i += 2 {
			out[join(k, n.Content[i].Value)] = nodeText(n.Content[i+1])
		}
	}
	return out
}

func nodeText(n *yaml.Node) string {
	text, err := yaml.Marshal(n)
	if err != nil {
		panic("configs: a brief was written that does not read: " + err.Error())
	}
	return string(text)
}
