package main

import (
	"context"
	"fmt"

	"github.com/spf13/cobra"

	"squint/cmd/squint/guide"
	"squint/scene/project"
)

// guideOptions are the command line of guide.
type guideOptions struct{ Topic string } // "" for the list and the first page

func newGuide(h host, run func(context.Context, host, guideOptions) error) *cobra.Command {
	var o guideOptions
	return &cobra.Command{
		Use:     "guide [TOPIC]",
		Short:   "Read the user's guide",
		Long:    "Guide prints a page of the user's guide; without a topic, the list of topics\nand the first page.",
		Example: "  squint guide\n  squint guide project",
		Args:    arguments(cobra.MaximumNArgs(1), "at most one topic"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				o.Topic = args[0]
			}
			return run(cmd.Context(), h, o)
		},
	}
}

func runGuide(_ context.Context, h host, o guideOptions) error {
	if o.Topic == "" {
		page, err := guide.Page("start", statuses)
		if err != nil {
			return err
		}
		_, err = fmt.Fprintf(h.out, "%s\n%s", guide.Index(), page)
		return err
	}
	if _, ok := guide.Find(o.Topic); !ok {
		return usageError{fmt.Errorf("guide: no topic %q; %s", o.Topic, project.DidYouMean(o.Topic, guide.Names()))}
	}
	page, err := guide.Page(o.Topic, statuses)
	if err != nil {
		return err
	}
	_, err = fmt.Fprint(h.out, page)
	return err
}
