package render

import (
	"strings"

	"steelyard/compute/result"
	"steelyard/render/number"
)

// WitnessText is what became of one witness, in a line.
func WitnessText(w *result.Witness) string {
	text := "Seal " + number.Int(w.Seal) + ": "
	switch w.Outcome {
	case "verified":
		text += "token verified"
	case "other-digest":
		text += "the token does not match this seal"
	case "refused":
		text += "the token was refused"
	case "unread":
		text += "the token cannot be checked"
	default:
		text += "stated, not checked"
	}
	if w.Why != "" {
		text += ": " + w.Why
	}
	if w.At != "" {
		text += ", of " + strings.Replace(strings.TrimSuffix(w.At, "Z"), "T", " ", 1) + " UTC"
	}
	if w.Authority != "" {
		text += ", signed by " + w.Authority
	}
	switch {
	case w.Chain || len(w.CA) > 0:
		text += "; its certificate leads to the authority in the record's own file, SHA-256 " + strings.Join(w.CA, ", ")
	case w.Outcome == "verified":
		text += ", whose certificate was not checked against an authority"
	}
	return text + " (" + said(w) + ")."
}

// said is what the record itself says of a witness.
func said(w *result.Witness) string {
	text := strings.TrimRight(strings.TrimSpace(w.What), ".")
	if w.Reference != "" {
		text += ", " + w.Reference
	}
	return text
}

// witnesses prints what became of each witness, and what follows for the order.
func (c *composer) witnesses() {
	s := &c.res.Seal
	if len(s.Witnesses) == 0 {
		return
	}
	var l list
	for i := range s.Witnesses {
		l.named("Witness", WitnessText(&s.Witnesses[i]))
	}
	l.to(c)
	if s.OrderProved {
		c.para("Outside evidence shows that the seals came before the dates of the results everywhere on Earth, as far as that authority is trusted. Revocation of certificates was not looked up.")
	}
}

// witnessedBy is the part of page one: who vouches for a seal, if anybody.
func witnessedBy(s *result.Seal) string {
	var who, stated, failed []string
	for _, w := range s.Witnesses {
		n := "seal " + number.Int(w.Seal)
		switch {
		case w.Outcome == "verified" && w.Chain:
			who = append(who, "by "+w.Authority+" ("+n+", "+dayOf(w.At)+")")
		case w.Outcome == "verified":
			who = append(who, "by "+w.Authority+" ("+n+", "+dayOf(w.At)+", authority not checked)")
		case w.Outcome == "stated":
			stated = append(stated, n)
		default:
			failed = append(failed, n)
		}
	}
	var out string
	if len(who) > 0 {
		out += " Witnessed " + strings.Join(who, "; ") + "."
	}
	if len(stated) > 0 {
		out += " Witness stated, not checked: " + strings.Join(stated, ", ") + "."
	}
	if len(failed) > 0 {
		out += " Witness not verified: " + strings.Join(failed, ", ") + "."
	}
	return out
}
