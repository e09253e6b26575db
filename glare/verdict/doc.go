// Package verdict holds a metric with its confidence against a limit and says
// met, not met or undecided, in one sentence: the finding, the number, the
// reason.
//
// Criteria quote thresholds of published standards only. Local codes and
// licensed practice decide what applies to a building.
//
// A verdict is met or not met only where the whole bracket of the metric lies
// on one side of the limit. The bracket counts what is surely and what is
// possibly over a threshold, each value taken z standard errors wide; [Z]
// makes z larger where many views or repeated looks share one verdict.
package verdict
