package main

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"squint/cmd/squint/guide"
)

// status is how the program ends, for scripts.
type status int

// The exit statuses. 2 for wrong use is the shells' and cobra's habit, 130 is
// 128 + SIGINT as shells report it; common practice, no published source.
const (
	statusDone      status = 0
	statusFailed    status = 1
	statusUsage     status = 2
	statusNotMet    status = 3
	statusUndecided status = 4
	statusCancelled status = 130
)

// statuses is the one table of exit statuses, shown by help and guide.
var statuses = []guide.Status{
	{Code: int(statusDone), Name: "completed", Meaning: "the work was done, whatever the verdict"},
	{Code: int(statusFailed), Name: "failed", Meaning: "the results could not be written"},
	{Code: int(statusUsage), Name: "usage", Meaning: "could not check: the command line, the project or one of its files is wrong"},
	{Code: int(statusNotMet), Name: "not met", Meaning: "with --require-met: a criterion is not met"},
	{Code: int(statusUndecided), Name: "undecided", Meaning: "with --require-met: none is known to fail, but not all are known to be met"},
	{Code: int(statusCancelled), Name: "cancelled", Meaning: "stopped by Ctrl-C or a termination signal; only designs that were finished are written"},
}

// usageError is a wrong command line: the only error that prints usage.
type usageError struct{ err error }

func (e usageError) Error() string { return e.err.Error() }
func (e usageError) Unwrap() error { return e.err }

// stopError is a stop after some designs were written into a folder.
type stopError struct{ kept string }

func (e stopError) Error() string { return "stopped; the designs that were finished are in " + e.kept }
func (e stopError) Unwrap() error { return context.Canceled }

// inputError is something wrong with the project or its files.
type inputError struct{ err error }

func (e inputError) Error() string { return e.err.Error() }
func (e inputError) Unwrap() error { return e.err }

// verdictError ends a run whose results were written and that --require-met
// does not let pass. It prints nothing: the summary has said it.
type verdictError struct{ status status }

func (e verdictError) Error() string { return fmt.Sprintf("exit status %d", e.status) }

// statusOf sorts an error into the table.
func statusOf(err error) status {
	var usage usageError
	var input inputError
	var judged verdictError
	switch {
	case err == nil:
		return statusDone
	case errors.As(err, &judged):
		return judged.status
	case errors.Is(err, context.Canceled):
		return statusCancelled
	case errors.As(err, &usage), errors.As(err, &input):
		return statusUsage
	}
	return statusFailed
}

// statusTable is the table as help shows it.
func statusTable() string {
	var b strings.Builder
	for _, s := range statuses {
		b.WriteString(guide.Hang(fmt.Sprintf("  %3d  %-9s  ", s.Code, s.Name), s.Meaning))
	}
	return b.String()
}

func isUsage(err error) bool {
	var usage usageError
	return errors.As(err, &usage)
}
