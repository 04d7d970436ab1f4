package main

import (
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"strconv"

	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
	"turnwise/optimize/journal"
)

// begin makes the files of a new run. A start that fails leaves no folder.
func (ses *session) begin() (err error) {
	defer func() {
		if err != nil {
			ses.close()
			os.RemoveAll(ses.folder.Dir)
			err = failed(err)
		}
	}()
	if ses.lock, err = journal.Lock(ses.folder.Dir); err != nil {
		return err
	}
	if err = ses.keepStarts(); err != nil {
		return err
	}
	if err = folder.WriteFile(ses.folder.Path(folder.BriefFile), ses.resolved()); err != nil {
		return err
	}
	if ses.book, err = journal.Create(ses.folder.Path(folder.JournalFile), ses.header()); err != nil {
		return err
	}
	if err = ses.folder.WriteFront(folder.NewTable(ses.problem, nil, ses.brief.Seed)); err != nil {
		return err
	}
	return ses.book.Decide(journal.Start, startDetail{ses.planned[0], ses.set.Workers, version})
}

// keepStarts copies the designs to start from into the run, so that its brief
// goes on to name them.
func (ses *session) keepStarts() error {
	names := make([]string, len(ses.brief.StartFrom))
	for i, name := range ses.brief.StartFrom {
		if !filepath.IsAbs(name) {
			name = filepath.Join(filepath.Dir(ses.from), name)
		}
		data, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		if i == 0 {
			if err := os.MkdirAll(ses.folder.Path(folder.StartsDir), 0o755); err != nil {
				return err
			}
		}
		names[i] = folder.StartsDir + "/" + strconv.Itoa(i+1) + filepath.Ext(name)
		if err := folder.WriteFile(ses.folder.Path(names[i]), data); err != nil {
			return err
		}
	}
	ses.brief.StartFrom = names
	return nil
}

// resolved is the brief as the run keeps it: defaults filled in.
func (ses *session) resolved() []byte {
	b := ses.brief
	return append([]byte("# The brief of this run, as it was read.\n"), b.Write()...)
}

func (ses *session) header() journal.Header {
	p := ses.problem
	host, _ := os.Hostname()
	h := journal.Header{
		Brief: string(ses.resolved()), Digest: ses.brief.Digest(), Program: "turnwise " + version, Seed: ses.brief.Seed,
		Machine: fmt.Sprintf("%s, %s/%s, %d processors", host, runtime.GOOS, runtime.GOARCH, runtime.NumCPU()),
		Models:  identities(p),
	}
	for i := range p.Layout.Space {
		h.Variables = append(h.Variables, journal.Variable{Name: p.Layout.Space[i].Name, Choices: p.Layout.Space[i].Choices})
	}
	for _, f := range objectives.Figures {
		h.Figures = append(h.Figures, f.Column)
	}
	for _, a := range p.Aims {
		h.Aims = append(h.Aims, a.Figure.String())
	}
	for _, l := range p.Limits {
		bound := "_at_most"
		if l.AtLeast {
			bound = "_at_least"
		}
		h.Limits = append(h.Limits, l.Figure.String()+bound)
	}
	return h
}

// identities are those of the models, cheapest first.
func identities(p *objectives.Problem) []string {
	var out []string
	for _, r := range p.Rungs() {
		out = append(out, r.Simulator.Identity())
	}
	return out
}
