package study

import (
	"strings"
	"testing"

	"squint/scene/project"
)

// TestOperated wants what a check would leave undone to be refused.
func TestOperated(t *testing.T) {
	p := &project.Project{File: "p.toml", Simulation: project.Simulation{StepMin: 60}}
	if err := operated(p); err != nil {
		t.Errorf("whole hours without a control: got %v", err)
	}
	p.Simulation.StepMin = 15
	if err := operated(p); err == nil || !strings.Contains(err.Error(), "p.toml: simulation.step_min: got 15") {
		t.Errorf("quarters of an hour: got %v", err)
	}
}
