# Times base R on inputs like those of the benchmarks of compute/effect
# (means_bench_test.go): Rscript means.R. Milliseconds, median of the runs.
ms <- function(f, runs = 5) median(replicate(runs, system.time(f())[["elapsed"]])) * 1000
set.seed(1)

x <- rnorm(1e6, 1, 1); y <- rnorm(1e6, 0, 2)
cat(sprintf("t.test, 1e6 and 1e6 values: %.0f ms\n", ms(function() t.test(x, y))))

d <- as.data.frame(matrix(rnorm(2e5 * 19), 2e5)); d$g <- rbinom(2e5, 1, 0.5); d$out <- rnorm(2e5, 10, 2)
X <- cbind(1, as.matrix(d[, 1:19]), d$g)
cat(sprintf("lm, 2e5 rows, 21 columns: %.0f ms\n", ms(function() summary(lm(out ~ ., d)))))
cat(sprintf("lm.fit alone: %.0f ms\n", ms(function() lm.fit(X, d$out))))
hc3 <- function() {
  f <- lm(out ~ ., d); e <- residuals(f) / (1 - hatvalues(f)); B <- chol2inv(f$qr$qr[1:21, 1:21])
  B %*% crossprod(X * e) %*% B
}
cat(sprintf("lm with HC3 by hand: %.0f ms\n", ms(hc3, 3)))

p <- rnorm(11, 1); q <- rnorm(11)
all <- c(p, q)
cat(sprintf("combn(22, 11), all means: %.0f ms\n", ms(function() { s <- combn(22, 11); colMeans(matrix(all[s], 11)) }, 3)))
p <- c(rnorm(50, 1), rnorm(50))
cat(sprintf("99 999 random selections of 50 of 100: %.0f ms\n", ms(function() for (i in 1:99999) sum(p[sample.int(100, 50)]), 3)))
