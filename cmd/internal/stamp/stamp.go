// Package stamp writes the question that a time-stamping authority answers
// (RFC 3161): it names the digest of a seal and nothing else of it. It refuses
// to send anything anywhere, and to read the answer.
//
//	der, err := stamp.Request(entry.Sum)
package stamp

import (
	"encoding/asn1"
	"encoding/hex"
	"fmt"
)

// The request of RFC 3161, section 2.4.1. There is no nonce: the digest is of
// one seal only, and the same seal gives the same request.
type (
	request struct {
		Version int
		Imprint imprint
		CertReq bool
	}
	imprint struct {
		Algorithm algorithm
		Hashed    []byte
	}
	algorithm struct {
		ID         asn1.ObjectIdentifier
		Parameters asn1.RawValue
	}
)

// sha256 is id-sha256 of RFC 8017, appendix B.1.
var sha256 = [...]int{2, 16, 840, 1, 101, 3, 4, 2, 1}

// Request is the DER form of the request for a SHA-256 in hexadecimal digits.
// It asks for the certificate of the authority in the answer.
func Request(sum string) ([]byte, error) {
	digest, err := hex.DecodeString(sum)
	if err != nil || len(digest) != 32 {
		return nil, fmt.Errorf("%q is no SHA-256", sum)
	}
	return asn1.Marshal(request{1, imprint{algorithm{sha256[:], asn1.NullRawValue}, digest}, true})
}

// IsRequest reports whether bytes are a request as Request writes it.
func IsRequest(der []byte) bool {
	var r request
	rest, err := asn1.Unmarshal(der, &r)
	return err == nil && len(rest) == 0 && r.Version == 1 && len(r.Imprint.Hashed) == 32
}
