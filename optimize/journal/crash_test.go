package journal

import (
	"errors"
	"fmt"
	"math/rand"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"sync"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"turnwise/optimize"
)

// group is what a writer of the tests records as the n-th group: three
// candidates out of order, one of which failed.
func group(n int) []optimize.Evaluation {
	return []optimize.Evaluation{
		sample(3*n+1, float64(n%17), float64(n%13), float64(n%5-2)),
		failed(3*n+2, optimize.Failed, fmt.Sprint("reason ", n%3)),
		sample(3*n, float64(n%11), float64(n%7), float64(n%3-1)),
	}
}

// appendForever records group after group, from where the journal ends, and
// says the number of each when it is on record.
func appendForever(path string) error {
	held, err := Lock(filepath.Dir(path))
	if err != nil {
		return err
	}
	defer held.Release()
	w, err := Open(path)
	if err != nil {
		return err
	}
	c, err := w.Counts(ctx)
	if err != nil {
		return err
	}
	if err := w.Decide(Start, c.Evaluations); err != nil {
		return err
	}
	for n := c.Evaluations / 3; ; n++ {
		if err := w.Record(group(n)); err != nil {
			return err
		}
		fmt.Println(n)
	}
}

// checkPrefix fails unless the journal holds whole groups from the first on,
// with their answers, and gives their number.
func checkPrefix(t *testing.T, r *Reader) int {
	t.Helper()
	var all []optimize.Evaluation
	for e, err := range r.Since(ctx, 0) {
		must(t, err)
		all = append(all, e.Evaluation)
	}
	if len(all)%3 != 0 {
		t.Fatalf("%d evaluations: a group was torn", len(all))
	}
	for n := range len(all) / 3 {
		want := group(n)
		if d := cmp.Diff(want, all[3*n:3*n+3], bits); d != "" {
			t.Fatalf("group %d (-want +got)\n%s", n, d)
		}
		if a, found, err := r.Answer(ctx, want[2].Answers[0].Key); err != nil || !found || !cmp.Equal(a, want[2].Answers[0]) {
			t.Fatalf("group %d: answer %+v, %v, %v", n, a, found, err)
		}
	}
	return len(all) / 3
}

// TestKilledWhileAppending kills a writing process at random moments, reads
// along from this one, and goes on with the same journal.
func TestKilledWhileAppending(t *testing.T) {
	w := create(t, header())
	path := w.Path()
	must(t, w.Close())
	r, err := Read(path)
	must(t, err)
	defer r.Close()
	tail := r.Tail()
	acknowledged := -1
	const rounds = 8
	for round := range rounds {
		c := start(t, "append", path)
		last := c.line(t)
		for range rand.Intn(40) {
			last = c.line(t)
		}
		p, err := tail.Poll(ctx)
		must(t, err)
		if n, _ := strconv.Atoi(last); p.Evaluations < 3*(n+1) || !p.Alive || p.Holder.PID != c.Process.Pid {
			t.Errorf("round %d: %d evaluations after %d groups, writer alive %v as %v", round, p.Evaluations, n+1, p.Alive, p.Holder)
		}
		time.Sleep(time.Duration(rand.Intn(3000)) * time.Microsecond)
		must(t, c.Process.Kill())
		if rest := c.rest(); len(rest) > 0 {
			last = rest[len(rest)-1]
		}
		_ = c.Wait()
		n, err := strconv.Atoi(last)
		must(t, err)
		if n <= acknowledged {
			t.Fatalf("round %d began at group %d, after %d", round, n, acknowledged)
		}
		acknowledged = n
		if got := checkPrefix(t, r); got < n+1 || got > n+2 {
			t.Fatalf("round %d: %d groups on record, %d were acknowledged", round, got, n+1)
		}
	}
	p, err := tail.Poll(ctx)
	must(t, err)
	if p.Alive || p.Counts.Decisions != rounds {
		t.Errorf("after the last kill: alive %v, %d decisions, want %d", p.Alive, p.Counts.Decisions, rounds)
	}
	w, err = Open(path)
	must(t, err)
	defer w.Close()
	must(t, w.Verify(ctx))
}

// TestReadersWhileWriting has two readers look at a journal that grows.
func TestReadersWhileWriting(t *testing.T) {
	w := create(t, header())
	const groups = 60
	done := make(chan error, 1)
	go func() {
		for n := range groups {
			if err := w.Record(group(n)); err != nil {
				done <- err
				return
			}
		}
		done <- nil
	}()
	var wg sync.WaitGroup
	for range 2 {
		wg.Go(func() {
			r, err := Read(w.Path())
			if err != nil {
				t.Error(err)
				return
			}
			defer r.Close()
			tail := r.Tail()
			for seen := 0; seen < 3*groups; {
				p, err := tail.Poll(ctx)
				if err != nil || p.Evaluations < seen || p.Evaluations%3 != 0 {
					t.Errorf("%d evaluations after %d, %v", p.Evaluations, seen, err)
					return
				}
				seen = p.Evaluations
				front, err := r.Front(ctx)
				if err != nil || seen > 0 && len(front) == 0 {
					t.Errorf("front of %d after %d evaluations, %v", len(front), seen, err)
					return
				}
			}
		})
	}
	must(t, <-done)
	wg.Wait()
	checkPrefix(t, w.Reader)
}

// TestFull lets the file run into SQLite's own limit of its size.
func TestFull(t *testing.T) {
	w := create(t, header())
	must(t, w.Record(group(0)))
	var pages int
	must(t, w.db.QueryRow("PRAGMA page_count").Scan(&pages))
	_, err := w.db.Exec(fmt.Sprintf("PRAGMA max_page_count = %d", pages+3))
	must(t, err)
	n := 1
	for ; err == nil && n < 1000; n++ {
		err = w.Record(group(n))
	}
	n--
	var wrong *Error
	if !errors.Is(err, ErrFull) || !errors.Is(err, ErrCannotWrite) || !errors.As(err, &wrong) {
		t.Fatalf("after %d groups: %v", n, err)
	}
	if err := w.Record(group(n)); !errors.Is(err, ErrFull) {
		t.Fatalf("a second attempt: %v", err)
	}
	if got := checkPrefix(t, w.Reader); got != n {
		t.Fatalf("%d groups on record, want %d", got, n)
	}
	// Room on the same handle, then on a new one.
	_, err = w.db.Exec("PRAGMA max_page_count = 100000")
	must(t, err)
	must(t, w.Record(group(n)))
	must(t, w.Close())
	again, err := Open(w.Path())
	must(t, err)
	defer again.Close()
	must(t, again.Record(group(n+1)))
	if got := checkPrefix(t, again.Reader); got != n+2 {
		t.Fatalf("%d groups on record, want %d", got, n+2)
	}
}

// live makes a journal with part of it still in the log and returns the
// bytes of its files as a crash would leave them.
func live(t *testing.T, groups int) map[string][]byte {
	w := create(t, header())
	for n := range groups {
		must(t, w.Record(group(n)))
		if n == groups/2 {
			_, err := w.db.Exec("PRAGMA wal_checkpoint(TRUNCATE)")
			must(t, err)
		}
	}
	files := map[string][]byte{}
	for _, ext := range []string{"", "-wal", "-shm"} {
		b, err := os.ReadFile(w.Path() + ext)
		must(t, err)
		files[ext] = b
	}
	return files
}

// lie writes a copy of the files and gives the path of the journal.
func lie(t *testing.T, dir string, files map[string][]byte) string {
	path := filepath.Join(dir, File)
	for ext, b := range files {
		must(t, os.WriteFile(path+ext, b, 0o644))
	}
	return path
}

// whole opens a copy for reading and for writing and tells how many groups
// it holds, -1 where the damage was named; anything else fails the test.
func whole(t *testing.T, path string) int {
	t.Helper()
	count := -1
	look := func(r *Reader, err error) {
		if err == nil {
			defer r.Close()
			var c Counts
			if c, err = r.Counts(ctx); err == nil {
				_, err = r.Past(ctx)
			}
			if err == nil {
				err = r.Verify(ctx)
			}
			if err == nil {
				count = c.Evaluations / 3
				if got := checkPrefix(t, r); got != count {
					t.Fatalf("%d groups, then %d", count, got)
				}
				return
			}
		}
		if !errors.Is(err, ErrDamaged) {
			t.Fatalf("damage not named: %v", err)
		}
		count = -1
	}
	look(Read(path))
	w, err := Open(path)
	if err != nil {
		look(nil, err)
		return -1
	}
	defer w.Close()
	look(w.Reader, nil)
	return count
}

// TestTruncated cuts copies of the files at random places.
func TestTruncated(t *testing.T) {
	const groups = 24
	files := live(t, groups)
	opened, named := 0, 0
	for range 60 {
		cut := map[string][]byte{}
		for ext, b := range files {
			cut[ext] = b
		}
		which := []string{"", "-wal", "-shm"}[rand.Intn(3)]
		at := rand.Intn(len(files[which]))
		cut[which] = files[which][:at]
		if rand.Intn(3) == 0 {
			delete(cut, "-shm")
		}
		n := whole(t, lie(t, memory(t), cut))
		switch {
		case n < 0:
			named++
		case which == "-shm" && n != groups:
			t.Errorf("index of the log cut at %d: %d groups of %d", at, n, groups)
		case n < groups/2+1 && which == "-wal":
			t.Errorf("log cut at %d: %d groups, %d were folded in", at, n, groups/2+1)
		default:
			opened++
		}
		if n < 0 && which != "" {
			t.Errorf("%s cut at %d of %d: damage named where a whole prefix remains", which, at, len(files[which]))
		}
	}
	if opened == 0 || named == 0 {
		t.Errorf("%d opened, %d named: the test does not see both", opened, named)
	}
}

// TestScribbled overwrites random stretches of copies: whatever is read is
// an error or a value, never a panic.
func TestScribbled(t *testing.T) {
	files := live(t, 12)
	for range 80 {
		broken := map[string][]byte{}
		for ext, b := range files {
			broken[ext] = slices.Clone(b)
		}
		b := broken[[]string{"", "-wal"}[rand.Intn(2)]]
		for range 1 + rand.Intn(30) {
			at := rand.Intn(len(b))
			for k := at; k < min(len(b), at+1+rand.Intn(20)); k++ {
				b[k] = byte(rand.Intn(256))
			}
		}
		path := lie(t, memory(t), broken)
		w, err := Open(path)
		if err != nil {
			continue
		}
		_, _ = w.Past(ctx)
		_, _ = w.Front(ctx)
		_, _ = w.Tail().Poll(ctx)
		_, _ = w.Counts(ctx)
		_ = w.Verify(ctx)
		_ = w.Record(group(100))
		_ = w.Close()
	}
}
