package render

import "steelyard/compute/result"

// ReadingName is the short name of where an interval stands against null and
// region, from the side of the outcome's better direction; "" when there is
// no reading.
func ReadingName(r result.Reading, better string) string {
	name, _ := reading(r, better)
	return name
}

// ReadingWords says the same in words.
func ReadingWords(r result.Reading, better string) string {
	_, words := reading(r, better)
	return words
}

// facing turns a reading toward benefit: how many points are excluded on the
// worse and on the better side, and the words for the two directions.
func facing(r result.Reading, better string) (good, bad int, up, down string) {
	switch better {
	case "lower":
		return r.Below, r.Above, "better", "worse"
	case "higher":
		return r.Above, r.Below, "better", "worse"
	}
	return r.Above, r.Below, "higher", "lower"
}

// reading gives the name and the words of a reading.
func reading(r result.Reading, better string) (name, words string) {
	if !r.OK {
		return "", ""
	}
	good, bad, up, down := facing(r, better)
	if !r.HasRegion {
		return plainReading(good, bad, up, down)
	}
	switch [2]int{good, bad} {
	case [2]int{3, 0}:
		return "clearly " + up, up + ", by more than the smallest effect that matters"
	case [2]int{2, 0}:
		return up + ", size open", up + "; whether by enough to matter is not settled"
	case [2]int{2, 1}:
		return "slightly " + up, up + ", but by less than matters"
	case [2]int{1, 0}:
		return "not much " + down, "not " + down + " by an amount that matters; whether " + up + " is not settled"
	case [2]int{1, 1}:
		return "too close to matter", "any difference is smaller than matters; its direction is not settled"
	case [2]int{0, 0}:
		if up == "higher" {
			return "undecided", "differences that matter remain possible in both directions"
		}
		return "undecided", "a benefit that matters and a harm that matters both remain possible"
	case [2]int{0, 1}:
		return "not much " + up, "not " + up + " by an amount that matters; whether " + down + " is not settled"
	case [2]int{1, 2}:
		return "slightly " + down, down + ", but by less than matters"
	case [2]int{0, 2}:
		return down + ", size open", down + "; whether by enough to matter is not settled"
	case [2]int{0, 3}:
		return "clearly " + down, down + ", by more than the smallest effect that matters"
	}
	return "", ""
}

// plainReading is the reading where no smallest effect was stated.
func plainReading(good, bad int, up, down string) (name, words string) {
	switch {
	case good > 0 && bad == 0:
		return up, "the direction is settled; no smallest effect that matters was stated, so whether by enough to matter is left open"
	case bad > 0 && good == 0:
		return down, "the direction is settled; no smallest effect that matters was stated, so whether by enough to matter is left open"
	case good == 0 && bad == 0:
		return "undecided", "the direction is not settled; no smallest effect that matters was stated"
	}
	return "", ""
}

// notShown names what a reading does not support, to stand after "not
// supported:"; "" when it settles direction and size.
func notShown(r result.Reading, better string) string {
	if !r.OK {
		return ""
	}
	good, bad, up, down := facing(r, better)
	if !r.HasRegion {
		if good == 0 && bad == 0 {
			return "a direction of the effect"
		}
		return "that the effect is large enough to matter, as no smallest effect was stated"
	}
	switch [2]int{good, bad} {
	case [2]int{2, 0}, [2]int{0, 2}:
		return "that the effect is large enough to matter"
	case [2]int{1, 0}:
		return "that the effect is " + up + " than the null"
	case [2]int{0, 1}:
		return "that the effect is " + down + " than the null"
	case [2]int{1, 1}:
		return "a direction of the effect"
	case [2]int{0, 0}:
		return "a direction of the effect, or that it is too small to matter"
	case [2]int{2, 1}, [2]int{1, 2}:
		return "an effect large enough to matter, which is excluded in both directions"
	}
	return ""
}
