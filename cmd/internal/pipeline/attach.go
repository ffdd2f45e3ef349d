package pipeline

import (
	"bytes"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strconv"
	"strings"

	"steelyard/protocol/record"
	"steelyard/protocol/seal"
	"steelyard/render/page"
)

// How the files that a document carries are told apart, besides the record
// itself, which is its Source.
const (
	RelationSeal = "Supplement"
	RelationJSON = "Alternative"
	RelationData = "Data"

	// DataOf begins the description of a data file; its path in the record's
	// folder follows.
	DataOf = "data file "

	// WitnessOf begins that of a token or of the certificates of an authority.
	WitnessOf = "witness file "
)

// attach adds what only the bytes at hand can give: the record's seal and its
// numbers for other programs, which go where the record goes, and data files
// where the record asks for them. Nothing is attached while results are
// masked. No attachment depends on the document that carries it.
func (c *Compiled) attach(in Input) error {
	if c.Result.Masked {
		return nil
	}
	add := func(name, media, what, relation string, text []byte) {
		c.Page.Attachments = append(c.Page.Attachments, page.Attachment{
			Name: name, Media: media, Description: what, Relation: relation, Modified: c.Page.Created, Bytes: text,
		})
	}
	head := c.Loaded.Record.Head
	if len(c.Page.Attachments) > 0 { // the record, attached by composing
		base := strings.TrimSuffix(in.Name, ".toml")
		if in.Seal != nil {
			add(base+".seal", "text/plain", "the seals of the record", RelationSeal, in.Seal)
		}
		var b bytes.Buffer
		if err := c.rooms.JSON(&b, c.Loaded, c.Result); err != nil {
			return fmt.Errorf("%s: %w", JSON, err)
		}
		add(base+".json", "application/json", "the numbers of this document, in full", RelationJSON, b.Bytes())
	}
	var names []string
	for _, a := range c.Page.Attachments {
		names = append(names, a.Name)
	}
	if len(names) > 0 && in.Files != nil {
		for _, file := range c.witnessFiles() {
			text, err := fs.ReadFile(in.Files, file)
			if err != nil {
				return err
			}
			names = append(names, attachedName(file, names))
			add(names[len(names)-1], "application/octet-stream", WitnessOf+file, RelationSeal, text)
		}
	}
	wanted := slices.ContainsFunc(head.Attach.V, func(s record.String) bool { return s.V == "data" })
	if !wanted || in.Files == nil {
		return nil
	}
	for _, file := range c.Data() {
		text, err := fs.ReadFile(in.Files, file)
		if err != nil {
			return err
		}
		if sum := seal.Digest(text); !c.read(file, sum) {
			return fmt.Errorf("%s: changed while it was read; compile again", file)
		}
		names = append(names, attachedName(file, names))
		add(names[len(names)-1], "text/csv", DataOf+file, RelationData, text)
	}
	return nil
}

// witnessFiles are the tokens and certificates of witnesses that could be read
// as such, each once: no other file is carried because a witness names it.
func (c *Compiled) witnessFiles() (list []string) {
	state := c.Loaded.Seal
	for i, w := range c.Loaded.Record.Witnesses {
		if state == nil || i >= len(state.Witnesses) || state.Witnesses[i].Outcome == seal.Stated || state.Witnesses[i].Outcome == seal.Unread {
			continue
		}
		for _, file := range []string{w.Token.V, w.CA.V} {
			if file != "" && !slices.Contains(list, path.Clean(file)) {
				list = append(list, path.Clean(file))
			}
		}
	}
	return list
}

// read reports whether the data were read from a file with this digest.
func (c *Compiled) read(file, sum string) bool {
	for _, v := range c.Loaded.Tables {
		if v.File == file && v.SHA256 != sum {
			return false
		}
	}
	return true
}

// attachedName is the name of a data file inside a document, where folders
// would be taken for a danger. No two files have one name.
func attachedName(name string, taken []string) string {
	flat := strings.ReplaceAll(path.Clean(name), "/", "_")
	out := flat
	for n := 2; slices.Contains(taken, out); n++ {
		out = strings.TrimSuffix(flat, path.Ext(flat)) + "-" + strconv.Itoa(n) + path.Ext(flat)
	}
	return out
}
