package main

import (
	"encoding/json"
	"errors"
	"io"
	"os/exec"
	"strings"
	"testing"
)

// The arrows between the rooms of the house: which package may import which.
// A key is a folder, its packages included; a value lists the folders whose
// packages it may import.
var arrows = map[string][]string{
	"cmd":        {"cmd", "configs", "objectives", "optimize", "models"},
	"configs":    {"configs", "objectives", "optimize/space", "models"},
	"objectives": {"objectives", "models", "optimize"},
	"optimize":   {"optimize"},
	"models":     {"models"},
}

// Narrower rules inside a room.
var insideArrows = map[string][]string{
	"models/moment":     {"models", "models/helix", "models/moment", "models/simtest", "models/internal"},
	"models/closedform": {"models", "models/helix", "models/closedform", "models/simtest", "models/internal"},
	"models/external":   {"models", "models/helix", "models/external", "models/simtest", "models/internal"},
	"models/remote":     {"models", "models/helix", "models/remote", "models/simtest", "models/internal", "models/closedform", "models/moment"},
	"models/helix":      {"models", "models/helix", "models/internal"},
	"optimize/space":    {"optimize/space"},
	"optimize/front":    {"optimize/front"},
	"optimize/genetic":  {"optimize", "optimize/space", "optimize/front", "optimize/genetic", "optimize/searchtest"},
	"optimize/simplex":  {"optimize", "optimize/space", "optimize/front", "optimize/simplex", "optimize/searchtest"},
}

// Libraries that are seen in one room only.
var confined = map[string][]string{
	"github.com/spf13/cobra":            {"cmd"},
	"github.com/spf13/viper":            {"cmd", "configs"},
	"github.com/MaxHalford/eaopt":       {"optimize/genetic"},
	"database/sql":                      {"optimize/journal"},
	"modernc.org/sqlite":                {"optimize/journal"},
	"github.com/schollz/progressbar/v3": {"cmd"},
	"github.com/nats-io":                {"models/remote"},
	"gonum.org/v1/plot":                 {"cmd"},
	"codeberg.org/go-pdf/fpdf":          {"cmd/internal/workshop"},
	"codeberg.org/go-fonts":             {"cmd/internal"},
}

type listed struct {
	ImportPath   string
	Imports      []string
	TestImports  []string
	XTestImports []string
}

// TestArrows keeps the arrows of the house, tests included.
func TestArrows(t *testing.T) {
	out, err := exec.Command("go", "list", "-json=ImportPath,Imports,TestImports,XTestImports", "turnwise/...").Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	packages := 0
	for d := json.NewDecoder(strings.NewReader(string(out))); ; packages++ {
		var p listed
		if err := d.Decode(&p); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		for _, imported := range append(append(p.Imports, p.TestImports...), p.XTestImports...) {
			if fault := arrowFault(strings.TrimPrefix(p.ImportPath, "turnwise/"), imported); fault != "" {
				t.Error(fault)
			}
		}
	}
	if packages < 10 {
		t.Fatalf("only %d packages were seen", packages)
	}
}

// TestArrowsCanFail shows the guard at work on imports that must not be.
func TestArrowsCanFail(t *testing.T) {
	for _, pair := range [][2]string{
		{"models/helix", "turnwise/optimize"}, {"optimize/genetic", "turnwise/models"}, {"optimize/simplex", "turnwise/optimize/journal"},
		{"configs", "turnwise/optimize/genetic"}, {"objectives", "turnwise/configs"}, {"models/moment", "turnwise/models/closedform"},
		{"optimize/simplex", "github.com/MaxHalford/eaopt"}, {"cmd/turnwise", "database/sql"}, {"optimize/front", "turnwise/optimize"},
	} {
		if arrowFault(pair[0], pair[1]) == "" {
			t.Errorf("%s may import %s, but must not", pair[0], pair[1])
		}
	}
}

func arrowFault(from, imported string) string {
	if to, ours := strings.CutPrefix(imported, "turnwise/"); ours {
		for _, rules := range []map[string][]string{arrows, insideArrows} {
			if room := roomOf(from, keys(rules)); room != "" && !within(to, rules[room], room) {
				return from + " imports " + to + ", against the arrows of the house"
			}
		}
		return ""
	}
	for library, rooms := range confined {
		if (imported == library || strings.HasPrefix(imported, library+"/")) && roomOf(from, rooms) == "" {
			return from + " imports " + imported + ", which is seen only in " + strings.Join(rooms, ", ")
		}
	}
	return ""
}

// within reports whether a package is in one of the folders. A rule inside a
// room names packages to the letter, save the room's own.
func within(to string, folders []string, room string) bool {
	if !strings.Contains(room, "/") {
		return roomOf(to, folders) != ""
	}
	for _, f := range folders {
		if to == f || (f == room || strings.HasSuffix(f, "internal")) && strings.HasPrefix(to, f+"/") {
			return true
		}
	}
	return false
}

// roomOf is the folder of the list that holds the package, or none.
func roomOf(pkg string, folders []string) string {
	for _, f := range folders {
		if pkg == f || strings.HasPrefix(pkg, f+"/") {
			return f
		}
	}
	return ""
}

func keys(m map[string][]string) []string {
	var ks []string
	for k := range m {
		ks = append(ks, k)
	}
	return ks
}
