# Times base R on the inputs of compute/effect/counts_bench_test.go.
# Rscript counts.R prints one line per computation: name, milliseconds.
# Not part of any test; compare by hand with
#   go test ./compute/effect -run xxx -bench 'Proportion|Risk|Odds|Rate'
time <- function(name, n, f) {
  f()
  s <- system.time(for (i in seq_len(n)) f())[["elapsed"]]
  cat(sprintf("%-32s %10.4f ms\n", name, 1000 * s / n))
}

time("ProportionExactLimits", 5, function() binom.test(300000, 1e6)$conf.int)
time("ProportionWilsonLimits", 500, function() prop.test(300000, 1e6, correct = FALSE)$conf.int)
m <- matrix(c(300000, 700000, 299000, 701000), 2)
time("OddsRatioExactLimits", 1, function() fisher.test(m)$conf.int)
time("OddsRatioExactTest", 1, function() fisher.test(m, alternative = "greater", conf.int = FALSE)$p.value)
s <- matrix(c(7, 5, 1, 11), 2)
time("OddsRatioExactLimitsSmall", 200, function() fisher.test(s)$conf.int)
time("RateExactLimits", 5, function() poisson.test(1e6, 12345)$conf.int)
time("RateRatioExactLimits", 5, function() poisson.test(c(300000, 299000), c(1000, 1000))$conf.int)

# Score limits of a risk difference by uniroot on the restricted likelihood,
# which base R does not offer ready-made.
score <- function(x1, n1, x2, n2, d) {
  p2 <- optimize(function(p) dbinom(x1, n1, p + d, log = TRUE) + dbinom(x2, n2, p, log = TRUE),
                 c(max(0, -d), min(1, 1 - d)), maximum = TRUE, tol = 1e-12)$maximum
  p1 <- p2 + d
  (x1 / n1 - x2 / n2 - d) / sqrt((p1 * (1 - p1) / n1 + p2 * (1 - p2) / n2) * (n1 + n2) / (n1 + n2 - 1))
}
time("RiskDifferenceScoreLimits", 10, function() {
  f <- function(z) uniroot(function(d) score(300000, 1e6, 299000, 1e6, d) - z, c(-0.02, 0.02), tol = 1e-12)$root
  c(f(qnorm(0.975)), f(qnorm(0.025)))
})

k <- 1000
a <- array(rbind((0:(k - 1)) %% 7, 20 - (0:(k - 1)) %% 7, (0:(k - 1)) %% 5, 25 - (0:(k - 1)) %% 5), c(2, 2, k))
time("MantelHaenszel", 5, function() mantelhaen.test(a, correct = FALSE)$estimate)
