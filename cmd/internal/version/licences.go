package version

import "embed"

//go:embed licences/*.txt
var texts embed.FS

// Licence is the licence of something inside the program.
type Licence struct {
	Of      string   // for readers
	Modules []string // the modules it covers
	Text    string
}

// Licences lists the licence of every module that the program may hold, in a
// fixed order. A test compares it with go.mod.
func Licences() []Licence {
	list := []Licence{
		{Of: "Go, its library and golang.org/x", Modules: []string{"golang.org/x/sys", "golang.org/x/term", "golang.org/x/text"}, Text: "go"},
		{Of: "Go: patents", Text: "go-patents"},
		{Of: "github.com/BurntSushi/toml", Modules: []string{"github.com/BurntSushi/toml"}, Text: "toml"},
		{Of: "github.com/fsnotify/fsnotify", Modules: []string{"github.com/fsnotify/fsnotify"}, Text: "fsnotify"},
		{Of: "github.com/go-fonts/liberation", Modules: []string{"github.com/go-fonts/liberation"}, Text: "liberation"},
		{Of: "The Liberation typefaces", Text: "liberation-typefaces"},
		{Of: "github.com/go-pdf/fpdf", Modules: []string{"github.com/go-pdf/fpdf"}, Text: "fpdf"},
		{Of: "github.com/inconshreveable/mousetrap", Modules: []string{"github.com/inconshreveable/mousetrap"}, Text: "mousetrap"},
		{Of: "github.com/spf13/cobra", Modules: []string{"github.com/spf13/cobra"}, Text: "cobra"},
		{Of: "github.com/spf13/pflag", Modules: []string{"github.com/spf13/pflag"}, Text: "pflag"},
		{Of: "gonum.org/v1/gonum", Modules: []string{"gonum.org/v1/gonum"}, Text: "gonum"},
		{Of: "gonum: work of others in it", Text: "gonum-third-party"},
	}
	for i := range list {
		text, err := texts.ReadFile("licences/" + list[i].Text + ".txt")
		if err != nil {
			panic(err) // embedded
		}
		list[i].Text = string(text)
	}
	return list
}
