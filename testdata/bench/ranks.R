# Times base R on the inputs of compute/effect/ranks_test.go and
# spread_bench_test.go: Rscript ranks.R prints one line a computation.
# BenchmarkBaseR of compute/effect runs it where R is installed.
time <- function(name, n, f) {
  if (n > 1) f()
  s <- system.time(for (i in seq_len(n)) f())[["elapsed"]]
  cat(sprintf("%-24s %12.4f ms\n", name, 1000 * s / n))
}
set.seed(1)
for (n in c(50, 200)) {
  x <- rnorm(n); y <- rnorm(n)
  time(sprintf("WilcoxonExact%d", n), if (n == 50) 20 else 1, function() wilcox.test(x, y, exact = TRUE, conf.int = TRUE))
}
x <- rnorm(49); time("SignedRankExact49", 50, function() wilcox.test(x, exact = TRUE, conf.int = TRUE))
x <- rnorm(2000); y <- rnorm(2000)
time("WilcoxonNormal2000", 1, function() wilcox.test(x, y, exact = FALSE, correct = FALSE, conf.int = TRUE))
# R forms all pairs, so 1e5 a side (1e10 differences) cannot be asked of it.
x <- sample(9); y <- sample(9)
time("SpearmanExact9", 50, function() cor.test(x, y, method = "spearman", exact = TRUE))
x <- rnorm(1e6); y <- x + rnorm(1e6)
time("Correlation1e6", 3, function() cor.test(x, y))
time("RankCorrelation1e6", 1, function() cor(x, y, method = "spearman"))
