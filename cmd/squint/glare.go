package main

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"squint/cmd/squint/internal/report"
	"squint/glare/falsecolour"
)

// glareFormats as --format names them.
var glareFormats = []string{"text", "json", "csv"}

// glareOptions are the command line of glare.
type glareOptions struct {
	Images  []string
	Camera  cameraFlags
	Sources sourceFlags

	Lux, LuxTolerance float64 // lx, 0 none; per cent
	AgeYears          float64
	Pigmentation      float64

	Format, Out, Picture string
	Overlay              report.Overlay
}

func newGlare(h host, run func(context.Context, host, glareOptions) error) *cobra.Command {
	var o glareOptions
	var over overlayFlags
	cmd := &cobra.Command{
		Use:   "glare IMAGE...",
		Short: "Evaluate HDR fisheye images, computed or photographed, for glare",
		Long: `Glare finds the sources of glare in luminance images (OpenEXR or PFM), squint's
own or a camera's, and computes DGP and the other indices. What an image does
not say itself (projection, field of view, unit) is given by flags; the image
circle of a fisheye is found. Several images give a table. "squint guide glare"
leads through the evaluation of a photograph step by step.`,
		Example: `  squint glare results/demo/bare/worst-hour/desk-4.exr
  squint glare site.exr --projection equisolid --fov-deg 185 --spot 812,440=350
  squint glare *.exr --out evaluated --format csv`,
		Args: arguments(cobra.MinimumNArgs(1), "one image or more"),
		RunE: func(cmd *cobra.Command, args []string) error {
			o.Images = args
			o.Camera.circleGiven = cmd.Flags().Changed("circle")
			if cmd.Flags().Changed("out") && o.Out == "" {
				return usageError{errors.New("--out: got an empty path, want a folder")}
			}
			if err := o.check(cmd.Flags().Changed); err != nil {
				return usageError{err}
			}
			var err error
			if o.Overlay, err = over.read(); err != nil {
				return usageError{err}
			}
			if o.Out == "" && (len(o.Overlay.Contours) > 0 || len(o.Overlay.Points) > 0) {
				return usageError{errors.New("--contours, --point: got no --out, want the folder of the pictures too")}
			}
			return run(cmd.Context(), h, o)
		},
	}
	f := cmd.Flags()
	f.SortFlags = false
	o.Camera.bind(cmd)
	o.Sources.bind(cmd)
	f.Float64Var(&o.Lux, "lux", 0, "`reading` of a lux meter at the lens, lx, held\nagainst the image")
	// M. N. Inanici, Evaluation of high dynamic range photography as a
	// luminance data acquisition system, Lighting Res. Technol. 38 (2006)
	// 123-136: within 10 % (from memory).
	f.Float64Var(&o.LuxTolerance, "lux-tolerance", 10, "`percent` by which --lux, or spots among each\nother, may differ without\na warning")
	f.Float64Var(&o.AgeYears, "age", 40, "of the observer, `years`, for the veiling\nluminance")
	f.Float64Var(&o.Pigmentation, "pigmentation", 0.5, "`share` in the eye, for the same: 0 black,\n0.5 brown, 1 blue-green, 1.2 very light\nblue")
	f.StringVar(&o.Format, "format", "text", "`output` as text, json or csv")
	f.StringVar(&o.Out, "out", "", "`folder` for false-colour pictures and tables")
	over.bind(f)
	f.StringVar(&o.Picture, "picture", "png", "`kind` of pictures: png or tiff")
	return cmd
}

// check refuses what no image could be evaluated with. given tells whether a
// flag was typed.
func (o *glareOptions) check(given func(flag string) bool) error {
	oneOf := func(flag, got string, want []string) error {
		if slices.Contains(want, got) {
			return nil
		}
		return fmt.Errorf("--%s: got %q, want one of %s", flag, got, strings.Join(want, ", "))
	}
	within := func(flag string, got, lo, hi float64) error {
		if got >= lo && got <= hi {
			return nil
		}
		return fmt.Errorf("--%s: got %g, want %g to %g", flag, got, lo, hi)
	}
	for _, name := range o.Images {
		if name == "" {
			return errors.New("glare: got an empty path, want an image")
		}
	}
	checks := []error{
		oneOf("format", o.Format, glareFormats), oneOf("picture", o.Picture, falsecolour.Formats),
		within("age", o.AgeYears, 1, 120), within("pigmentation", o.Pigmentation, 0, 1.2),
		within("lux-tolerance", o.LuxTolerance, 0, 1000),
	}
	if given("lux") {
		checks = append(checks, within("lux", o.Lux, 0.1, 1e6))
	}
	checks = append(checks, o.Camera.check(given, within), o.Sources.check(given, within, oneOf))
	for _, err := range checks {
		if err != nil {
			return err
		}
	}
	return nil
}

func runGlare(ctx context.Context, h host, o glareOptions) error {
	if o.Out != "" {
		if err := canHold(o.Out); err != nil {
			return inputError{err}
		}
	}
	// All are read before anything is said: a table with holes misleads.
	var images []*report.Image
	for _, name := range o.Images {
		if err := ctx.Err(); err != nil {
			return err
		}
		picture, err := readImage(name)
		if err != nil {
			return inputError{err}
		}
		im, err := evaluateImage(name, picture, o)
		if err != nil {
			return inputError{err}
		}
		images = append(images, im)
	}
	var files []string
	if o.Out != "" {
		list := glareFiles(images, o.Picture, o.Overlay)
		if err := writeTogether(ctx, o.Out, list); err != nil {
			return err
		}
		for _, f := range list {
			files = append(files, f.about)
		}
	}
	switch o.Format {
	case "json":
		return report.ImagesJSON(h.out, images)
	case "csv":
		return report.ImagesCSV(h.out, images)
	}
	return report.ImagesText(h.out, images, o.Out, slices.Compact(files))
}
