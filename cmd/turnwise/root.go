package main

import (
	"strings"

	"github.com/spf13/cobra"
)

// newRoot is the command tree.
func newRoot(s streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "turnwise",
		Short: "Designs axial-mode helical antennas",
		Long: `Turnwise searches for axial-mode helical antennas that meet a brief: a band,
the conductors that can be had, an envelope, what may vary, what is wanted and
what must hold. It leaves a front of trade-offs to choose from.

Start with:  turnwise start     a commented brief to edit
             turnwise search    the built-in demonstration, about a minute`,
		SilenceUsage:               true,
		SilenceErrors:              true,
		SuggestionsMinimumDistance: 2,
		Args:                       noSuchCommand,
		RunE:                       func(c *cobra.Command, _ []string) error { return c.Help() },
	}
	root.SetOut(s.out)
	root.SetErr(s.err)
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return wrongf("%w; '%s --help' lists the options", err, c.CommandPath())
	})
	root.AddCommand(
		startCommand(s), checkCommand(s), searchCommand(s), frontCommand(s),
		chooseCommand(s), simulateCommand(s), buildCommand(s), reportCommand(s), watchCommand(s), workerCommand(s), versionCommand(s),
		toleranceCommand(s), compareCommand(s),
	)
	return root
}

// noSuchCommand refuses a command that is none and offers the nearest.
func noSuchCommand(c *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	near := ""
	if like := c.SuggestionsFor(args[0]); len(like) > 0 {
		near = ", did you mean " + strings.Join(like, " or ") + "?"
	}
	return wrongf("there is no command %q%s; '%s --help' lists them", args[0], near, c.CommandPath())
}

// arguments turns cobra's complaint about arguments into exit 2.
func arguments(check cobra.PositionalArgs) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if err := check(c, args); err != nil {
			return wrongf("%w; usage: %s", err, c.UseLine())
		}
		return nil
	}
}
