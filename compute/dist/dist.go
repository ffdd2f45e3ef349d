// Package dist holds distribution functions with tails that stay exact in
// the far tail, and their quantiles. It knows no record and no test.
//
// Every probability comes as a Tail: the probability, its complement and both
// logarithms, each computed on its own side, never as one minus the other.
package dist

// Tail is a probability with its complement and both natural logarithms.
// P or Q may underflow to 0; LnP and LnQ then still hold.
type Tail struct{ P, Q, LnP, LnQ float64 }

// Complement exchanges the two sides.
func (t Tail) Complement() Tail { return Tail{P: t.Q, Q: t.P, LnP: t.LnQ, LnQ: t.LnP} }
