package version

import (
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// testOnly are modules that no build of the program holds.
var testOnly = []string{"github.com/google/go-cmp", "github.com/rogpeppe/go-internal", "golang.org/x/tools"}

// unlicensed lists the modules of a go.mod for which no licence is kept.
func unlicensed(gomod string) (list []string) {
	var covered []string
	for _, l := range Licences() {
		covered = append(covered, l.Modules...)
	}
	for _, m := range regexp.MustCompile(`(?m)^(?:require)?\s+(\S+\.\S+/\S+) v`).FindAllStringSubmatch(gomod, -1) {
		if !slices.Contains(covered, m[1]) && !slices.Contains(testOnly, m[1]) {
			list = append(list, m[1])
		}
	}
	return list
}

func TestEveryModuleHasItsLicence(t *testing.T) {
	text, err := os.ReadFile("../../../go.mod")
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range unlicensed(string(text)) {
		t.Errorf("module %s has no licence here", m)
	}
	for _, l := range Licences() {
		if len(strings.TrimSpace(l.Text)) < 200 {
			t.Errorf("licence of %s is too short to be one", l.Of)
		}
	}
}

func TestUnlicensedFindsAModule(t *testing.T) {
	got := unlicensed("module m\n\nrequire (\n\texample.org/new/thing v1.0.0 // indirect\n\tgonum.org/v1/gonum v0.17.0\n)\n")
	if !slices.Equal(got, []string{"example.org/new/thing"}) {
		t.Errorf("found %q", got)
	}
}
