package seal

import (
	"bytes"
	"crypto"
	"crypto/x509"
	"crypto/x509/pkix"
	"encoding/asn1"
	"errors"
	"fmt"
	"slices"
)

// verify holds the signature of a token against its signer's certificate, the
// certificate against what RFC 3161, section 2.3, demands, and, unless ca is
// nil, its chain against ca, all as of the token's time. Revocation is not
// looked up. The certificate is returned where it was found.
func (t *token) verify(ca []*x509.Certificate) (*x509.Certificate, error) {
	cert := t.signerCertificate(ca)
	if cert == nil {
		return nil, errors.New("the certificate of its signer is neither in it nor in the file of the authority")
	}
	if err := t.attributes(cert); err != nil {
		return cert, err
	}
	algorithm, err := signatureAlgorithm(t.signer)
	if err != nil {
		return cert, err
	}
	// The attributes are signed as a SET, RFC 5652, section 5.4.
	signed := append([]byte{0x31}, t.signer.Attributes.FullBytes[1:]...)
	if err := cert.CheckSignature(algorithm, signed, t.signer.Signature); err != nil {
		return cert, errors.New("its signature is not that of the certificate")
	}
	if err := stamps(cert); err != nil {
		return cert, err
	}
	if t.at.Before(cert.NotBefore) || t.at.After(cert.NotAfter) {
		return cert, errors.New("the certificate of its signer was not valid at its time")
	}
	if ca == nil {
		return cert, nil
	}
	return cert, t.chain(cert, ca)
}

// chain looks for a path from the signer to one of the authority's
// certificates. No other certificate is trusted, whatever the machine holds.
func (t *token) chain(cert *x509.Certificate, ca []*x509.Certificate) error {
	roots, between := x509.NewCertPool(), x509.NewCertPool()
	for _, c := range ca {
		roots.AddCert(c)
	}
	for _, c := range t.certs {
		between.AddCert(c)
	}
	_, err := cert.Verify(x509.VerifyOptions{Roots: roots, Intermediates: between, CurrentTime: t.at,
		KeyUsages: []x509.ExtKeyUsage{x509.ExtKeyUsageTimeStamping}})
	var invalid x509.CertificateInvalidError
	switch {
	case err == nil:
		return nil
	case errors.As(err, &invalid) && invalid.Reason == x509.Expired:
		return errors.New("a certificate between its signer and the authority was not valid at its time")
	}
	return errors.New("its certificate does not lead to the authority in the file")
}

// signerCertificate finds the certificate that the signer names by issuer and
// number or by its key.
func (t *token) signerCertificate(ca []*x509.Certificate) *x509.Certificate {
	id := t.signer.ID
	for _, c := range slices.Concat(t.certs, ca) {
		if id.Class == asn1.ClassContextSpecific && id.Tag == 0 {
			if len(id.Bytes) > 0 && bytes.Equal(c.SubjectKeyId, id.Bytes) {
				return c
			}
			continue
		}
		var n issuerSerial
		if whole(id.FullBytes, &n, "") == nil && n.Serial.Cmp(c.SerialNumber) == 0 && bytes.Equal(n.Issuer.FullBytes, c.RawIssuer) {
			return c
		}
	}
	return nil
}

// attributes checks what is signed: the kind of content, its digest, and which
// certificate signs (RFC 5652, section 11; RFC 5035).
func (t *token) attributes(cert *x509.Certificate) error {
	if len(t.signer.Attributes.FullBytes) == 0 {
		return errors.New("it has no signed attributes")
	}
	hash, err := hashOf(t.signer.Digest.ID)
	if err != nil {
		return err
	}
	found := map[string][]byte{}
	for rest := t.signer.Attributes.Bytes; len(rest) > 0; {
		var a attribute
		if rest, err = asn1.Unmarshal(rest, &a); err != nil || len(a.Values) == 0 {
			return errors.New("its signed attributes cannot be read")
		}
		if _, twice := found[a.Type.String()]; twice {
			return errors.New("a signed attribute stands twice")
		}
		found[a.Type.String()] = a.Values[0].FullBytes
	}
	var kind asn1.ObjectIdentifier
	if whole(found["1.2.840.113549.1.9.3"], &kind, "") != nil || !kind.Equal(t.signed.Content.Type) {
		return errors.New("its signature is for another kind of content")
	}
	var digest []byte
	if whole(found["1.2.840.113549.1.9.4"], &digest, "") != nil || !bytes.Equal(digest, sum(hash, t.signed.Content.Content)) {
		return errors.New("its signature is for another content")
	}
	switch older, newer := found["1.2.840.113549.1.9.16.2.12"], found["1.2.840.113549.1.9.16.2.47"]; {
	case newer != nil:
		return names(newer, cert, crypto.SHA256)
	case older != nil:
		return names(older, cert, crypto.SHA1)
	}
	return errors.New("it does not say which certificate signs it")
}

// names checks that the first certificate that an attribute names, by its
// digest, is the signer's. Hash is the digest where it names none.
func names(value []byte, cert *x509.Certificate, hash crypto.Hash) error {
	no := errors.New("it names another certificate as that of its signer")
	var list struct {
		Certs    []asn1.RawValue
		Policies asn1.RawValue `asn1:"optional"`
	}
	if whole(value, &list, "") != nil || len(list.Certs) == 0 {
		return no
	}
	first := list.Certs[0].Bytes
	var id algorithmID
	if hash == crypto.SHA256 {
		if rest, err := asn1.Unmarshal(first, &id); err == nil && len(id.ID) > 0 {
			if hash, err = hashOf(id.ID); err != nil {
				return err
			}
			first = rest
		}
	}
	var digest []byte
	if _, err := asn1.Unmarshal(first, &digest); err != nil || !bytes.Equal(digest, sum(hash, cert.Raw)) {
		return no
	}
	return nil
}

// stamps checks that a certificate is for time stamps and for nothing else.
func stamps(c *x509.Certificate) error {
	critical := slices.ContainsFunc(c.Extensions, func(e pkix.Extension) bool {
		return e.Id.Equal(oid(2, 5, 29, 37)) && e.Critical
	})
	if !critical || len(c.UnknownExtKeyUsage) > 0 || len(c.ExtKeyUsage) != 1 || c.ExtKeyUsage[0] != x509.ExtKeyUsageTimeStamping {
		return errors.New("the certificate of its signer is not one for time stamps only")
	}
	if c.KeyUsage != 0 && c.KeyUsage&(x509.KeyUsageDigitalSignature|x509.KeyUsageContentCommitment) == 0 {
		return errors.New("the certificate of its signer is not one for signatures")
	}
	return nil
}

func sum(h crypto.Hash, text []byte) []byte {
	w := h.New()
	w.Write(text)
	return w.Sum(nil)
}

// hashOf knows SHA-256, SHA-384 and SHA-512.
func hashOf(id asn1.ObjectIdentifier) (crypto.Hash, error) {
	for last, h := range map[int]crypto.Hash{1: crypto.SHA256, 2: crypto.SHA384, 3: crypto.SHA512} {
		if id.Equal(oid(2, 16, 840, 1, 101, 3, 4, 2, last)) {
			return h, nil
		}
	}
	return 0, fmt.Errorf("it uses a digest that this program does not check, %s", id)
}

// signatureAlgorithm knows RSA, by PKCS #1 1.5 and PSS, and ECDSA, each with
// the three digests (RFC 8017, appendix A.2; RFC 5758, section 3.2).
func signatureAlgorithm(s signerInfo) (x509.SignatureAlgorithm, error) {
	pkcs := map[crypto.Hash]x509.SignatureAlgorithm{crypto.SHA256: x509.SHA256WithRSA, crypto.SHA384: x509.SHA384WithRSA, crypto.SHA512: x509.SHA512WithRSA}
	pss := map[crypto.Hash]x509.SignatureAlgorithm{crypto.SHA256: x509.SHA256WithRSAPSS, crypto.SHA384: x509.SHA384WithRSAPSS, crypto.SHA512: x509.SHA512WithRSAPSS}
	ec := map[crypto.Hash]x509.SignatureAlgorithm{crypto.SHA256: x509.ECDSAWithSHA256, crypto.SHA384: x509.ECDSAWithSHA384, crypto.SHA512: x509.ECDSAWithSHA512}
	hash, err := hashOf(s.Digest.ID)
	if err != nil {
		return 0, err
	}
	switch id := s.Algorithm.ID.String(); id {
	case "1.2.840.113549.1.1.1":
		return pkcs[hash], nil
	case "1.2.840.113549.1.1.11":
		return x509.SHA256WithRSA, nil
	case "1.2.840.113549.1.1.12":
		return x509.SHA384WithRSA, nil
	case "1.2.840.113549.1.1.13":
		return x509.SHA512WithRSA, nil
	case "1.2.840.113549.1.1.10":
		return pss[hash], nil // RFC 4056, section 3: the same digest
	case "1.2.840.10045.2.1":
		return ec[hash], nil
	case "1.2.840.10045.4.3.2":
		return x509.ECDSAWithSHA256, nil
	case "1.2.840.10045.4.3.3":
		return x509.ECDSAWithSHA384, nil
	case "1.2.840.10045.4.3.4":
		return x509.ECDSAWithSHA512, nil
	default:
		return 0, fmt.Errorf("it uses a signature that this program does not check, %s", id)
	}
}
