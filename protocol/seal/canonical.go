// Package seal holds the promise of a record: the canonical form of its plan,
// the chain of seals beside it, and how the plan and the results stand now to
// what was sealed. It works on bytes and typed records, reads no clock, no
// disk and no data, and knows nothing of an effect.
//
//	sum := seal.PlanDigest(rec)
//	chain, faults := seal.Parse("trial.seal", text)
//	state := seal.Compare(rec, chain)
package seal

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
	"slices"
	"strconv"
	"time"
	"unicode/utf16"

	"steelyard/protocol/record"
)

// Canonical is the canonical JSON (RFC 8785) of the values a user stated:
// tables by the order of their keys, arrays as they stand, numbers as
// ECMAScript writes them, dates and times as their text, infinities as the
// texts "inf" and "-inf". Comments, layout, order of tables and the way a table
// is written leave it as it is. A nil node gives nil.
func Canonical(n *record.Node) []byte {
	if n == nil {
		return nil
	}
	return appendNode(nil, n)
}

// PlanDigest is the SHA-256, in hexadecimal digits, of the canonical plan of a
// record; "" when it has none.
func PlanDigest(rec *record.Record) string {
	if plan := rec.Tree.Get("plan"); plan != nil {
		return Digest(Canonical(plan))
	}
	return ""
}

// Digest is the SHA-256 of bytes in lower-case hexadecimal digits.
func Digest(b []byte) string {
	sum := sha256.Sum256(b)
	return hex.EncodeToString(sum[:])
}

// Seed derives the default seed from a plan's digest: the first 53 bits of
// its SHA-256, so that it is below 2^53. What is no digest is hashed first.
func Seed(digest string) uint64 {
	sum, err := hex.DecodeString(digest)
	if err != nil || len(sum) != sha256.Size {
		again := sha256.Sum256([]byte(digest))
		sum = again[:]
	}
	return binary.BigEndian.Uint64(sum) >> 11
}

func appendNode(b []byte, n *record.Node) []byte {
	switch n.Kind {
	case record.TableNode:
		entries := slices.Clone(n.Entries)
		slices.SortStableFunc(entries, func(x, y record.Entry) int { return compareUTF16(x.Key, y.Key) })
		b = append(b, '{')
		for i, e := range entries {
			if i > 0 {
				b = append(b, ',')
			}
			b = appendString(b, e.Key)
			b = append(b, ':')
			b = appendNode(b, e.Value)
		}
		return append(b, '}')
	case record.ArrayNode:
		b = append(b, '[')
		for i, item := range n.Items {
			if i > 0 {
				b = append(b, ',')
			}
			b = appendNode(b, item)
		}
		return append(b, ']')
	case record.StringNode:
		return appendString(b, n.Text)
	case record.IntegerNode:
		return appendNumber(b, float64(n.Int))
	case record.FloatNode:
		return appendNumber(b, n.Float)
	case record.BoolNode:
		return strconv.AppendBool(b, n.Bool)
	case record.InstantNode:
		return appendString(b, n.Time.Format(time.RFC3339Nano))
	case record.LocalDateNode:
		return appendString(b, n.Date.String())
	case record.LocalDateTimeNode, record.LocalTimeNode:
		return appendString(b, n.Text)
	case record.UnreadNode:
		return append(b, "null"...)
	}
	panic("seal: unknown kind of node")
}

// compareUTF16 orders keys by their UTF-16 code units (RFC 8785, 3.2.3).
func compareUTF16(x, y string) int {
	return slices.Compare(utf16.Encode([]rune(x)), utf16.Encode([]rune(y)))
}

// appendString writes a JSON string with no escape that is not needed (RFC
// 8785, 3.2.2.2).
func appendString(b []byte, s string) []byte {
	const digits = "0123456789abcdef"
	b = append(b, '"')
	for i := 0; i < len(s); i++ {
		switch c := s[i]; c {
		case '"', '\\':
			b = append(b, '\\', c)
		case '\b':
			b = append(b, `\b`...)
		case '\t':
			b = append(b, `\t`...)
		case '\n':
			b = append(b, `\n`...)
		case '\f':
			b = append(b, `\f`...)
		case '\r':
			b = append(b, `\r`...)
		default:
			if c < 0x20 {
				b = append(b, `\u00`...)
				b = append(b, digits[c>>4], digits[c&15])
			} else {
				b = append(b, c)
			}
		}
	}
	return append(b, '"')
}

// appendNumber writes a number as ECMAScript does (RFC 8785, 3.2.2.3): the
// fewest digits that read back, plain from 1e-6 to below 1e21. Infinities and
// not-a-number, which JSON lacks, become strings.
func appendNumber(b []byte, v float64) []byte {
	switch {
	case math.IsNaN(v):
		return append(b, `"nan"`...)
	case math.IsInf(v, 1):
		return append(b, `"inf"`...)
	case math.IsInf(v, -1):
		return append(b, `"-inf"`...)
	case v == 0:
		return append(b, '0')
	}
	if v < 0 {
		b, v = append(b, '-'), -v
	}
	if v >= 1e-6 && v < 1e21 {
		return strconv.AppendFloat(b, v, 'f', -1, 64)
	}
	start := len(b)
	b = strconv.AppendFloat(b, v, 'e', -1, 64)
	// Go writes at least two digits of the exponent, ECMAScript no zero before.
	i := start + slices.Index(b[start:], 'e') + 2
	if b[i] == '0' {
		b = slices.Delete(b, i, i+1)
	}
	return b
}
