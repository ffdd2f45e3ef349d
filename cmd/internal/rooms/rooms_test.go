package rooms

import (
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestRooms reads every Go file of the project.
func TestRooms(t *testing.T) {
	root := filepath.Join("..", "..", "..")
	files := 0
	err := filepath.WalkDir(root, func(name string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && name != root && (strings.HasPrefix(d.Name(), ".") || d.Name() == "testdata") {
			return filepath.SkipDir
		}
		if d.IsDir() || filepath.Ext(name) != ".go" {
			return nil
		}
		src, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		rel, err := filepath.Rel(root, name)
		if err != nil {
			return err
		}
		files++
		found, err := Breaches(filepath.ToSlash(rel), src)
		if err != nil {
			t.Errorf("%s: %v", rel, err)
		}
		for _, b := range found {
			t.Error(b)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 50 {
		t.Errorf("only %d files were read: is the root of the module still here?", files)
	}
}

func TestBreachesAreFound(t *testing.T) {
	for _, tt := range []struct{ name, imports, body, want string }{
		{"protocol/read/a.go", `"steelyard/compute"`, "", "imports point left"},
		{"protocol/a_test.go", `"steelyard/cmd/internal/term"`, "", "imports point left"},
		{"compute/a.go", `"steelyard/render/page"`, "", "imports point left"},
		{"render/a.go", `"steelyard/cmd/internal/term"`, "", "imports point left"},
		{"tools/a.go", `"steelyard/protocol"`, "", "four rooms"},
		{"cmd/a.go", `"steelyard/tools"`, "", "no room"},
		{"compute/effect/a.go", `"steelyard/protocol"`, "", "only the door knows the record"},
		{"compute/effect/a.go", `"steelyard/protocol/data"`, "", "only the door knows the record"},
		{"protocol/a.go", `"github.com/BurntSushi/toml"`, "", "belongs to protocol/read"},
		{"render/chart/a.go", `"gonum.org/v1/gonum/stat"`, "", "belongs to compute"},
		{"render/text/a.go", `"github.com/go-pdf/fpdf"`, "", "belongs to render/pdf"},
		{"cmd/steelyard/a.go", `"github.com/fsnotify/fsnotify"`, "", "belongs to cmd/internal/watch"},
		{"render/a.go", `"github.com/spf13/cobra"`, "", "belongs to cmd"},
		{"cmd/steelyard/a.go", `"example.org/thing"`, "", "no room has a guardian"},
		{"cmd/steelyard/a.go", `"github.com/google/go-cmp/cmp"`, "", "no room has a guardian"},
		{"protocol/a.go", `"os"`, "", "only cmd touches the world: os"},
		{"render/a.go", `"os/exec"`, "", "only cmd touches the world: os/exec"},
		{"compute/a.go", `"time"`, "var t = time.Now()", "only cmd touches the world: time.Now"},
		{"compute/a.go", `clock "time"`, "var t = clock.Since", "only cmd touches the world: time.Since"},
		{"compute/a.go", `. "time"`, "", "without a name"},
		{"compute/a.go", `"math/rand/v2"`, "var x = rand.Float64()", "only cmd touches the world: math/rand/v2.Float64"},
		{"render/a.go", `"fmt"`, `func f() { fmt.Println("x") }`, "only cmd touches the world: fmt.Println"},
	} {
		found, err := Breaches(tt.name, []byte("package a\nimport "+tt.imports+"\n"+tt.body+"\n"))
		if err != nil {
			t.Fatal(err)
		}
		if len(found) != 1 || !strings.Contains(found[0].String(), tt.want) || found[0].Package != filepath.ToSlash(filepath.Dir(tt.name)) {
			t.Errorf("%s with %s %s: found %v, want one with %q", tt.name, tt.imports, tt.body, found, tt.want)
		}
	}
}

func TestWhatIsAllowed(t *testing.T) {
	for _, tt := range []struct{ name, imports, body string }{
		{"compute/a.go", `"steelyard/protocol"`, ""},
		{"compute/result/a.go", `"steelyard/protocol/record"`, ""},
		{"protocol/read/a.go", `"github.com/BurntSushi/toml"`, ""},
		{"compute/dist/a.go", `"gonum.org/v1/gonum/mathext"`, ""},
		{"protocol/a_test.go", `"github.com/google/go-cmp/cmp"`, ""},
		{"protocol/a_test.go", `"os"`, ""},
		{"protocol/a.go", `"time"`, "var d time.Duration"},
		{"protocol/a.go", `"io/fs"`, ""},
		{"compute/a.go", `"math/rand/v2"`, "var r = rand.New(rand.NewPCG(1, 2)).Float64()"},
		{"cmd/steelyard/a.go", `"time"`, "var t = time.Now()"},
	} {
		found, err := Breaches(tt.name, []byte("package a\nimport "+tt.imports+"\n"+tt.body+"\n"))
		if err != nil || found != nil {
			t.Errorf("%s with %s %s: found %v, %v", tt.name, tt.imports, tt.body, found, err)
		}
	}
}
