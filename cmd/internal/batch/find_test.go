package batch

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

func TestStartsRecord(t *testing.T) {
	for text, want := range map[string]bool{
		"steelyard = 1":                    true,
		"steelyard=1\n":                    true,
		"\ufeffsteelyard = 1":              true,
		"# remark\r\n\r\n\t steelyard = 1": true,
		"\"steelyard\" = 1":                true,
		"'steelyard' = 1":                  true,
		"steelyard = 2":                    true, // reading says what is wrong
		"":                                 false,
		"# steelyard = 1":                  false,
		"title = 1\nsteelyard = 1":         false,
		"[tool]\nsteelyard = 1":            false,
		"steelyards = 1":                   false,
		"steelyard.x = 1":                  false,
		strings.Repeat("# x\n", 9999) + "steelyard=1":  true,
		strings.Repeat("#", sniffed) + "\nsteelyard=1": false, // too far down
	} {
		if got := startsRecord(strings.NewReader(text)); got != want {
			t.Errorf("%.40q: %v, want %v", text, got, want)
		}
	}
}

func TestFind(t *testing.T) {
	dir := t.TempDir()
	t.Chdir(dir)
	put := func(name, text string) {
		os.MkdirAll(filepath.Dir(name), 0o777)
		if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	const record = "steelyard = 1\n"
	put("r/b.toml", record)
	put("r/a.toml", record)
	put("r/sub/c.toml", record)
	put("r/sub/settings.toml", "x = 1")
	put("r/.git/d.toml", record)
	put("r/.e.toml", record)
	put("r/f.txt", record)
	put("plain", "not a record by name or content")
	show := func(list []Found) (s []string) {
		for _, f := range list {
			s = append(s, filepath.ToSlash(f.Path+" "+f.Base+" "+f.Rel))
		}
		return s
	}
	for _, tt := range []struct {
		args string
		want []string
		err  string
	}{
		{"r", []string{"r/a.toml r/a a", "r/b.toml r/b b", "r/sub/c.toml r/sub/c sub/c"}, ""},
		{"r/", []string{"r/a.toml r/a a", "r/b.toml r/b b", "r/sub/c.toml r/sub/c sub/c"}, ""},
		{"r/sub/c.toml r r/./a.toml", []string{"r/sub/c.toml r/sub/c c", "r/a.toml r/a a", "r/b.toml r/b b"}, ""},
		{"- plain", []string{"-  ", "plain plain plain"}, ""},
		{"r/.e.toml", []string{"r/.e.toml r/.e .e"}, ""}, // named, so meant
		{"r/.git", []string{"r/.git/d.toml r/.git/d d"}, ""},
		{"none", nil, "none"},
	} {
		got, err := Find(strings.Fields(tt.args))
		if tt.err != "" {
			if err == nil || !strings.Contains(err.Error(), tt.err) {
				t.Errorf("%s: error %v", tt.args, err)
			}
			continue
		}
		if err != nil || !slices.Equal(show(got), tt.want) {
			t.Errorf("%s: %q, %v; want %q", tt.args, show(got), err, tt.want)
		}
	}
	os.Mkdir("empty", 0o777)
	if _, err := Find([]string{"empty"}); err == nil || !strings.Contains(err.Error(), "no record under this folder") {
		t.Errorf("an empty folder: %v", err)
	}
	// A folder that leads back to itself does not hold the search up.
	if os.Symlink("..", filepath.Join("r", "sub", "up")) == nil {
		if got, err := Find([]string{"r"}); err != nil || len(got) != 3 {
			t.Errorf("with a link upwards: %q, %v", show(got), err)
		}
	}
}

func TestPartsShareEverything(t *testing.T) {
	list := make([]Found, 23)
	for i := range list {
		list[i].Path = string(rune('a' + i))
	}
	for n := 1; n <= 25; n++ {
		count := map[string]int{}
		for i := 1; i <= n; i++ {
			for _, f := range Part(list, i, n) {
				count[f.Path]++
			}
		}
		for _, f := range list {
			if count[f.Path] != 1 {
				t.Errorf("%d parts: %s is in %d of them", n, f.Path, count[f.Path])
			}
		}
	}
}
