package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/configs"
)

func startCommand(s streams) *cobra.Command {
	var scenario string
	var list bool
	c := &cobra.Command{
		Use:   "start [DIR]",
		Short: "Writes a commented starter brief",
		Long: `Writes one of the built-in briefs, with comments that explain every key, into
DIR (by default the current folder). Edit it, then: turnwise check BRIEF`,
		Args: arguments(cobra.MaximumNArgs(1)),
		RunE: func(_ *cobra.Command, args []string) error {
			if list {
				return listScenarios(s)
			}
			dir := "."
			if len(args) == 1 {
				dir = args[0]
			}
			return start(s, dir, scenario)
		},
	}
	c.Flags().StringVar(&scenario, "scenario", configs.DefaultScenario, "which built-in brief")
	c.Flags().BoolVar(&list, "list", false, "list the built-in briefs")
	completeScenarios(c)
	return c
}

func completeScenarios(c *cobra.Command) {
	c.RegisterFlagCompletionFunc("scenario", func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		var names []string
		for _, sc := range configs.Scenarios() {
			names = append(names, sc.Name)
		}
		return names, cobra.ShellCompDirectiveNoFileComp
	})
}

func listScenarios(s streams) error {
	for _, sc := range configs.Scenarios() {
		if _, err := fmt.Fprintf(s.out, "%-22s %s\n", sc.Name, sc.Summary); err != nil {
			return failed(err)
		}
	}
	return nil
}

func start(s streams, dir, scenario string) error {
	text, err := configs.ScenarioText(scenario)
	if err != nil {
		return wrong(err)
	}
	path := filepath.Join(dir, scenario+".yaml")
	if _, err := os.Lstat(path); err == nil {
		return wrongf("%s exists already; name another folder, or move it away", path)
	} else if !errors.Is(err, fs.ErrNotExist) {
		return wrongf("cannot look for %s: %w", path, err)
	}
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return failed(fmt.Errorf("cannot make the folder: %w", err))
	}
	if err := folder.WriteFile(path, text); err != nil {
		return failed(err)
	}
	fmt.Fprintf(s.err, "A starter brief. Edit it, then:\n  turnwise check %[1]s\n  turnwise search %[1]s\n", path)
	_, err = fmt.Fprintln(s.out, path)
	return failed(err)
}
