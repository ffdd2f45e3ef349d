package pdf

import "bytes"

// walked is a file's objects; of several with one number the last counts.
type walked struct {
	objects   map[int]any
	streams   map[int][]byte // as stored
	order     []int          // numbers of embedded file streams, as met
	trailer   pdfDict
	encrypted bool
	budget    *int // bytes that may still be unpacked
	left      int  // values that may still be read
}

// scan walks the file from the front.
func scan(b []byte, budget *int) *walked {
	w := &walked{objects: map[int]any{}, streams: map[int][]byte{}, trailer: pdfDict{}, budget: budget, left: maxValues}
	closed := true // "endstream" may still come
	wasted := 0    // bytes of values given up
	for i := 0; i < len(b); {
		j := bytes.Index(b[i:], []byte("obj"))
		stop := len(b)
		if j >= 0 {
			stop = i + j
		}
		w.trailers(b[i:stop])
		if j < 0 {
			break
		}
		i = stop + 3
		n, ok := objectNumber(b[:stop])
		if !ok {
			continue
		}
		p := parser{b: b, i: i, left: &w.left}
		v, err := p.value()
		if err != nil {
			// Look inside what could not be read, but not for ever.
			if wasted += p.i - i; wasted > 4*len(b) {
				i = p.i
			}
			continue
		}
		i = p.i
		d, _ := v.(pdfDict)
		if d == nil || !p.keyword("stream") {
			w.objects[n] = v
			delete(w.streams, n)
			continue
		}
		start := p.i
		if start < len(b) && b[start] == '\r' {
			start++
		}
		if start < len(b) && b[start] == '\n' {
			start++
		}
		end := streamEnd(b, start, d, &closed)
		i = end
		w.object(n, d, b[start:end])
	}
	return w
}

// objectNumber reads "n g " before "obj".
func objectNumber(b []byte) (int, bool) {
	field := func() (int, bool) {
		for len(b) > 0 && space(b[len(b)-1]) {
			b = b[:len(b)-1]
		}
		n, pow, digits := 0, 1, 0
		for len(b) > 0 && digits < 8 && b[len(b)-1] >= '0' && b[len(b)-1] <= '9' {
			n += int(b[len(b)-1]-'0') * pow
			pow, digits, b = pow*10, digits+1, b[:len(b)-1]
		}
		return n, digits > 0
	}
	if len(b) > 64 {
		b = b[len(b)-64:]
	}
	if _, ok := field(); !ok {
		return 0, false
	}
	return field()
}

// streamEnd is where a stream's data end: after its length if "endstream"
// stands there, else before the next "endstream".
func streamEnd(b []byte, start int, d pdfDict, closed *bool) int {
	if n, ok := d["Length"].(float64); ok && n >= 0 && n <= float64(len(b)-start) {
		p := parser{b: b, i: start + int(n)}
		if p.keyword("endstream") {
			return start + int(n)
		}
	}
	if *closed {
		if i := bytes.Index(b[start:], []byte("endstream")); i >= 0 {
			return start + i
		}
		*closed = false
	}
	return len(b)
}

// trailers takes the entries of trailers in a stretch between objects.
func (w *walked) trailers(b []byte) {
	for {
		i := bytes.Index(b, []byte("trailer"))
		if i < 0 {
			return
		}
		p := parser{b: b, i: i + len("trailer"), left: &w.left}
		if v, err := p.value(); err == nil {
			if d, ok := v.(pdfDict); ok {
				w.take(d)
			}
		}
		b = b[i+len("trailer"):]
		if p.i > i+len("trailer") && p.i-i-len("trailer") <= len(b) {
			b = b[p.i-i-len("trailer"):]
		}
	}
}

func (w *walked) take(d pdfDict) {
	for _, k := range []pdfName{"Root", "Info"} {
		if v, ok := d[k]; ok {
			w.trailer[k] = v
		}
	}
	if d["Encrypt"] != nil {
		w.encrypted = true
	}
}

// object keeps a stream; those that hold objects or a cross-reference are
// read at once.
func (w *walked) object(n int, d pdfDict, data []byte) {
	w.objects[n] = d
	w.streams[n] = data
	switch d["Type"] {
	case pdfName("EmbeddedFile"):
		w.order = append(w.order, n)
	case pdfName("XRef"):
		w.take(d)
	case pdfName("ObjStm"):
		w.unpack(d, data)
	}
}

func (w *walked) unpack(d pdfDict, data []byte) {
	text, err := inflate(d, data, w.budget)
	first, ok := d["First"].(float64)
	if err != nil && len(text) == 0 || !ok || first < 0 || int(first) > len(text) {
		return
	}
	head := parser{b: text[:int(first)], left: &w.left}
	last := -1
	for {
		n, err := head.value()
		off, err2 := head.value()
		if err != nil || err2 != nil {
			return
		}
		num, ok := n.(float64)
		at, ok2 := off.(float64)
		// Objects stand in the order of their offsets, so that reading them is
		// linear in the stream's length.
		if !ok || !ok2 || at < 0 || int(at) <= last || int(first)+int(at) > len(text) {
			return
		}
		p := parser{b: text, i: int(first) + int(at), left: &w.left}
		v, err := p.value()
		if err != nil {
			return
		}
		last = p.i - int(first) - 1
		w.objects[int(num)] = v
		delete(w.streams, int(num))
	}
}
