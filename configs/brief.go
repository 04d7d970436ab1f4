package configs

import (
	"math"
	"path/filepath"
	"strconv"
	"strings"
	"time"

	"turnwise/models"
	"turnwise/objectives"
)

// Rung names one step of a ladder of models.
type Rung struct {
	Model    string // closed-form, full-wave or external
	Fidelity string // draft, standard, fine; only of full-wave
}

// The models and fidelities a brief may name.
const (
	ClosedForm    = "closed-form"
	FullWave      = "full-wave"
	ExternalModel = "external"
)

// Models and Fidelities list them.
var (
	Models     = []string{ClosedForm, FullWave, ExternalModel}
	Fidelities = []string{"draft", "standard", "fine"}
)

// External is a program that simulates: its command line, without a shell,
// and how long it may take over one question.
type External struct {
	Command []string
	Timeout time.Duration
}

// Brief is a whole brief, resolved: wavelengths are metres, defaults are
// filled in.
type Brief struct {
	Spec     objectives.Spec
	Ladder   []Rung // cheapest first; one rung for a plain model
	External External
	Search   Shares
	// StartFrom names design files, relative to the brief's folder; Starts
	// are the designs read from them.
	StartFrom []string
	Starts    []models.Design
	Budget    Budget
	// FrontAtMost is how many designs the final front may have.
	FrontAtMost int
	Seed        uint64
}

// Shares are the parts of the planned evaluations that each stage gets; they
// add up to 1.
type Shares struct{ Sample, Genetic, Simplex float64 }

// Budget is what a search may spend. Evaluations 0: not said. Time 0: no
// limit, else the sum over sessions.
type Budget struct {
	Evaluations int
	Time        time.Duration
	// Stagnation ends a search that gained less than Share of its
	// hypervolume over the last Evaluations; 0: never.
	Stagnation struct {
		Evaluations int
		Share       float64
	}
}

// Defaults of a brief.
const (
	DefaultEvaluations = 4000
	DefaultFidelity    = "standard"
	defaultFront       = 200
	defaultCone        = 15 // degrees
	defaultSeed        = 1
	mostEvaluations    = 1_000_000_000
)

var defaultShares = Shares{0.1, 0.7, 0.2}

// ReadBrief reads a brief. What is wrong with it is an [Error].
func ReadBrief(path string) (Brief, error) {
	data, err := readFile(path)
	if err != nil {
		return Brief{}, err
	}
	return ParseBrief(path, data, FormatOf(path))
}

// ParseBrief reads the text of a brief; name is what faults call it, and its
// folder is where start_from looks.
func ParseBrief(name string, data []byte, format Format) (Brief, error) {
	r := &reader{file: name, rounds: true}
	root := r.parse(data, format, "brief")
	if root == nil {
		return Brief{}, r.err()
	}
	b := r.brief(root)
	if err := r.err(); err != nil {
		return Brief{}, err
	}
	return b, nil
}

var briefKeys = []string{"title", "band", "sense", "feeds_reflector", "feed", "ground", "model", "fidelity", "stock", "vary", "design", "aims", "limits",
	"cone", "trust_indicative", "margins", "search", "start_from", "budget", "front", "seed"}

func (r *reader) brief(root *node) Brief {
	b := r.block(root, "", briefKeys...)
	var br Brief
	s := &br.Spec
	s.Title, _ = b.name("title")
	if !b.has("band") {
		b.missing("band", "write for example band: {from: 1.66 GHz, to: 1.70 GHz, samples: 5}")
	} else {
		s.Band = r.band(b.get("band"), "band")
	}
	r.wavelengths = true
	if s.Band.From > 0 && s.Band.To >= s.Band.From {
		r.wavelength = models.LightSpeed / s.Band.Mid()
	}
	r.model(&b, &br)
	r.base(&b, s)
	s.Stock = r.stock(&b)
	s.Vary = r.vary(&b)
	s.Aims = r.aims(&b)
	s.Limits = r.limits(&b)
	cone, ok := b.quantity("cone", Angle, span{0.1, 90})
	if !ok {
		cone = defaultCone
	}
	s.Cone = cone * math.Pi / 180
	s.TrustIndicative = b.flag("trust_indicative")
	s.Margins = r.margins(&b)
	br.Search = r.shares(&b)
	br.Budget = r.budget(&b)
	br.FrontAtMost = defaultFront
	if f := r.block(b.get("front"), "front", "at_most"); f.there {
		if k, ok := f.count("at_most", 1, 100_000); ok {
			br.FrontAtMost = int(k)
		}
	}
	br.Seed = defaultSeed
	if k, ok := b.count("seed", 0, math.MaxInt64); ok {
		br.Seed = uint64(k)
	}
	r.starts(&b, &br)
	r.checkBrief(&b, &br)
	return br
}

// base reads what does not vary.
func (r *reader) base(b *block, s *objectives.Spec) {
	d := r.block(b.get("design"), "design", "turns", "diameter", "spacing", "handedness", "conductor", "insulation", "feed")
	s.Base = r.winding(d)
	s.Base.Ground = r.ground(b.get("ground"), "ground")
	if f := r.block(b.get("feed"), "feed", "impedance"); f.there {
		if x, ok := f.quantity("impedance", Impedance, impedances); ok {
			s.Base.Feed.Impedance = x
		}
	}
	if s.Base.Feed.Impedance == 0 {
		s.Base.Feed.Impedance = defaultImpedance
	}
	s.Base.FeedsReflector = b.flag("feeds_reflector")
	r.senses(b, &d, &s.Base)
}

// senses settles the sense that the antenna itself radiates, and the hand it
// is wound in.
func (r *reader) senses(b, design *block, d *models.Design) {
	space, hand := b.sense("sense"), design.sense("handedness")
	own := space
	if d.FeedsReflector {
		own = -space
	}
	switch {
	case own == 0 && hand == 0:
		b.missing("sense", "write the sense wanted in space, right or left")
	case own == 0:
		own = hand
	case hand == 0:
		hand = own
	case hand != own:
		why := "a " + hand.String() + "-handed winding radiates " + hand.String() + "-hand circular forward"
		if d.FeedsReflector {
			why += ", and the reflector turns that into the other"
		}
		design.fault("handedness", "is "+hand.String()+", but the antenna has to radiate "+own.String()+"; "+why, "write "+own.String()+", or leave it away")
	}
	d.Sense, d.Handedness = own, hand
}

// model reads the model or the ladder of models.
func (r *reader) model(b *block, br *Brief) {
	fidelity := DefaultFidelity
	if f, ok := b.choice("fidelity", Fidelities...); ok {
		fidelity = f
	}
	plain := func(model string) Rung {
		if model == FullWave {
			return Rung{model, fidelity}
		}
		return Rung{Model: model}
	}
	n := b.get("model")
	if n == nil || n.kind != table {
		name := FullWave
		if n != nil {
			var ok bool
			if name, ok = b.choice("model", ClosedForm, FullWave); !ok {
				name = FullWave
			}
		}
		br.Ladder = []Rung{plain(name)}
		return
	}
	m := r.block(n, "model", "ladder", "external", "timeout")
	switch {
	case m.has("ladder") && m.has("external"):
		m.fault("external", "stands beside a ladder", "keep one of the two")
	case m.has("ladder"):
		for i, item := range m.list("ladder", "[closed-form, full-wave draft, full-wave standard]") {
			if rung, ok := r.rung(item, "model.ladder["+strconv.Itoa(i+1)+"]", plain); ok {
				br.Ladder = append(br.Ladder, rung)
			}
		}
		if m.has("timeout") {
			m.fault("timeout", "goes with an external model only", "leave it away")
		}
	case m.has("external"):
		br.Ladder = []Rung{{Model: ExternalModel}}
		for _, item := range m.list("external", "[python3, solver.py]") {
			br.External.Command = append(br.External.Command, item.text)
		}
		br.External.Timeout = time.Minute
		if t, ok := m.quantity("timeout", Time, span{0.01, 1e6}); ok {
			br.External.Timeout = duration(t)
		}
	default:
		m.missing("ladder", "write model: full-wave, or {ladder: [...]}, or {external: [command, argument]}")
	}
}

func (r *reader) rung(n *node, path string, plain func(string) Rung) (Rung, bool) {
	words := strings.Fields(n.text)
	bad := n.kind != text || len(words) == 0 || len(words) > 2 || !contains(Models[:2], words[0]) ||
		len(words) == 2 && (words[0] != FullWave || !contains(Fidelities, words[1]))
	if bad {
		r.add(n.line, path, quoted(n.text)+" is no model", "write closed-form, or full-wave with draft, standard or fine")
		return Rung{}, false
	}
	if len(words) == 2 {
		return Rung{words[0], words[1]}, true
	}
	return plain(words[0]), true
}

// list is the items of a list of scalars that must not be empty.
func (b *block) list(key, example string) []*node {
	n := b.get(key)
	if n == nil || n.kind == broken {
		return nil
	}
	if n.kind != list || len(n.items) == 0 {
		b.fault(key, "is "+kindNames[n.kind]+", not a list with something in it", "write for example "+key+": "+example)
		return nil
	}
	for _, item := range n.items {
		if item.kind == list || item.kind == table || item.kind == null {
			b.fault(key, "holds "+kindNames[item.kind], "write for example "+key+": "+example)
			return nil
		}
	}
	return n.items
}

// starts reads the designs to start from.
func (r *reader) starts(b *block, br *Brief) {
	if !b.has("start_from") {
		return
	}
	for _, item := range b.list("start_from", "[own.yaml]") {
		path := item.text
		if !filepath.IsAbs(path) {
			path = filepath.Join(filepath.Dir(r.file), path)
		}
		d, err := ReadDesign(path)
		if e, ok := err.(*Error); ok {
			r.faults = append(r.faults, e.Faults...)
			continue
		}
		br.StartFrom = append(br.StartFrom, item.text)
		br.Starts = append(br.Starts, d)
	}
}

// part is a percentage as a part of 1, to the digits that are written.
func part(percent float64) float64 { return math.Round(percent*1e9) / 1e11 }

// shares reads the programme.
func (r *reader) shares(b *block) Shares {
	if !b.has("search") {
		return defaultShares
	}
	s := r.block(b.get("search"), "search", "sample", "genetic", "simplex")
	get := func(key string) float64 {
		x, _ := s.quantity(key, Percent, span{0, 100})
		return part(x)
	}
	out := Shares{get("sample"), get("genetic"), get("simplex")}
	sum := out.Sample + out.Genetic + out.Simplex
	if math.Abs(sum-1) > 1e-9 {
		s.fault("", "shares add up to "+decimal(math.Round(sum*1e8)/1e6, 0)+" %", "make sample, genetic and simplex add up to 100 %")
		return defaultShares
	}
	if out.Sample == 0 && len(r.faults) == 0 {
		s.fault("sample", "is nothing, and the other stages need something to start from", "give it a few per cent")
	}
	return out
}

func (r *reader) budget(b *block) Budget {
	var out Budget
	g := r.block(b.get("budget"), "budget", "evaluations", "time", "stagnation")
	if k, ok := g.count("evaluations", 1, mostEvaluations); ok {
		out.Evaluations = int(k)
	}
	if t, ok := g.quantity("time", Time, span{1, 1e8}); ok {
		out.Time = duration(t)
	}
	if !g.has("stagnation") {
		return out
	}
	s := r.block(g.get("stagnation"), "budget.stagnation", "evaluations", "share")
	for _, key := range []string{"evaluations", "share"} {
		if !s.has(key) {
			s.missing(key, "write for example stagnation: {evaluations: 1000, share: 0.1 %}")
		}
	}
	if k, ok := s.count("evaluations", 1, mostEvaluations); ok {
		out.Stagnation.Evaluations = int(k)
	}
	if x, ok := s.quantity("share", Percent, span{0, 100}); ok {
		out.Stagnation.Share = part(x)
	}
	return out
}

func (r *reader) margins(b *block) objectives.Margins {
	var m objectives.Margins
	if !b.has("margins") {
		return m
	}
	k := r.block(b.get("margins"), "margins", "diameter", "spacing", "feed_height", "at")
	m.Diameter, _ = k.quantity("diameter", Length, span{0, 0.1})
	m.Spacing, _ = k.quantity("spacing", Length, span{0, 0.1})
	m.FeedHeight, _ = k.quantity("feed_height", Length, span{0, 0.1})
	if word, ok := k.words("at"); ok && word != "worst" {
		m.Percentile, _ = k.quantity("at", Percent, span{50, 100})
	}
	if !m.Any() {
		return objectives.Margins{}
	}
	return m
}
