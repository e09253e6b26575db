package main

import (
	"context"
	"fmt"

	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/scene/project"
)

// variantsOf computes the study of r again for every variation of its finishes,
// with the same random numbers: what differs is the finishes' doing. Not nil
// where asked for.
func variantsOf(ctx context.Context, h host, r *study.Result, o checkOptions, d designs) ([]report.Variant, error) {
	if !o.Sensitive {
		return nil, nil
	}
	variants := []report.Variant{}
	all := project.Variations(r.Project)
	for i, v := range all {
		if _, err := fmt.Fprintf(h.err, "sensitivity, %d of %d: %s %s\n", i+1, len(all), v.Group, v.Change); err != nil {
			return nil, err
		}
		in, err := study.Prepare(d.fsys, v.Of(r.Project), o.Workers)
		if err != nil {
			return nil, inputError{fmt.Errorf("sensitivity, %s %s: %w", v.Group, v.Change, d.explain(err))}
		}
		varied, err := runStudy(ctx, h, in, d, study.Options{Workers: o.Workers, Bare: true})
		if err != nil {
			return nil, err
		}
		variants = append(variants, report.NewVariant(v, varied))
	}
	return variants, nil
}
