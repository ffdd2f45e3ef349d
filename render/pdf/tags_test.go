package pdf

import (
	"bytes"
	"fmt"
	"strings"
	"testing"
)

// tagFaults is a checker of its own for what PDF/UA asks of tagging. It reads
// the finished file, not the writer's data, and returns every fault: painting
// outside marked content; marked-content numbers used twice, missing from the
// tree, in it twice, or going back to another element; elements out of place.
func tagFaults(b []byte) []string {
	budget := maxUnpacked
	w := scan(b, &budget)
	c := &tagCheck{w: w, placed: map[string]pdfRef{}, counted: map[string]int{}}
	root := w.catalog()
	c.marked = w.dict(root["MarkInfo"]) != nil
	tree := w.dict(root["StructTreeRoot"])
	if tree == nil {
		return []string{"no structure tree"}
	}
	if r, ok := tree["K"].(pdfRef); ok {
		c.element(r, "", 0)
	}
	back := map[int]any{}
	nums, _ := w.dict(tree["ParentTree"])["Nums"].([]any)
	for i := 0; i+1 < len(nums); i += 2 {
		back[int(nums[i].(float64))] = nums[i+1]
	}
	kids, _ := w.dict(root["Pages"])["Kids"].([]any)
	for _, k := range kids {
		c.page(k.(pdfRef), back)
	}
	for key := range c.counted {
		if _, ok := c.placed[key]; !ok {
			c.fault("content %s is not in the tree", key)
		}
	}
	for key := range c.placed {
		if c.counted[key] == 0 {
			c.fault("the tree names content %s, which is not on the page", key)
		}
	}
	return c.faults
}

type tagCheck struct {
	w       *walked
	placed  map[string]pdfRef // "page mcid" → element
	counted map[string]int
	level   int
	marked  bool
	faults  []string
	painted int
}

func (c *tagCheck) fault(format string, args ...any) {
	c.faults = append(c.faults, fmt.Sprintf(format, args...))
}

// under says which parents an element may have; others may have any.
var under = map[string]string{
	"TR": "THead TBody Table", "TH": "TR", "TD": "TR", "THead": "Table", "TBody": "Table", "LI": "L", "Lbl": "LI", "LBody": "LI", "Caption": "Table Figure",
}

func (c *tagCheck) element(r pdfRef, parent string, depth int) {
	d := c.w.dict(r)
	role, _ := d["S"].(pdfName)
	if d == nil || depth > 30 {
		c.fault("element %d is missing", r)
		return
	}
	if want, ok := under[string(role)]; ok && !strings.Contains(want, parent) {
		c.fault("%s below %s", role, parent)
	}
	if len(role) == 2 && role[0] == 'H' && role[1] >= '1' && role[1] <= '6' {
		if l := int(role[1] - '0'); l > c.level+1 {
			c.fault("heading level %d after %d", l, c.level)
		} else {
			c.level = l
		}
	}
	if role == "Figure" {
		a := c.w.dict(d["A"])
		if len(c.w.text(d["Alt"])) == 0 || a["BBox"] == nil {
			c.fault("figure %d without text or box", r)
		}
	}
	if role == "TH" && c.w.dict(d["A"])["Scope"] != pdfName("Column") {
		c.fault("head cell %d without scope", r)
	}
	kids, _ := d["K"].([]any)
	for _, k := range kids {
		switch k := k.(type) {
		case pdfRef:
			c.element(k, string(role), depth+1)
		case float64:
			c.place(d["Pg"], int(k), r)
		case pdfDict:
			if k["Type"] == pdfName("MCR") {
				c.place(k["Pg"], int(k["MCID"].(float64)), r)
			}
		}
	}
}

func (c *tagCheck) place(pg any, mcid int, el pdfRef) {
	key := fmt.Sprintf("%v %d", pg, mcid)
	if _, ok := c.placed[key]; ok {
		c.fault("content %s is in the tree twice", key)
	}
	c.placed[key] = el
}

func (c *tagCheck) page(r pdfRef, back map[int]any) {
	d := c.w.dict(r)
	key, ok := d["StructParents"].(float64)
	if !ok || d["Tabs"] != pdfName("S") {
		c.fault("page %d without its place in the tree", r)
		return
	}
	owners, _ := back[int(key)].([]any)
	stream := d["Contents"].(pdfRef)
	text, err := inflate(c.w.dict(stream), c.w.streams[int(stream)], c.w.budget)
	if err != nil {
		c.fault("page %d: %v", r, err)
		return
	}
	c.content(r, text, owners)
	annots, _ := d["Annots"].([]any)
	for _, a := range annots {
		an := c.w.dict(a)
		n, ok := an["StructParent"].(float64)
		el, _ := back[int(n)].(pdfRef)
		if !ok || c.w.dict(el)["S"] != pdfName("Link") {
			c.fault("annotation %v has no link element", a)
			continue
		}
		found := false
		kids, _ := c.w.dict(el)["K"].([]any)
		for _, k := range kids {
			if o, ok := k.(pdfDict); ok && o["Type"] == pdfName("OBJR") && o["Obj"] == a {
				found = true
			}
		}
		if !found || an["F"] != float64(4) || an["Contents"] == nil {
			c.fault("annotation %v is not named by its element, not printed or not described", a)
		}
	}
}

// content walks a page's operators.
func (c *tagCheck) content(pg pdfRef, text []byte, owners []any) {
	p := parser{b: text}
	var open []bool // of marked content: whether it holds content or an artifact
	inside := 0
	var args []any
	for p.skip(); p.i < len(p.b); p.skip() {
		if at := p.i; true {
			v, err := p.value()
			if err == nil {
				args = append(args, v)
				continue
			}
			p.i = at
			for p.i < len(p.b) && !delimiter(p.b[p.i]) {
				p.i++
			}
			if p.i == at {
				c.fault("page %d: unreadable content at %d", pg, at)
				return
			}
			switch op := string(p.b[at:p.i]); op {
			case "BDC":
				tag, props := args[0].(pdfName), args[1].(pdfDict)
				holds := tag == "Artifact"
				if id, ok := props["MCID"].(float64); ok {
					holds = true
					key := fmt.Sprintf("%v %d", pg, int(id))
					if c.counted[key]++; c.counted[key] > 1 {
						c.fault("content %s is on the page twice", key)
					}
					if int(id) >= len(owners) || owners[int(id)] != any(c.placed[key]) {
						c.fault("content %s goes back to another element", key)
					}
				}
				if holds && inside > 0 {
					c.fault("page %d: content inside content", pg)
				}
				if open = append(open, holds); holds {
					inside++
				}
			case "BMC":
				open = append(open, false)
			case "EMC":
				if len(open) == 0 {
					c.fault("page %d: EMC without its begin", pg)
					return
				}
				if open[len(open)-1] {
					inside--
				}
				open = open[:len(open)-1]
			case "Tj", "TJ", "'", "\"", "S", "s", "f", "F", "f*", "B", "B*", "b", "b*", "sh", "Do":
				if c.painted++; inside == 0 {
					c.fault("page %d: %s outside marked content", pg, op)
				}
			}
			args = args[:0]
		}
	}
	if len(open) > 0 {
		c.fault("page %d: marked content is not closed", pg)
	}
}

func plainSample(t *testing.T) []byte {
	t.Helper()
	b, err := build(sample(), options{plain: true})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestTags(t *testing.T) {
	if f := tagFaults(mustWrite(t)); len(f) > 0 {
		t.Errorf("%d faults, first: %s", len(f), f[0])
	}
	b := plainSample(t)
	if f := tagFaults(b); len(f) > 0 {
		t.Errorf("%d faults, first: %s", len(f), f[0])
	}
	for _, d := range []struct{ name, old, new, want string }{
		{"number twice", "/TD <</MCID 41>>", "/TD <</MCID 42>>", "twice"},
		{"artifact untagged", "/Artifact <</Type /Layout>>", "/Artifakt <</Type /Layout>>", "outside marked content"},
		{"content untagged", "/H1 <</MCID 0>>", "/H1 <</MCIX 0>>", "outside marked content"},
		{"not closed", "EMC\n", "q Q\n", "not closed"},
		{"heading skipped", "<</S/H2/", "<</S/H5/", "heading level"},
		{"figure without text", "/Alt", "/Alx", "without text"},
		{"cell outside a row", "<</S/TR/", "<</S/TX/", "below"},
		{"head without scope", "/Scope /Column", "/Scopx /Column", "without scope"},
		{"link forgotten", "/Type/OBJR", "/Type/OBJX", "annotation"},
		{"no structure", "/StructTreeRoot ", "/StructTreeRoox ", "no structure tree"},
		{"order of tabs", "/Tabs/S", "/Tabs/R", "without its place"},
	} {
		t.Run(d.name, func(t *testing.T) {
			bad := bytes.Replace(b, []byte(d.old), []byte(d.new), 1)
			if bytes.Equal(bad, b) {
				t.Fatal("nothing damaged")
			}
			if f := strings.Join(tagFaults(bad), "\n"); !strings.Contains(f, d.want) {
				t.Errorf("not seen; said:\n%s", f)
			}
		})
	}
}
