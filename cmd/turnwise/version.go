package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"github.com/spf13/cobra"
)

// version is the program's own; a release sets it when it links.
var version = "0.1.0"

func versionCommand(s streams) *cobra.Command {
	return &cobra.Command{
		Use:   "version",
		Short: "Says which version this is",
		Args:  arguments(cobra.NoArgs),
		RunE: func(*cobra.Command, []string) error {
			_, err := fmt.Fprintf(s.out, "turnwise %s%s (%s, %s/%s)\n", version, revision(), runtime.Version(), runtime.GOOS, runtime.GOARCH)
			return failed(err)
		},
	}
}

// revision is the source's revision, where the build knows it.
func revision() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return ""
	}
	for _, set := range info.Settings {
		if set.Key == "vcs.revision" && len(set.Value) >= 10 {
			return "+" + set.Value[:10]
		}
	}
	return ""
}
