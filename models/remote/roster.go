package remote

import (
	"slices"
	"strconv"
	"strings"
	"time"
)

// Standing is how a queue stands, as a search sees it.
type Standing struct {
	Workers   []Member `json:"workers"`
	Waiting   int      `json:"waiting"`   // questions without an answer yet
	Refused   int      `json:"refused"`   // workers of other models
	Dropped   int      `json:"dropped"`   // answers that came late or twice
	Malformed int      `json:"malformed"` // messages that were none
}

// Member is one worker.
type Member struct {
	Name     string  `json:"name"`
	Slots    int     `json:"slots"`
	Present  bool    `json:"present"`
	Answered int     `json:"answered"`
	Failed   int     `json:"failed"` // of those, with an error
	Rate     float64 `json:"rate_per_s"`
}

// Bounds of the roster.
const (
	mostMembers = 4096
	silence     = 5 * time.Second // after which a worker is not present
)

// member is what is known of a worker.
type member struct {
	hello            hello
	refused          bool
	joined, seen     time.Time
	answered, failed int
}

// roster knows the workers.
type roster struct {
	workers map[string]*member
}

// see notes a hello, and reports whether the worker was known.
func (r *roster) see(h hello, refused bool) bool {
	now := time.Now()
	m, known := r.workers[h.ID]
	if !known {
		if len(r.workers) >= mostMembers {
			r.forget()
		}
		m = &member{joined: now}
		r.workers[h.ID] = m
	}
	m.hello, m.refused, m.seen = h, refused, now
	return known
}

// forget drops the worker that was silent the longest.
func (r *roster) forget() {
	var oldest string
	for id, m := range r.workers {
		if o := r.workers[oldest]; o == nil || m.seen.Before(o.seen) {
			oldest = id
		}
	}
	delete(r.workers, oldest)
}

// credit notes an answer.
func (r *roster) credit(id string, failed bool) {
	m := r.workers[id]
	if m == nil {
		return
	}
	m.answered++
	if failed {
		m.failed++
	}
}

// Standing is how the queue stands now.
func (q *Queue) Standing() Standing {
	q.mu.Lock()
	defer q.mu.Unlock()
	s := Standing{Workers: []Member{}, Waiting: len(q.pending), Dropped: q.dropped, Malformed: q.malformed}
	for _, m := range q.roster.workers {
		s.Malformed += m.hello.Malformed
		if m.refused {
			s.Refused++
			continue
		}
		one := Member{Name: m.hello.Name, Slots: m.hello.Slots, Present: time.Since(m.seen) < silence, Answered: m.answered, Failed: m.failed}
		if t := m.seen.Sub(m.joined).Seconds(); t > 0 {
			one.Rate = float64(m.answered) / t
		}
		s.Workers = append(s.Workers, one)
	}
	slices.SortFunc(s.Workers, func(a, b Member) int {
		if c := strings.Compare(a.Name, b.Name); c != 0 {
			return c
		}
		return b.Answered - a.Answered
	})
	return s
}

// listed writes a set of identities.
func listed(set map[string]bool) string {
	var names []string
	for name := range set {
		names = append(names, strconv.Quote(name))
	}
	slices.Sort(names)
	return strings.Join(names, ", ")
}

func quoted(names []string) []string {
	out := make([]string, len(names))
	for i, n := range names {
		out[i] = strconv.Quote(clip(n, mostName))
	}
	return out
}
