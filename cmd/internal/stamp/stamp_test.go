package stamp

import (
	"encoding/hex"
	"testing"
)

// From OpenSSL 3.0.19: openssl ts -query -sha256 -cert -no_nonce -digest
// e3b0…b855 -out o.tsq; xxd -p o.tsq; run 2026-12-01. The digest is the
// SHA-256 of nothing.
const (
	nothing  = "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"
	outsider = "30390201013031300d060960864801650304020105000420e3b0c44298fc" +
		"1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b8550101ff"
)

func TestRequest(t *testing.T) {
	der, err := Request(nothing)
	if err != nil {
		t.Fatal(err)
	}
	if got := hex.EncodeToString(der); got != outsider {
		t.Errorf("got  %s\nwant %s", got, outsider)
	}
	if !IsRequest(der) {
		t.Error("it does not read back")
	}
	for n := range der {
		if IsRequest(der[:n]) {
			t.Errorf("%d bytes of it are a request", n)
		}
	}
	if IsRequest(append(der, 0)) || IsRequest([]byte("%PDF-1.7")) {
		t.Error("anything is a request")
	}
	for _, sum := range []string{"", "x", nothing[2:], nothing + "00"} {
		if _, err := Request(sum); err == nil {
			t.Errorf("%q is accepted", sum)
		}
	}
}
