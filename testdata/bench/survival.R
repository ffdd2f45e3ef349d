# Times R's survival package on input like that of compute/survival's
# benchmarks: a million subjects, two groups. BenchmarkBaseR runs it where R
# and the package are installed.
suppressMessages(library(survival))
time <- function(name, n, f) {
  if (n > 1) f()
  s <- system.time(for (i in seq_len(n)) f())[["elapsed"]]
  cat(sprintf("%-24s %12.4f ms\n", name, 1000 * s / n))
}
set.seed(1)
n <- 1e6
g <- rep(0:1, length.out = n)
t <- rexp(n, ifelse(g == 0, 0.8, 1)); c <- 2 * runif(n)
time_ <- pmin(t, c); e <- as.numeric(t <= c)
time("CoxMillion", 1, function() coxph(Surv(time_, e) ~ g, ties = "efron"))
time("LogRankMillion", 1, function() survdiff(Surv(time_, e) ~ g))
time("KaplanMeier1e6", 1, function() survfit(Surv(time_, e) ~ g))
