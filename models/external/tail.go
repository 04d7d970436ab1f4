package external

import (
	"strings"
	"sync"
)

// How much of a program's log an error carries.
const (
	tailBytes = 2000
	tailLines = 10
)

// tail is a log of which only the end is kept. It is safe for concurrent use.
type tail struct {
	mu   sync.Mutex
	text []byte
}

func (t *tail) Write(p []byte) (int, error) {
	t.mu.Lock()
	defer t.mu.Unlock()
	t.text = append(t.text, p[max(0, len(p)-tailBytes):]...)
	if extra := len(t.text) - tailBytes; extra > 0 {
		t.text = append(t.text[:0], t.text[extra:]...)
	}
	return len(p), nil
}

// String is the last lines.
func (t *tail) String() string {
	t.mu.Lock()
	defer t.mu.Unlock()
	lines := strings.Split(strings.TrimSpace(strings.ToValidUTF8(string(t.text), "")), "\n")
	return strings.Join(lines[max(0, len(lines)-tailLines):], "\n")
}
