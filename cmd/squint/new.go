package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"squint/cmd/squint/demo"
)

// newOptions are the command line of new.
type newOptions struct{ Dir string }

func newNew(h host, run func(context.Context, host, newOptions) error) *cobra.Command {
	var o newOptions
	return &cobra.Command{
		Use:   "new DIR",
		Short: "Write a small commented project to start from",
		Long: `New writes a starting project into a new or empty folder: a project file whose
comments name every key, a room, and an invented weather file. It can be checked
as it stands.`,
		Example: "  squint new office\n  squint check office/" + demo.StarterProject,
		Args:    arguments(cobra.ExactArgs(1), "one folder"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if o.Dir = args[0]; o.Dir == "" {
				return usageError{errors.New("new: got an empty path, want a folder")}
			}
			return run(cmd.Context(), h, o)
		},
	}
}

func runNew(_ context.Context, h host, o newOptions) error {
	entries, err := os.ReadDir(o.Dir)
	switch {
	case err == nil && len(entries) > 0:
		return inputError{fmt.Errorf("%s: the folder is not empty; give a new or an empty one", o.Dir)}
	case err != nil && !errors.Is(err, fs.ErrNotExist):
		return inputError{fmt.Errorf("%s: not a folder that can be read; give a new or an empty one", o.Dir)}
	}
	if err := os.MkdirAll(o.Dir, 0o777); err != nil {
		return err
	}
	starter := demo.Starter()
	list, err := fs.ReadDir(starter, ".")
	if err != nil {
		return err
	}
	for _, e := range list {
		data, err := fs.ReadFile(starter, e.Name())
		if err != nil {
			return err
		}
		if err := os.WriteFile(filepath.Join(o.Dir, e.Name()), data, 0o666); err != nil {
			return err
		}
	}
	file := filepath.Join(o.Dir, demo.StarterProject)
	fmt.Fprintf(h.out, "A starting project is in %s. Its weather is invented.\n\n  squint check %s\n\nchecks it; \"squint guide project\" explains its keys.\n", o.Dir, file)
	return nil
}
