package pdf

// elem is one element of the structure tree. It joins its parent when its
// first content is drawn, so that the tree has the order of the pages.
type elem struct {
	role   string
	parent *elem
	kids   []kid
	joined bool

	alt   string
	attrs string // attribute dictionaries, as written
	id    string
	title string

	target string // of links
	box    [4]float64
	boxed  bool
	object int // set by the post-pass
}

// kid is a child: an element, marked content on a page, or an annotation.
type kid struct {
	el    *elem
	page  int
	mcid  int
	annot int // 1 and up
}

func (e *elem) child(role string) *elem { return &elem{role: role, parent: e} }

// join puts the element and those above it into the tree.
func (e *elem) join() {
	if e.joined {
		return
	}
	e.joined = true
	if e.parent != nil {
		e.parent.join()
		e.parent.kids = append(e.parent.kids, kid{el: e})
	}
}
