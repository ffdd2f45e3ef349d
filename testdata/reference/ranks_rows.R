# Writes rows of ranks.json with base R: Rscript ranks_rows.R > ranks.json,
# then /usr/bin/python3 ranks_rows.py ranks.json > ranks.json
source("rows.R")
set.seed(411)
tails <- function(f, mus) {
  e <- list()
  for (i in seq_along(mus)) {
    e[[paste0("up", i)]] <- f(mus[i], "greater"); e[[paste0("down", i)]] <- f(mus[i], "less")
  }
  e
}
mus <- c(-1.37003, 0, 0.432137, 2.71009)
draws <- list(c(5, 7), c(9, 12), c(23, 31), c(2, 3), c(50, 50))
for (n in draws) {
  x <- round(rnorm(n[1], 0.8), 4); y <- round(rnorm(n[2]), 4)
  e <- tails(function(mu, alt) wilcox.test(x, y, alternative = alt, mu = mu, exact = TRUE)$p.value, mus)
  for (level in c(0.8, 0.95)) if (qwilcox((1 - level) / 2, n[1], n[2]) > 0) {
    r <- wilcox.test(x, y, exact = TRUE, conf.int = TRUE, conf.level = level)
    e[[paste0("low_", level)]] <- r$conf.int[1]; e[[paste0("high_", level)]] <- r$conf.int[2]; e$estimate <- unname(r$estimate)
  }
  add(sprintf("shift-exact-%d-%d", n[1], n[2]), "wilcox.test(x, y, alternative, mu, exact = TRUE, conf.int, conf.level)",
    list(measure = txt("median-shift"), method = txt("wilcoxon-exact"), first = arr(x), second = arr(y), nulls = arr(mus)), e, 10)
}
for (n in list(c(6, 9), c(40, 35), c(200, 150))) { # ties within, across and with the null
  x <- round(2 * rnorm(n[1], 0.4)) / 2; y <- round(2 * rnorm(n[2])) / 2
  m <- c(-1, 0, 0.5, 0.3, 2)
  e <- tails(function(mu, alt) suppressWarnings(wilcox.test(x, y, alternative = alt, mu = mu, exact = FALSE, correct = FALSE)$p.value), m)
  e$estimate <- median(outer(x, y, "-"))
  add(sprintf("shift-normal-ties-%d-%d", n[1], n[2]), "wilcox.test(x, y, alternative, mu, exact = FALSE, correct = FALSE); median(outer(x, y, '-'))",
    list(measure = txt("median-shift"), method = txt("wilcoxon-normal"), first = arr(x), second = arr(y), nulls = arr(m)), e, 10)
}
for (n in c(5, 8, 20, 49)) {
  d <- round(rnorm(n, 0.4), 4)
  e <- tails(function(mu, alt) wilcox.test(d, alternative = alt, mu = mu, exact = TRUE)$p.value, mus)
  for (level in c(0.8, 0.95)) if (qsignrank((1 - level) / 2, n) > 0) {
    r <- wilcox.test(d, exact = TRUE, conf.int = TRUE, conf.level = level)
    e[[paste0("low_", level)]] <- r$conf.int[1]; e[[paste0("high_", level)]] <- r$conf.int[2]; e$estimate <- unname(r$estimate)
  }
  add(sprintf("pairs-exact-%d", n), "wilcox.test(d, alternative, mu, exact = TRUE, conf.int, conf.level)",
    list(measure = txt("paired-median-shift"), method = txt("signed-rank-exact"), first = arr(d), second = arr(0 * d), nulls = arr(mus)), e, 10)
}
for (n in c(12, 60)) { # ties, no difference equal to a tested value
  d <- round(4 * rnorm(n, 0.4)) / 4
  m <- c(-0.125, 0.0625, 0.375, 1.1)
  e <- tails(function(mu, alt) suppressWarnings(wilcox.test(d, alternative = alt, mu = mu, exact = FALSE, correct = FALSE)$p.value), m)
  w <- outer(d, d, "+") / 2
  e$estimate <- median(w[lower.tri(w, diag = TRUE)])
  add(sprintf("pairs-normal-ties-%d", n), "wilcox.test(d, alternative, mu, exact = FALSE, correct = FALSE); median of outer(d, d, '+')/2",
    list(measure = txt("paired-median-shift"), method = txt("signed-rank-normal"), first = arr(d), second = arr(0 * d), nulls = arr(m)), e, 10)
}
# Area under a curve by every pair, without ranks.
for (i in 1:3) {
  n <- list(c(8, 11), c(40, 25), c(3, 90))[[i]]
  x <- round(2 * rnorm(n[1], 0.7)) / 2; y <- round(2 * rnorm(n[2])) / 2
  s <- (outer(x, y, ">") + 0.5 * outer(x, y, "=="))
  th <- mean(s); A <- var(rowMeans(s)) / n[1]; B <- var(colMeans(s)) / n[2]
  df <- (A + B)^2 / (A^2 / (n[1] - 1) + B^2 / (n[2] - 1))
  m <- c(0.1, 0.5, 0.62, 0.97)
  given <- list(measure = txt("superiority-probability"), first = arr(x), second = arr(y), nulls = arr(m))
  add(sprintf("area-delong-%d", i), "s = outer(x, y, '>') + outer(x, y, '==')/2; pnorm((mean(s) - c)/sqrt(var(rowMeans(s))/n1 + var(colMeans(s))/n2))",
    c(given, method = txt("delong")), c(list(estimate = th, se = sqrt(A + B)),
      tails(function(c, alt) pnorm((th - c) / sqrt(A + B), lower.tail = alt == "less"), m)), 10)
  add(sprintf("area-logit-%d", i), "as delong; pt((qlogis(th) - qlogis(c)) th (1 - th)/se, df)",
    c(given, method = txt("logit")), c(list(estimate = th, df = df, low_0.95 = plogis(qlogis(th) - qt(.975, df) * sqrt(A + B) / (th * (1 - th)))),
      tails(function(c, alt) pt((qlogis(th) - qlogis(c)) * th * (1 - th) / sqrt(A + B), df, lower.tail = alt == "less"), m)), 10)
  M <- mean(n) - 1
  V <- function(c) c * (1 - c) * (1 + M * ((1 - c) / (2 - c) + c / (1 + c))) / prod(n)
  z <- function(c) (th - c) / sqrt(V(c))
  add(sprintf("area-newcombe-%d", i), "uniroot of (th - c)/sqrt(V(c)) -+ qnorm(.975)",
    c(given, method = txt("hanley-mcneil")), c(list(estimate = th, low_0.95 = root(function(c) z(c) - qnorm(.975), 1e-9, th),
      high_0.95 = root(function(c) z(c) + qnorm(.975), th, 1 - 1e-9)), tails(function(c, alt) pnorm(z(c), lower.tail = alt == "less"), m)), 9)
}
write_rows()
