package main

import (
	"context"
	"errors"
	"fmt"
	"os"

	"github.com/spf13/cobra"

	"squint/cmd/squint/guide"
	"squint/scene/project"
)

// guideOptions are the command line of guide.
type guideOptions struct {
	Topic string // "" for the list and the first page
	Out   string // file of the whole guide as a page; "" for none
}

func newGuide(h host, run func(context.Context, host, guideOptions) error) *cobra.Command {
	var o guideOptions
	cmd := &cobra.Command{
		Use:   "guide [TOPIC]",
		Short: "Read the user's guide",
		Long: `Guide prints a page of the user's guide; without a topic, the list of topics
and the first page. With --out it writes all pages, and a picture of every
system, as one HTML file.`,
		Example: "  squint guide\n  squint guide project\n  squint guide --out guide.html",
		Args:    arguments(cobra.MaximumNArgs(1), "at most one topic"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				o.Topic = args[0]
			}
			if cmd.Flags().Changed("out") && o.Out == "" {
				return usageError{errors.New("--out: got an empty path, want a file")}
			}
			if o.Out != "" && o.Topic != "" {
				return usageError{fmt.Errorf("--out: got the topic %q too; want one of them, as the file holds all", o.Topic)}
			}
			return run(cmd.Context(), h, o)
		},
	}
	cmd.Flags().StringVar(&o.Out, "out", "", "`file` to write the whole guide to, as one HTML page with\npictures")
	return cmd
}

func runGuide(_ context.Context, h host, o guideOptions) error {
	if o.Out != "" {
		page, err := guide.HTML(statuses)
		if err != nil {
			return err
		}
		if err := os.WriteFile(o.Out, page, 0o644); err != nil {
			return inputError{err}
		}
		_, err = fmt.Fprintf(h.out, "Written to %s.\n", o.Out)
		return err
	}
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
