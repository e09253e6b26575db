package page

import (
	"os/exec"
	"testing"
)

// The committed bundle is what its sources give.
func TestBundleIsCurrent(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the bundler")
	}
	if out, err := exec.Command("go", "run", "./bundle", "-check").CombinedOutput(); err != nil {
		t.Errorf("%v: %s", err, out)
	}
}
