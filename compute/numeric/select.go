package numeric

// KthSmallest returns the k-th smallest (from 1) of x, reordering x. It
// panics unless 1 <= k <= len(x): that is a fault of the caller. Selection by
// partition (Hoare 1961, from memory), pivots by medians of three, so the
// result needs no random numbers.
func KthSmallest(x []float64, k int) float64 {
	if k < 1 || k > len(x) {
		panic("numeric: KthSmallest: k outside the column")
	}
	k--
	lo, hi := 0, len(x)-1
	for hi > lo {
		if hi-lo < 12 {
			insertionSort(x[lo : hi+1])
			break
		}
		p := pivot(x, lo, hi)
		i, j := lo, hi
		for i <= j {
			for x[i] < p {
				i++
			}
			for x[j] > p {
				j--
			}
			if i <= j {
				x[i], x[j] = x[j], x[i]
				i++
				j--
			}
		}
		switch {
		case k <= j:
			hi = j
		case k >= i:
			lo = i
		default:
			return x[k]
		}
	}
	return x[k]
}

// pivot is the median of three medians of three spread over the range.
func pivot(x []float64, lo, hi int) float64 {
	if hi-lo < 64 {
		return median3(x[lo], x[lo+(hi-lo)/2], x[hi])
	}
	s := (hi - lo) / 8
	return median3(
		median3(x[lo], x[lo+s], x[lo+2*s]),
		median3(x[lo+3*s], x[lo+4*s], x[lo+5*s]),
		median3(x[lo+6*s], x[lo+7*s], x[hi]))
}

func median3(a, b, c float64) float64 {
	return max(min(a, b), min(max(a, b), c))
}

func insertionSort(x []float64) {
	for i := 1; i < len(x); i++ {
		for j := i; j > 0 && x[j] < x[j-1]; j-- {
			x[j], x[j-1] = x[j-1], x[j]
		}
	}
}
