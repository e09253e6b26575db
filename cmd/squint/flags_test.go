package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"reflect"
	"strings"
	"testing"
	"time"

	"github.com/spf13/cobra"
)

func testHost(out, err io.Writer) host {
	return host{out: out, err: err, cpus: 3, now: func() time.Time { return time.Time{} }, version: "v0"}
}

// parse runs one command with its work replaced and returns the options that
// the work was given.
func parse(t *testing.T, args []string, with func(h host, got *any) *cobra.Command) (any, error) {
	t.Helper()
	var sink bytes.Buffer
	h := testHost(&sink, &sink)
	var got any
	root := newRoot(h)
	root.ResetCommands()
	root.AddCommand(with(h, &got))
	root.SetArgs(args)
	return got, root.ExecuteContext(context.Background())
}

func TestFlags(t *testing.T) {
	two := uint64(2)
	check := func(h host, got *any) *cobra.Command {
		return newCheck(h, func(_ context.Context, _ host, o checkOptions) error { *got = o; return nil })
	}
	fresh := func(h host, got *any) *cobra.Command {
		return newNew(h, func(_ context.Context, _ host, o newOptions) error { *got = o; return nil })
	}
	guide := func(h host, got *any) *cobra.Command {
		return newGuide(h, func(_ context.Context, _ host, o guideOptions) error { *got = o; return nil })
	}
	for _, c := range []struct {
		args string
		with func(host, *any) *cobra.Command
		want any // nil for a usage error
	}{
		{"check", check, checkOptions{Workers: 3}},
		{"check a.toml", check, checkOptions{pick: pick{Project: "a.toml"}, Workers: 3}},
		{"check --out x --workers 1 --require-met --seed 2 a.toml", check, checkOptions{pick: pick{Project: "a.toml"}, Out: "x", Workers: 1, RequireMet: true, Seed: &two}},
		{"check a.toml --workers=7", check, checkOptions{pick: pick{Project: "a.toml"}, Workers: 7}},
		{"check a.toml --alternative bare --alternative b --state s=open", check, checkOptions{pick: pick{"a.toml", []string{"bare", "b"}, []string{"s=open"}}, Workers: 3}},
		{"check a.toml b.toml", check, nil},
		{"check --workers 0", check, nil},
		{"check --workers -1", check, nil},
		{"check --workers 1.5", check, nil},
		{"check --seed -1", check, nil},
		{"check --seed x", check, nil},
		{"check --out", check, nil},
		{"check --require-met=perhaps", check, nil},
		{"check --no-such", check, nil},
		{"new here", fresh, newOptions{Dir: "here"}},
		{"new", fresh, nil},
		{"new a b", fresh, nil},
		{"guide", guide, guideOptions{}},
		{"guide weather", guide, guideOptions{Topic: "weather"}},
		{"guide a b", guide, nil},
		{"other", guide, nil},
	} {
		t.Run(c.args, func(t *testing.T) {
			got, err := parse(t, strings.Fields(c.args), c.with)
			if c.want == nil {
				var usage usageError
				if !errors.As(err, &usage) || got != nil {
					t.Errorf("got %+v and error %v, want a usage error", got, err)
				}
				return
			}
			if err != nil || !reflect.DeepEqual(got, c.want) {
				t.Errorf("got %+v and error %v, want %+v", got, err, c.want)
			}
		})
	}
}

func TestStatusOf(t *testing.T) {
	for _, c := range []struct {
		err  error
		want status
	}{
		{nil, statusDone},
		{errors.New("disk full"), statusFailed},
		{usageError{errors.New("x")}, statusUsage},
		{inputError{errors.New("x")}, statusUsage},
		{fmt.Errorf("more: %w", inputError{errors.New("x")}), statusUsage},
		{verdictError{statusNotMet}, statusNotMet},
		{verdictError{statusUndecided}, statusUndecided},
		{context.Canceled, statusCancelled},
		// A run that was stopped is stopped, whatever it was that noticed.
		{inputError{context.Canceled}, statusCancelled},
	} {
		if got := statusOf(c.err); got != c.want {
			t.Errorf("%v: got %d, want %d", c.err, got, c.want)
		}
	}
}

// Every status is in the table once, so that help and guide are whole.
func TestStatusTable(t *testing.T) {
	want := []status{statusDone, statusFailed, statusUsage, statusNotMet, statusUndecided, statusCancelled}
	if len(statuses) != len(want) {
		t.Fatalf("the table has %d statuses, want %d", len(statuses), len(want))
	}
	for i, s := range statuses {
		if s.Code != int(want[i]) {
			t.Errorf("row %d is %d, want %d", i, s.Code, want[i])
		}
	}
}
