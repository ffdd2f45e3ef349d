package seal

import (
	"crypto/rsa"
	_ "crypto/sha1" // names certificates in older tokens, signs nothing here
	_ "crypto/sha256"
	_ "crypto/sha512"
	"crypto/x509"
	"encoding/asn1"
	"errors"
	"fmt"
	"math/big"
	"time"
)

// Bounds on what is read: real tokens have some kilobytes.
const (
	maxToken   = 64 << 10
	maxCerts   = 16
	maxRSABits = 8192
)

// The structures of RFC 5652 (CMS), sections 3, 5.1 and 5.3, and RFC 3161,
// section 2.4.2.
type (
	algorithmID struct {
		ID         asn1.ObjectIdentifier
		Parameters asn1.RawValue `asn1:"optional"`
	}
	contentInfo struct {
		Type    asn1.ObjectIdentifier
		Content asn1.RawValue `asn1:"explicit,tag:0"`
	}
	signedData struct {
		Version      int
		Digests      []algorithmID `asn1:"set"`
		Content      encapsulated
		Certificates asn1.RawValue `asn1:"optional,tag:0"`
		CRLs         asn1.RawValue `asn1:"optional,tag:1"`
		Signers      []signerInfo  `asn1:"set"`
	}
	encapsulated struct {
		Type    asn1.ObjectIdentifier
		Content []byte `asn1:"explicit,optional,tag:0"`
	}
	signerInfo struct {
		Version    int
		ID         asn1.RawValue
		Digest     algorithmID
		Attributes asn1.RawValue `asn1:"optional,tag:0"`
		Algorithm  algorithmID
		Signature  []byte
		Unsigned   asn1.RawValue `asn1:"optional,tag:1"`
	}
	attribute struct {
		Type   asn1.ObjectIdentifier
		Values []asn1.RawValue `asn1:"set"`
	}
	issuerSerial struct {
		Issuer asn1.RawValue
		Serial *big.Int
	}
	tstInfo struct {
		Version    int
		Policy     asn1.ObjectIdentifier
		Imprint    imprint
		Serial     *big.Int
		Time       asn1.RawValue
		Accuracy   accuracy      `asn1:"optional"`
		Ordering   bool          `asn1:"optional"`
		Nonce      *big.Int      `asn1:"optional"`
		Authority  asn1.RawValue `asn1:"optional,explicit,tag:0"`
		Extensions asn1.RawValue `asn1:"optional,tag:1"`
	}
	imprint struct {
		Algorithm algorithmID
		Hashed    []byte
	}
	accuracy struct {
		Seconds int `asn1:"optional"`
		Millis  int `asn1:"optional,tag:0"`
		Micros  int `asn1:"optional,tag:1"`
	}
	response struct {
		Status asn1.RawValue
		Token  asn1.RawValue `asn1:"optional"`
	}
)

// oid writes an object identifier; those here are of RFC 5652, 3161, 5035,
// 8017, 5758 and 5280.
func oid(arcs ...int) asn1.ObjectIdentifier { return arcs }

// token is a time-stamp token, read but not judged.
type token struct {
	info   tstInfo
	at     time.Time
	within time.Duration // the accuracy that the authority states; 0: none
	signed signedData
	signer signerInfo
	certs  []*x509.Certificate
}

// parseToken reads a TimeStampResp or a bare token, both in DER, of at most
// 64 KiB. It judges form only; verify judges the rest.
func parseToken(der []byte) (*token, error) {
	if len(der) > maxToken {
		return nil, fmt.Errorf("it is larger than %d KiB", maxToken>>10)
	}
	content, err := tokenContent(der)
	if err != nil {
		return nil, err
	}
	t := &token{}
	if err := whole(content, &t.signed, "signed data"); err != nil {
		return nil, err
	}
	if !t.signed.Content.Type.Equal(oid(1, 2, 840, 113549, 1, 9, 16, 1, 4)) {
		return nil, errors.New("what it signs is no time stamp")
	}
	if err := whole(t.signed.Content.Content, &t.info, "the time stamp"); err != nil {
		return nil, err
	}
	if t.info.Version != 1 {
		return nil, fmt.Errorf("its time stamp is of version %d, not 1", t.info.Version)
	}
	if t.at, err = genTime(t.info.Time); err != nil {
		return nil, err
	}
	a := t.info.Accuracy
	if a.Seconds < 0 || a.Seconds > 1<<30 || a.Millis < 0 || a.Millis > 999 || a.Micros < 0 || a.Micros > 999 {
		return nil, errors.New("its accuracy is out of range")
	}
	t.within = time.Duration(a.Seconds)*time.Second + time.Duration(a.Millis)*time.Millisecond + time.Duration(a.Micros)*time.Microsecond
	if n := len(t.signed.Signers); n != 1 {
		return nil, fmt.Errorf("it has %d signers, not 1", n)
	}
	t.signer = t.signed.Signers[0]
	t.certs, err = certificates(t.signed.Certificates.Bytes)
	return t, err
}

// tokenContent is the SignedData inside a reply or a token.
func tokenContent(der []byte) ([]byte, error) {
	if len(der) == 0 {
		return nil, errors.New("it is empty")
	}
	var outer contentInfo
	rest, err := asn1.Unmarshal(der, &outer)
	if err != nil {
		var r response
		if err := whole(der, &r, "the reply"); err != nil {
			return nil, errors.New("it is no RFC 3161 reply or token in DER")
		}
		var status int
		if _, err := asn1.Unmarshal(r.Status.Bytes, &status); err != nil || r.Status.Tag != asn1.TagSequence {
			return nil, errors.New("it is no RFC 3161 reply or token in DER")
		}
		if status != 0 && status != 1 {
			return nil, fmt.Errorf("the authority refused the request, with status %d", status)
		}
		if len(r.Token.FullBytes) == 0 {
			return nil, errors.New("the reply holds no token")
		}
		if rest, err = asn1.Unmarshal(r.Token.FullBytes, &outer); err != nil {
			return nil, errors.New("the reply holds no token that can be read")
		}
	}
	if len(rest) > 0 {
		return nil, errors.New("bytes follow it")
	}
	if !outer.Type.Equal(oid(1, 2, 840, 113549, 1, 7, 2)) {
		return nil, errors.New("it holds no signed data")
	}
	return outer.Content.Bytes, nil
}

// whole reads one value that fills its bytes.
func whole(der []byte, into any, what string) error {
	rest, err := asn1.Unmarshal(der, into)
	if err != nil || len(rest) > 0 {
		return fmt.Errorf("%s cannot be read", what)
	}
	return nil
}

// genTime reads a GeneralizedTime in UTC, with or without a fraction of a
// second (RFC 3161, section 2.4.2).
func genTime(v asn1.RawValue) (time.Time, error) {
	at, err := time.Parse("20060102150405Z", string(v.Bytes)) // a fraction is accepted after the seconds
	if err != nil || v.Class != asn1.ClassUniversal || v.Tag != asn1.TagGeneralizedTime || v.IsCompound {
		return time.Time{}, errors.New("its time cannot be read")
	}
	return at, nil
}

// certificates reads certificates that stand one after the other.
func certificates(der []byte) (out []*x509.Certificate, err error) {
	for len(der) > 0 {
		var raw asn1.RawValue
		if der, err = asn1.Unmarshal(der, &raw); err != nil {
			return nil, errors.New("a certificate cannot be read")
		}
		if raw.Class != asn1.ClassUniversal {
			continue // an attribute certificate, or another kind that signs nothing here
		}
		c, err := certificate(raw.FullBytes)
		if err != nil {
			return nil, err
		}
		if out = append(out, c); len(out) > maxCerts {
			return nil, fmt.Errorf("there are more than %d certificates", maxCerts)
		}
	}
	return out, nil
}

func certificate(der []byte) (*x509.Certificate, error) {
	c, err := x509.ParseCertificate(der)
	if err != nil {
		return nil, errors.New("a certificate cannot be read")
	}
	if k, ok := c.PublicKey.(*rsa.PublicKey); ok && k.N.BitLen() > maxRSABits {
		return nil, fmt.Errorf("a certificate has a key of more than %d bits", maxRSABits)
	}
	return c, nil
}
