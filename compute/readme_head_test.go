package compute

// readmeHead is the part of README.md that is written by hand. ‹ and › stand
// for the marks of code.
const readmeHead = `# The methods

Every number that the program computes, to the formula. This file is generated: what follows the head comes from the cards
beside the code, the same that ‹steelyard explain WORD› prints. Write it anew with
‹go test ./compute -run TestReadme -update›; a test demands that it is current. Sources marked "from memory" were not looked
up again while this was written; none of them is the only evidence for a number, see ‹testdata/reference/README.md›.

## Conventions

**Points.** θ is the effect on its own scale, as the record writes it. Every outcome has up to three points, low < null < high:
the null and the ends of the region too small to matter. ‹smallest = s› puts the ends at null ∓ s, for ratios at null/s and
null·s. A claim's ‹margin› takes the place of the end that the claim is tested against (for ‹equivalent› of both); ‹limit› is
a point of its own.

**Two one-sided p-values.** Every method answers, at every value c, p↑(c) for H: θ ≤ c against θ > c, and p↓(c) for H: θ ≥ c
against θ < c. The two-sided p is min(1, 2·min(p↑, p↓)), also for exact tests, so that tests and intervals agree. Two methods
test the null alone (‹exact› and ‹mid-p› of ‹paired-risk-difference›) and so does ‹permutation› of ‹rank-correlation›: a claim
at another point is refused with S104.

**Intervals invert tests.** At one-sided error a the lower limit is the value below which p↑ stays at most a, the upper the one
above which p↓ does; the level is 1 - 2a. Where none exists the limit is the end of the effect's range (S201 where that is
infinite). Where a p is not monotone in c the outermost crossing counts.

**Strictness.** Verdicts come from p-values, never from rounded limits. Established means p < a: the limit lies strictly beyond
the point. Tests that move in steps (ranks, permutations) compare counts, and there p = a suffices, because the limit then lies
beyond the point; values tied with the point count against the claim. A disagreement between test and interval raises S204 and
the test decides.

**Error levels.** ‹differs› uses ‹alpha.two_sided›, every other judged claim ‹alpha.one_sided› (‹equivalent› for each of its two
tests). The interval beside a claim is the one that decides it: 1 - two_sided, or 1 - 2·one_sided. ‹plan.level› is for
descriptive intervals.

**Scales.** Estimates and variances are added up (pooling, priors, what next, ‹systematic_u›) on the measure's analysis scale
g: identity, natural logarithm, logit or atanh. The measures' sections give the variance there. Where a method has no standard
error (ranks, shares) it is the width of the 95 % interval on g over 2·1.96.

**Clusters.** From data, the mean of each cluster is one value for ‹mean-difference›, ‹risk-difference›, ‹ratio-of-means› and
‹standardized-mean-difference›. Otherwise n and events are divided by 1 + (size - 1)·icc in closed forms, and methods that need
individuals are refused with S104. **‹systematic_u›** enters once, after averaging or pooling: se² + u², degrees of freedom times
(se′/se)⁴ (JCGM 100:2008, G.4.1); methods that are not (estimate - c)/se are refused.

**Several sets.** A claim over several analysis sets has the largest p of its sets, for and against.

**Random draws** come from ChaCha8 streams (‹math/rand/v2›), keyed by the SHA-256 of purpose, plan's seed, scenario and replicate:
the number of processors changes nothing.

**Numbers.** Every probability is carried as the pair p and 1 - p with both logarithms, each computed on its own side; nothing is
ever 1 minus a distribution function. Sums are compensated and taken in fixed blocks of 4096. The same input gives the same
bits on one kind of processor; across kinds compare at 1e-9 relative.

| class | what | accuracy |
|---|---|---|
| K1 | closed forms | 1e-12 relative |
| K2 | tail probabilities | 1e-11 relative down to 1e-300, their logarithms beyond |
| K3 | limits found as roots | 1e-9 of the interval's width |
| K5 | simulated or permuted at random | the Monte Carlo error is printed |

Root searches run on the normal-deviate scale of p, in the coordinate g, by doubling steps and Brent's method.

**Bad numbers.** What cannot be computed is absent with a reason: never NaN, zero or silence. 0/0 in a statistic is 0, c/0 is
infinite. No method panics on data.

## How this differs from what was first planned

The methods were designed on paper before they were written. Where the code does something else, the code's way is this:

- *Rank tests in their exact form* count comparisons equal to c wholly against the claim, not half to each side: with half, a
  limit that falls on a tied point could establish. The normal form does take half.
- *Which form of a rank test* was used is said by S206. ‹signed-rank-exact› with ties keeps the distribution without ties and
  breaks them against the claim; there is no conditional form for pairs.
- *‹signed-rank-normal›* takes the differences equal to c out of the variance (Pratt's way); the first formula left them in, which
  was safe but too wide.
- *Unconditional tests* of two risks order tables by the score without N/(N - 1); the factor changes no order, so no p-value.
  Boundaries of regions are bisected where that asks for fewer tables than walking.
- *Noncentral t* is integrated in ln u by the trapezoidal rule where the integrand is smooth, else by Gauss–Legendre panels; below
  ln p = -20 000 a standardized difference gives the leading term only.
- *The upper side of a share between two limits* is bounded by the two one-sided shares; its own pivot was wrong up to 12 % at 5 %.
- *Combined by harmonic*: the integral along the cut is taken in ln t; near p = 1, where it would cancel, by the inverse transform
  on the other side of the cut. *logit* likewise by a contour through the saddle point.
- *A p-value known with ‹<› that lies against the claim* enters the worst-case line as 1: how far beyond the bound it lies is not said.
- *What next* uses normal theory at the present information per subject for all measures, and adds the chances of missing either
  limit of ‹equivalent›.
- *Proportionality*: tied event times have their mean rank.
- *The p-value function* is cut, on a side without a limit, where the other side mirrors it about the estimate.
`
