package main

import (
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
		SilenceUsage:  true,
		SilenceErrors: true,
		Args:          cobra.NoArgs,
	}
	root.SetOut(s.out)
	root.SetErr(s.err)
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return wrongf("%w; '%s --help' lists the options", err, c.CommandPath())
	})
	root.AddCommand(
		startCommand(s), checkCommand(s), searchCommand(s), frontCommand(s),
		chooseCommand(s), simulateCommand(s), watchCommand(s), versionCommand(s),
	)
	return root
}

// exactly and the like turn cobra's complaint about arguments into exit 2.
func arguments(check cobra.PositionalArgs) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if err := check(c, args); err != nil {
			return wrongf("%w; usage: %s", err, c.UseLine())
		}
		return nil
	}
}
