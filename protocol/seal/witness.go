package seal

import (
	"bytes"
	"crypto/sha256"
	"crypto/x509"
	"encoding/hex"
	"encoding/pem"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path"
	"strings"
	"time"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// What became of a witness.
const (
	Stated    = "stated"       // no token: as the record says, not checked
	Verified  = "verified"     // the token is of this seal and its signature holds
	OtherSeal = "other-digest" // the token is of something else than the seal named
	Refused   = "refused"      // its signature, certificate or chain does not hold
	Unread    = "unread"       // the files cannot be read or checked
)

// maxAuthority bounds the file of an authority.
const maxAuthority = 256 << 10

// Witness is what became of one [[witness]].
type Witness struct {
	Seal    int
	Outcome string
	Why     string // why the outcome is not Verified or Stated

	// Of a token that was verified.
	At        time.Time     // the time in the token, UTC
	Within    time.Duration // its accuracy as the authority states it; 0: not stated
	Authority string        // who signed, as the signer's certificate says
	Chain     bool          // the certificate leads to the authority in the record's own file
	CA        []string      // SHA-256 of each certificate in that file

	// Precedes says that the token is of a seal that binds results, its chain
	// was verified, and its time precedes every result that this seal or one
	// before it binds, everywhere on Earth.
	Precedes bool
}

// Proved reports whether outside evidence shows that the seal of every result
// preceded it: as far as the authority in the record's file is trusted, and
// the dates of the results are right.
func (s *State) Proved() bool {
	if s == nil || s.Order != BeforeResults || len(s.Binds) == 0 {
		return false
	}
	for _, b := range s.Binds {
		seen := false
		for _, w := range s.Witnesses {
			seen = seen || w.Precedes && w.Seal >= b.Seal
		}
		if !seen {
			return false
		}
	}
	return true
}

// Witness checks every [[witness]] of the record with the files it names and
// fills s.Witnesses, one for each in order. It trusts no authority but the one
// in the record's own file, looks up no revocation, and reads nothing outside
// files; nil refuses every file. Nothing is checked against a broken chain.
func (s *State) Witness(rec *record.Record, files fs.FS) (list diag.List) {
	for _, w := range rec.Witnesses {
		if w == nil {
			continue
		}
		out := Witness{Seal: int(w.Seal.V), Outcome: Stated}
		if w.Token.Stated {
			s.check(w, files, &out, &list)
		}
		s.Witnesses = append(s.Witnesses, out)
	}
	for i := range s.Witnesses {
		s.Witnesses[i].Precedes = s.precedes(&s.Witnesses[i], rec)
	}
	return list
}

func (s *State) check(w *record.Witness, files fs.FS, out *Witness, list *diag.List) {
	fail := func(outcome, code string, at diag.Span, why error) {
		out.Outcome, out.Why = outcome, why.Error()
		list.Add(diag.Warning(code, at, "the token is no proof: %s", why).
			WithHelp("the record prints this witness as not verified"))
	}
	if s.State == Broken || w.Seal.V < 1 || w.Seal.V > int64(len(s.Entries)) {
		out.Outcome, out.Why = Unread, "there is no such seal to compare it with"
		return // the chain or L209 says so
	}
	text, err := readSmall(files, w.Token.V, maxToken)
	var t *token
	if err == nil {
		t, err = parseToken(text)
	}
	if err != nil {
		fail(Unread, "L210", w.Token.Span, err)
		return
	}
	var ca []*x509.Certificate
	if w.CA.Stated {
		if ca, err = authority(files, w.CA.V); err != nil {
			fail(Unread, "L213", w.CA.Span, err)
			return
		}
	}
	digest, err := hex.DecodeString(s.Entries[w.Seal.V-1].Sum)
	if _, known := hashOf(t.info.Imprint.Algorithm.ID); err == nil {
		err = known
	}
	if err != nil {
		fail(Unread, "L210", w.Token.Span, err)
		return
	}
	if !t.info.Imprint.Algorithm.ID.Equal(oid(2, 16, 840, 1, 101, 3, 4, 2, 1)) || !bytes.Equal(t.info.Imprint.Hashed, digest) {
		fail(OtherSeal, "L211", w.Token.Span, fmt.Errorf("it is not of seal %d but of the digest %x", w.Seal.V, t.info.Imprint.Hashed[:min(8, len(t.info.Imprint.Hashed))]))
		return
	}
	cert, err := t.verify(ca)
	if err != nil {
		fail(Refused, "L212", w.Token.Span, err)
		return
	}
	out.Outcome, out.At, out.Within, out.Chain = Verified, t.at.UTC(), t.within, ca != nil
	out.Authority = nameOf(cert)
	for _, c := range ca {
		out.CA = append(out.CA, fmt.Sprintf("%x", sha256.Sum256(c.Raw)))
	}
	s.times(w, out, list)
}

// times warns where the token contradicts a time that the record or the chain
// states, by more than its accuracy and a minute.
func (s *State) times(w *record.Witness, out *Witness, list *diag.List) {
	slack := out.Within + time.Minute
	if d := w.At.V.Sub(out.At).Abs(); w.At.Stated && d > slack {
		list.Add(diag.Warning("L214", w.At.Span, "the token bears another time, %s", out.At.Format(time.RFC3339)).
			WithHelp("write the time of the token, or leave at out"))
	}
	if sealed := s.Entries[w.Seal.V-1].Time; sealed.After(out.At.Add(slack)) {
		list.Add(diag.Warning("L215", w.Seal.Span, "seal %d bears the time %s and was witnessed before, at %s: the clock of the seal was wrong",
			w.Seal.V, sealed.Format(time.RFC3339), out.At.Format(time.RFC3339)).WithHelp("rely on the time of the token"))
	}
}

func (s *State) precedes(w *Witness, rec *record.Record) bool {
	if w.Outcome != Verified || !w.Chain {
		return false
	}
	some := false
	for i, r := range rec.Results {
		if i >= len(s.Binds) || s.Binds[i].Seal < 1 || s.Binds[i].Seal > w.Seal {
			continue
		}
		if earliest, _ := window(r); !w.At.Add(w.Within).Before(earliest) {
			return false
		}
		some = true
	}
	return some
}

// nameOf is how a certificate names its holder, without control characters.
func nameOf(c *x509.Certificate) string {
	name := c.Subject.CommonName
	if name == "" {
		name = c.Subject.String()
	}
	if o := c.Subject.Organization; c.Subject.CommonName != "" && len(o) > 0 {
		name += ", " + o[0]
	}
	name = strings.Join(strings.Fields(strings.Map(func(r rune) rune {
		if r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0 || r >= 0x200b && r <= 0x200f || r >= 0x2028 && r <= 0x202e || r >= 0x2066 && r <= 0x2069 || r == 0xfeff {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(name, "�"))), " ")
	if r := []rune(name); len(r) > 120 {
		name = string(r[:119]) + "…"
	}
	if name == "" {
		return "without a name"
	}
	return name
}

// authority reads the certificates of a file, PEM or DER.
func authority(files fs.FS, name string) (out []*x509.Certificate, err error) {
	text, err := readSmall(files, name, maxAuthority)
	if err != nil {
		return nil, err
	}
	if !bytes.Contains(text, []byte("-----BEGIN ")) {
		out, err = certificates(text)
	}
	for rest := text; err == nil && len(out) <= maxCerts; {
		var block *pem.Block
		if block, rest = pem.Decode(rest); block == nil {
			break
		}
		if block.Type != "CERTIFICATE" { // the file goes into the document: no key may
			return nil, fmt.Errorf("%s holds something else than certificates", path.Base(name))
		}
		var c *x509.Certificate
		if c, err = certificate(block.Bytes); err == nil {
			out = append(out, c)
		}
	}
	switch {
	case err != nil:
		return nil, fmt.Errorf("%s: %w", path.Base(name), err)
	case len(out) == 0:
		return nil, fmt.Errorf("%s holds no certificate", path.Base(name))
	case len(out) > maxCerts:
		return nil, fmt.Errorf("%s holds more than %d certificates", path.Base(name), maxCerts)
	}
	return out, nil
}

// readSmall reads a file of the record's folder of at most size bytes.
func readSmall(files fs.FS, name string, size int64) ([]byte, error) {
	clean := path.Clean(name)
	if files == nil || name == "" || strings.Contains(name, `\`) || !fs.ValidPath(clean) {
		return nil, fmt.Errorf("%s is no file of the record's folder", quote(name))
	}
	f, err := files.Open(clean)
	if err != nil {
		return nil, fmt.Errorf("%s cannot be opened", quote(name))
	}
	defer f.Close()
	if info, err := f.Stat(); err != nil || !info.Mode().IsRegular() {
		return nil, fmt.Errorf("%s is no file", quote(name))
	}
	text, err := io.ReadAll(io.LimitReader(f, size+1))
	switch {
	case err != nil:
		return nil, fmt.Errorf("%s cannot be read", quote(name))
	case int64(len(text)) > size:
		return nil, fmt.Errorf("%s is larger than %d KiB", quote(name), size>>10)
	case len(text) == 0:
		return nil, errors.New("its file is empty")
	}
	return text, nil
}
