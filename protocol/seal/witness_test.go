package seal

import (
	"bytes"
	"io/fs"
	"os"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"github.com/google/go-cmp/cmp"
)

const witnesses = "../../testdata/witness"

// witnessed judges the record of testdata/witness with one more table.
func witnessed(t *testing.T, table string, files fs.FS) (*State, []string) {
	t.Helper()
	text, err := os.ReadFile(witnesses + "/trial.toml")
	if err != nil {
		t.Fatal(err)
	}
	chain, err := os.ReadFile(witnesses + "/trial.seal")
	if err != nil {
		t.Fatal(err)
	}
	rec := load(t, string(text)+"[[witness]]\nwhat = \"A time stamp.\"\n"+table)
	s, list := Compare(rec, nil, parsed(t, chain))
	list = append(list, s.Witness(rec, files)...)
	var codes []string
	for _, d := range list {
		codes = append(codes, d.Code)
	}
	return s, codes
}

// The tokens were made and verified by OpenSSL 3.0.19: testdata/witness/README.md.
func TestWitness(t *testing.T) {
	for _, tt := range []struct {
		name, table string
		outcome     string
		chain       bool
		precedes    bool
		why         string
		codes       []string
	}{
		{"stated", "seal = 1\n", Stated, false, false, "", nil},
		{"reply", "seal = 1\ntoken = \"rsa.tsr\"\nca = \"ca.pem\"\n", Verified, true, true, "", nil},
		{"bare token, DER", "seal = 1\ntoken = \"rsa.tst\"\nca = \"./ca.der\"\n", Verified, true, true, "", nil},
		{"SHA-384", "seal = 1\ntoken = \"rsa384.tsr\"\nca = \"ca.pem\"\n", Verified, true, true, "", nil},
		{"ECDSA", "seal = 1\ntoken = \"ecdsa.tsr\"\nca = \"ca.pem\"\n", Verified, true, true, "", nil},
		{"PSS", "seal = 1\ntoken = \"pss.tst\"\nca = \"ca.pem\"\n", Verified, true, true, "", nil},
		{"no authority named", "seal = 1\ntoken = \"rsa.tsr\"\n", Verified, false, false, "", nil},
		{"other digest", "seal = 1\ntoken = \"elsewhere.tsr\"\nca = \"ca.pem\"\n", OtherSeal, false, false, "not of seal 1 but of the digest 0000000000000000", []string{"L211"}},
		{"other authority", "seal = 1\ntoken = \"rsa.tsr\"\nca = \"other.pem\"\n", Refused, false, false, "does not lead to the authority", []string{"L212"}},
		{"wrong usage", "seal = 1\ntoken = \"usage.tst\"\n", Refused, false, false, "not one for time stamps only", []string{"L212"}},
		{"usage not critical", "seal = 1\ntoken = \"uncritical.tst\"\n", Refused, false, false, "not one for time stamps only", []string{"L212"}},
		{"expired", "seal = 1\ntoken = \"expired.tst\"\n", Refused, false, false, "not valid at its time", []string{"L212"}},
		{"no token", "seal = 1\ntoken = \"trial.toml\"\n", Unread, false, false, "no RFC 3161 reply", []string{"L210"}},
		{"no file", "seal = 1\ntoken = \"gone.tsr\"\n", Unread, false, false, "cannot be opened", []string{"L210"}},
		{"no seal", "seal = 2\ntoken = \"rsa.tsr\"\n", Unread, false, false, "no such seal", []string{"L209"}},
		{"no certificate", "seal = 1\ntoken = \"rsa.tsr\"\nca = \"rsa.tsr\"\n", Unread, false, false, "certificate", []string{"L213"}},
		{"other time", "seal = 1\nat = 2026-11-30T12:00:00Z\ntoken = \"rsa.tsr\"\nca = \"ca.pem\"\n", Verified, true, true, "", []string{"L214"}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			s, codes := witnessed(t, tt.table, os.DirFS(witnesses))
			if diff := cmp.Diff(tt.codes, codes); diff != "" {
				t.Error(diff)
			}
			w := s.Witnesses[0]
			if w.Outcome != tt.outcome || w.Chain != tt.chain || w.Precedes != tt.precedes || s.Proved() != tt.precedes ||
				!strings.Contains(w.Why, tt.why) || (w.Why == "") != (tt.why == "") {
				t.Errorf("%+v", w)
			}
			if w.Outcome == Verified && (w.At.Format("2006-01-02") != "2026-12-01" || w.Authority == "") {
				t.Errorf("%s, %q", w.At, w.Authority)
			}
		})
	}
}

// A seal whose clock ran after the token, and results that came before it.
func TestWitnessTimes(t *testing.T) {
	for _, tt := range []struct {
		shift time.Duration
		want  []string
	}{{0, nil}, {48 * time.Hour, []string{"L215"}}} {
		s, _ := witnessed(t, "seal = 1\n", nil)
		s.Entries[0].Time = s.Entries[0].Time.Add(tt.shift)
		rec := load(t, planned+arrived+"[[witness]]\nseal = 1\nwhat = \"W\"\ntoken = \"rsa.tsr\"\nca = \"ca.pem\"\n")
		s.Witnesses = nil
		var got []string
		for _, d := range s.Witness(rec, os.DirFS(witnesses)) {
			got = append(got, d.Code)
		}
		if diff := cmp.Diff(tt.want, got); diff != "" {
			t.Error(diff)
		}
		if s.Proved() {
			t.Error("a token proves the order of results that are older")
		}
	}
}

// No byte of a reply can be changed, and no file be cut, so that the reply
// still shows another time, another signer or another digest.
func TestTamperedToken(t *testing.T) {
	reply, err := os.ReadFile(witnesses + "/rsa.tsr")
	if err != nil {
		t.Fatal(err)
	}
	read := func(der []byte) (*token, bool) {
		tok, err := parseToken(der)
		if err != nil {
			return nil, false
		}
		_, err = tok.verify(nil)
		return tok, err == nil
	}
	want, ok := read(reply)
	if !ok {
		t.Fatal("the reply itself is refused")
	}
	refused := 0
	for i := range reply {
		if _, ok := read(reply[:i]); ok {
			t.Fatalf("%d bytes of it are a reply", i)
		}
		changed := bytes.Clone(reply)
		changed[i] ^= 1
		got, ok := read(changed)
		if !ok {
			refused++
			continue
		}
		if !got.at.Equal(want.at) || !bytes.Equal(got.info.Imprint.Hashed, want.info.Imprint.Hashed) || !bytes.Equal(got.certs[0].Raw, want.certs[0].Raw) {
			t.Errorf("byte %d changed and the token accepted", i)
		}
	}
	if refused < len(reply)*9/10 {
		t.Errorf("only %d of %d changes were refused", refused, len(reply))
	}
}

func TestWitnessStaysInItsFolder(t *testing.T) {
	big := fstest.MapFS{"big": {Data: make([]byte, maxToken+1)}, "empty": {}, "d/x": {}}
	for _, name := range []string{"../a", "/etc/a", "", `d\a`, "d", "big", "empty", "gone"} {
		if _, err := readSmall(big, name, maxToken); err == nil {
			t.Errorf("%q is read", name)
		}
	}
	if _, err := readSmall(nil, "a", 1); err == nil {
		t.Error("without files, one is read")
	}
}

func FuzzToken(f *testing.F) {
	for _, name := range []string{"rsa.tsr", "rsa.tst", "ecdsa.tsr", "pss.tst", "elsewhere.tsr", "ca.der"} {
		der, err := os.ReadFile(witnesses + "/" + name)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(der)
	}
	ca, err := authority(os.DirFS(witnesses), "ca.pem")
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, der []byte) {
		tok, err := parseToken(der)
		if err == nil {
			_, _ = tok.verify(nil)
			_, _ = tok.verify(ca)
		}
		_, _ = certificates(der)
	})
}
