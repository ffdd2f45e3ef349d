package seal

import "testing"

// A seal that holds a result's digest came after it, even where the result
// bears a later date.
func TestSealThatKnowsAResultDoesNotPrecedeIt(t *testing.T) {
	result := "[[result]]\nstudy = \"S9\"\noutcome = \"peel\"\ndate = 2026-09-01\ngroups.new = { n = 9, mean = 1, sd = 1 }\ngroups.current = { n = 9, mean = 1, sd = 1 }\n"
	with := planned + result
	for _, tt := range []struct {
		chain []byte
		want  Bind
		order string
	}{
		{sealed(t, nil, with, "2026-04-01T08:00:00Z", nil), Bind{0, AfterResults}, AfterResults},
		{sealed(t, sealed(t, nil, planned, "2026-03-01T08:00:00Z", nil), with, "2026-04-01T08:00:00Z", nil), Bind{1, BeforeResults}, BeforeResults},
		{sealed(t, nil, planned, "2026-04-01T08:00:00Z", nil), Bind{1, BeforeResults}, BeforeResults},
	} {
		s, _ := compared(t, with, tt.chain)
		if len(s.Binds) != 1 || s.Binds[0] != tt.want || s.Order != tt.order {
			t.Errorf("%v, %s, want %v", s.Binds, s.Order, tt.want)
		}
	}
}
