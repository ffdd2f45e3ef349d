// Package rooms states the rules between the rooms of the project and finds
// breaches of them in a source file: imports that point the wrong way,
// outside modules away from their guardian, and rooms that touch the world.
// It refuses to judge anything else about the code.
//
//	for _, b := range rooms.Breaches("compute/claim/claim.go", src) { … }
package rooms

import (
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"path"
	"slices"
	"strconv"
	"strings"
)

// module is the name of this module, as in go.mod.
const module = "steelyard"

// order lists the rooms; imports point to the left.
var order = []string{"protocol", "compute", "render", "cmd"}

// guardians says which folder may import each outside module. A module that
// is not listed may not be imported at all.
var guardians = []struct{ module, folder string }{
	{"github.com/BurntSushi/toml", "protocol/read"},
	{"gonum.org/v1/gonum", "compute"},
	{"github.com/go-pdf/fpdf", "render/pdf"},
	{"github.com/go-fonts/liberation", "render/pdf"},
	{"golang.org/x/text", "render"},
	{"github.com/fsnotify/fsnotify", "cmd/internal/watch"},
	{"github.com/spf13/cobra", "cmd"},
	{"github.com/spf13/pflag", "cmd"},
	{"golang.org/x/term", "cmd/internal/term"},
	{"golang.org/x/sys", "cmd"},
}

// testModules may be imported by tests, anywhere.
var testModules = []string{"github.com/google/go-cmp", "github.com/rogpeppe/go-internal"}

// worldly are the packages of the standard library through which a program
// touches the world; below a name everything is meant.
var worldly = []string{"os", "net", "syscall", "path/filepath", "io/ioutil", "log", "crypto/rand", "unsafe", "plugin", "C"}

// worldlyCalls are functions that do the same in packages that are otherwise
// harmless: the clock, the streams of the process, global randomness.
var worldlyCalls = map[string][]string{
	"time":         {"Now", "Since", "Until", "Sleep", "After", "AfterFunc", "Tick", "NewTimer", "NewTicker", "Local", "LoadLocation"},
	"fmt":          {"Print", "Printf", "Println", "Scan", "Scanf", "Scanln"},
	"math/rand":    globalRandom,
	"math/rand/v2": globalRandom,
}

var globalRandom = []string{"Int", "IntN", "Intn", "Int32", "Int32N", "Int31", "Int31n", "Int63", "Int63n", "Int64", "Int64N", "Uint32", "Uint32N",
	"Uint64", "Uint64N", "UintN", "Uint", "Float32", "Float64", "NormFloat64", "ExpFloat64", "Perm", "Shuffle", "Seed", "Read", "N"}

// Breach is one place where a rule is broken.
type Breach struct {
	Package string // folder of the file
	Place   string // file:line
	Rule    string
}

func (b Breach) String() string { return fmt.Sprintf("%s: package %s: %s", b.Place, b.Package, b.Rule) }

// Breaches reads one file. Its name is its path below the root of the module,
// with slashes.
func Breaches(name string, src []byte) ([]Breach, error) {
	fset := token.NewFileSet()
	file, err := parser.ParseFile(fset, name, src, parser.SkipObjectResolution)
	if err != nil {
		return nil, err
	}
	dir, test := path.Dir(name), strings.HasSuffix(name, "_test.go")
	var found []Breach
	add := func(at token.Pos, format string, args ...any) {
		p := fset.Position(at)
		found = append(found, Breach{dir, fmt.Sprintf("%s:%d", p.Filename, p.Line), fmt.Sprintf(format, args...)})
	}
	local := map[string]string{} // name in the file → package with worldly calls
	for _, im := range file.Imports {
		target, err := strconv.Unquote(im.Path.Value)
		if err != nil {
			return nil, err
		}
		if rule := importRule(dir, target, test); rule != "" {
			add(im.Pos(), "%s", rule)
		}
		if _, ok := worldlyCalls[target]; ok && !test && room(dir) != "cmd" {
			as := path.Base(strings.TrimSuffix(target, "/v2"))
			if im.Name != nil {
				as = im.Name.Name
			}
			if as == "." {
				add(im.Pos(), "%s is imported without a name, which hides calls of the world", target)
			}
			local[as] = target
		}
	}
	ast.Inspect(file, func(n ast.Node) bool {
		sel, ok := n.(*ast.SelectorExpr)
		if !ok {
			return true
		}
		if x, ok := sel.X.(*ast.Ident); ok && slices.Contains(worldlyCalls[local[x.Name]], sel.Sel.Name) {
			add(sel.Pos(), "only cmd touches the world: %s.%s", local[x.Name], sel.Sel.Name)
		}
		return true
	})
	return found, nil
}

// room is the first part of a folder.
func room(dir string) string {
	first, _, _ := strings.Cut(dir, "/")
	return first
}

func within(dir, folder string) bool { return dir == folder || strings.HasPrefix(dir, folder+"/") }

// importRule names the rule that an import breaks, or "".
func importRule(dir, target string, test bool) string {
	first, _, _ := strings.Cut(target, "/")
	switch {
	case target == module || first == module:
		return directionRule(dir, strings.TrimPrefix(strings.TrimPrefix(target, module), "/"), test)
	case strings.Contains(first, "."):
		return guardianRule(dir, target, test)
	case !test && room(dir) != "cmd":
		for _, w := range worldly {
			if within(target, w) {
				return "only cmd touches the world: " + target
			}
		}
	}
	return ""
}

func directionRule(dir, target string, test bool) string {
	from, to := slices.Index(order, room(dir)), slices.Index(order, room(target))
	switch {
	case from < 0:
		return "code lives in one of the four rooms " + strings.Join(order, ", ")
	case to < 0:
		return "there is no room " + target
	case to > from:
		return fmt.Sprintf("imports point left (%s): %s must not import %s", strings.Join(order, " ← "), dir, target)
	case within(dir, "compute") && dir != "compute" && !test && to == 0 && !slices.Contains(shared, target):
		return fmt.Sprintf("in compute only the door knows the record: %s must not import %s", dir, target)
	}
	return ""
}

// shared are the packages of protocol that methods may know: they hold words,
// places and cards, and no whole record's values.
var shared = []string{"protocol/card", "protocol/diag", "protocol/record"}

func guardianRule(dir, target string, test bool) string {
	if test && slices.ContainsFunc(testModules, func(m string) bool { return within(target, m) }) {
		return ""
	}
	for _, g := range guardians {
		if within(target, g.module) {
			if within(dir, g.folder) {
				return ""
			}
			return fmt.Sprintf("one guardian an outside module: %s belongs to %s", g.module, g.folder)
		}
	}
	return "no room has a guardian for " + target
}
