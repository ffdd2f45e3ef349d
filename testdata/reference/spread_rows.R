# Writes spread.json with base R: Rscript spread_rows.R > spread.json
source("rows.R")
set.seed(413)
two <- function(e, c, up, down) { for (i in seq_along(c)) { e[[paste0("lnup", i)]] <- up(c[i]); e[[paste0("lndown", i)]] <- down(c[i]) }; e }

for (n in c(4, 11, 60)) {
  x <- round(rnorm(n), 3); y <- round(0.6 * x + rnorm(n), 3); r <- cor(x, y)
  e <- list(estimate = r)
  if (n > 4) for (l in c(0.9, 0.95)) { k <- cor.test(x, y, conf.level = l)$conf.int; e[[paste0("low_", l)]] <- k[1]; e[[paste0("high_", l)]] <- k[2] }
  c <- c(-0.4, 0, 0.3, 0.95)
  e <- two(e, c, function(c) pnorm((atanh(r) - atanh(c)) * sqrt(n - 3), lower.tail = FALSE, log.p = TRUE), function(c) pnorm((atanh(r) - atanh(c)) * sqrt(n - 3), log.p = TRUE))
  add(sprintf("correlation-fisher-%d", n), "cor.test(x, y, conf.level)$conf.int; pnorm((atanh(r) - atanh(c)) sqrt(n - 3))",
    list(measure = txt("correlation"), method = txt("fisher-z"), first = arr(x), second = arr(y), nulls = arr(c)), e, 10)
  add(sprintf("correlation-exact-%d", n), "cor.test(x, y, alternative)$p.value",
    list(measure = txt("correlation"), method = txt("exact"), first = arr(x), second = arr(y), nulls = arr(0)),
    list(estimate = r, up1 = cor.test(x, y, alternative = "greater")$p.value, down1 = cor.test(x, y, alternative = "less")$p.value), 10)
}
for (n in 4:9) {
  x <- sample(n); y <- x; i <- sample(n, 3); y[i] <- y[rev(i)]; if (n %% 2) y <- n + 1 - y
  rho <- cor(x, y)
  if (abs(rho) == 1) next
  add(sprintf("rank-permutation-%d", n), "cor.test(x, y, method = 'spearman', exact = TRUE, alternative)",
    list(measure = txt("rank-correlation"), method = txt("permutation"), first = arr(x), second = arr(y), nulls = arr(0)),
    list(estimate = rho, up1 = cor.test(x, y, method = "spearman", exact = TRUE, alternative = "greater")$p.value,
      down1 = cor.test(x, y, method = "spearman", exact = TRUE, alternative = "less")$p.value), 10)
}
x <- round(2 * rnorm(25)) / 2; y <- round(x + rnorm(25)); r <- cor(x, y, method = "spearman"); s <- sqrt((1 + r^2 / 2) / 22)
add("rank-bonett-wright", "r = cor(x, y, method = 'spearman'); tanh(atanh(r) -+ qnorm(p) sqrt((1 + r^2/2)/(n - 3)))",
  list(measure = txt("rank-correlation"), method = txt("bonett-wright"), first = arr(x), second = arr(y), nulls = arr(c(0, 0.5))),
  two(list(estimate = r, low_0.95 = tanh(atanh(r) - qnorm(.975) * s), high_0.9 = tanh(atanh(r) + qnorm(.95) * s)), c(0, 0.5),
    function(c) pnorm((atanh(r) - atanh(c)) / s, lower.tail = FALSE, log.p = TRUE), function(c) pnorm((atanh(r) - atanh(c)) / s, log.p = TRUE)), 10)

for (n in c(2, 12, 400)) {
  c <- c(0.1, 0.5, 0.9, 60)
  add(sprintf("sd-%d", n), "sd sqrt((n - 1)/qchisq(p, n - 1)); pchisq((n - 1) sd^2/c^2, n - 1, lower, log)",
    list(measure = txt("sd"), method = txt("chi-square"), n = n, sd = 0.62, nulls = arr(c)),
    two(list(estimate = 0.62, low_0.95 = 0.62 * sqrt((n - 1) / qchisq(.975, n - 1)), high_0.95 = 0.62 * sqrt((n - 1) / qchisq(.025, n - 1)),
      low_0.999 = 0.62 * sqrt((n - 1) / qchisq(.9995, n - 1)), high_0.999 = 0.62 * sqrt((n - 1) / qchisq(.0005, n - 1))), c,
      function(c) pchisq((n - 1) * 0.62^2 / c^2, n - 1, lower.tail = FALSE, log.p = TRUE), function(c) pchisq((n - 1) * 0.62^2 / c^2, n - 1, log.p = TRUE)), 10)
}
for (n in list(c(9, 14), c(2, 30), c(150, 90))) {
  x <- round(rnorm(n[1], 0, 1.7), 3); y <- round(rnorm(n[2]), 3); c <- c(0.3, 1, 2.5)
  e <- list(estimate = sd(x) / sd(y))
  for (l in c(0.9, 0.95)) { k <- sqrt(var.test(x, y, conf.level = l)$conf.int); e[[paste0("low_", l)]] <- k[1]; e[[paste0("high_", l)]] <- k[2] }
  for (i in seq_along(c)) { e[[paste0("up", i)]] <- var.test(x, y, ratio = c[i]^2, alternative = "greater")$p.value
    e[[paste0("down", i)]] <- var.test(x, y, ratio = c[i]^2, alternative = "less")$p.value }
  add(sprintf("sd-ratio-%d-%d", n[1], n[2]), "var.test(x, y, ratio = c^2, alternative, conf.level); sqrt of limits",
    list(measure = txt("sd-ratio"), method = txt("f"), first = arr(x), second = arr(y), nulls = arr(c)), e, 10)
  if (n[1] > 5) {
    k <- sum(n) * (sum((x - mean(x))^4) + sum((y - mean(y))^4)) / ((n[1] - 1) * var(x) + (n[2] - 1) * var(y))^2
    s <- sqrt(sum((k - (n - 3) / (n - 1)) / (4 * n))); l <- log(sd(x) / sd(y))
    add(sprintf("sd-ratio-kurtosis-%d-%d", n[1], n[2]), "k = N sum of fourth powers/(sum of squares)^2; pnorm((log(sd(x)/sd(y)) - log(c))/sqrt(sum((k - (n - 3)/(n - 1))/(4 n))))",
      list(measure = txt("sd-ratio"), method = txt("log-kurtosis"), first = arr(x), second = arr(y), nulls = arr(c)),
      two(list(estimate = exp(l), low_0.95 = exp(l - qnorm(.975) * s), high_0.95 = exp(l + qnorm(.975) * s)), c,
        function(c) pnorm((l - log(c)) / s, lower.tail = FALSE, log.p = TRUE), function(c) pnorm((l - log(c)) / s, log.p = TRUE)), 10)
  }
}
for (n in c(3, 20, 300)) { # spreads are in ratio c exactly when x + c y and x - c y are unrelated
  x <- round(rnorm(n, 0, 1.4), 3); y <- round(0.6 * x + rnorm(n), 3); c <- c(0.4, 1, 2.2)
  t <- function(c) { r <- cor(x + c * y, x - c * y); r * sqrt((n - 2) / (1 - r^2)) }
  e <- list(estimate = sd(x) / sd(y), low_0.95 = root(function(c) t(c) - qt(.975, n - 2), 1e-4, sd(x) / sd(y)), high_0.95 = root(function(c) t(c) + qt(.975, n - 2), sd(x) / sd(y), 1e4))
  for (i in seq_along(c)) { e[[paste0("up", i)]] <- pt(t(c[i]), n - 2, lower.tail = FALSE); e[[paste0("down", i)]] <- pt(t(c[i]), n - 2)
    if (n > 3) stopifnot(abs(e[[paste0("up", i)]] - cor.test(x + c[i] * y, x - c[i] * y, alternative = "greater")$p.value) < 1e-12) }
  add(sprintf("paired-sd-%d", n), "cor.test(x + c y, x - c y, alternative)$p.value; uniroot of its t for limits",
    list(measure = txt("paired-sd-ratio"), method = txt("pitman-morgan"), first = arr(x), second = arr(y), nulls = arr(c)), e, list(all = 9))
}
# One limit: the noncentral t, whose noncentrality R takes up to 37.62.
for (n in c(2, 15, 80)) {
  K <- (4.5 - 2) / 1; c <- c(0.5, 0.9, 0.99, 0.9999); c <- c[sqrt(n) * qnorm(c) < 37]
  low <- function(a) { f <- function(d) pt(sqrt(n) * K, n - 1, d, lower.tail = FALSE) - a; pnorm(root(f, -5, min(37, sqrt(n) * K * 1.5 + 3)) / sqrt(n)) }
  e <- list(estimate = pnorm(K), low_0.9 = low(0.05))
  # R takes this upper tail as 1 - the lower one, right to about 1e-12 absolute.
  for (i in seq_along(c)) { p <- pt(sqrt(n) * K, n - 1, sqrt(n) * qnorm(c[i]), lower.tail = FALSE); if (p > 1e-5) e[[paste0("up", i)]] <- p }
  add(sprintf("share-one-limit-%d", n), "pt(sqrt(n) K, n - 1, sqrt(n) qnorm(c), lower.tail = FALSE)",
    list(measure = txt("conforming-share"), method = txt("normal"), n = n, mean = 2, sd = 1, spec = "[-1e999, 4.5]", nulls = arr(c)), e, list(all = 6))
}
# Two limits: the chance over the pivots of mean and spread, by two nested
# integrals instead of one with a closed inner part.
share <- function(mu, s, lo, hi) pnorm((hi - mu) / s) - pnorm((lo - mu) / s)
for (n in c(5, 20)) {
  m <- 0.4; s <- 1; lo <- -2; hi <- 2.5; c <- c(0.5, 0.8, 0.95)
  up <- function(c) integrate(function(v) sapply(v, function(v) {
    sg <- s / v; if (share((lo + hi) / 2, sg, lo, hi) <= c) return(2 * v * (n - 1) * dchisq((n - 1) * v^2, n - 1))
    h <- uniroot(function(h) share((lo + hi) / 2 + h, sg, lo, hi) - c, c(0, 50 * (sg + hi - lo)), tol = 1e-13)$root
    a <- (lo + hi) / 2 + c(-h, h)
    (pnorm((m - a[1]) * sqrt(n) / sg, lower.tail = FALSE) + pnorm((a[2] - m) * sqrt(n) / sg, lower.tail = FALSE)) * 2 * v * (n - 1) * dchisq((n - 1) * v^2, n - 1)
  }), 0, Inf, rel.tol = 1e-10, subdivisions = 2000)$value
  e <- list(estimate = share(m, s, lo, hi))
  for (i in seq_along(c)) { p <- up(c[i]); if (p > 1e-3) e[[paste0("up", i)]] <- p } # integrate's absolute error is 1e-10
  add(sprintf("share-two-limits-%d", n), "integrate over s/sigma of the chance that the mean lies too near to a limit, whose place is found by uniroot",
    list(measure = txt("conforming-share"), method = txt("normal"), n = n, mean = m, sd = s, spec = "[-2, 2.5]", nulls = arr(c)), e, list(all = 7))
}
n <- 25; d <- round(rnorm(n, 0.3, 1.1), 3); m <- mean(d); s <- sd(d)
t <- qt(c(.025, .975), n - 1, 1.96 * sqrt(n)) * s / sqrt(n)
add("agreement", "mean(d) -+ 1.96 sd(d); mean(d) -+ qt(c(.025, .975), n - 1, 1.96 sqrt(n)) sd(d)/sqrt(n)",
  list(measure = txt("agreement"), method = txt("normal"), first = arr(d), second = arr(0 * d), spec = "[-3, 3]", nulls = arr(0)),
  list(estimate = share(m, s, -3, 3), shown_1 = m - 1.96 * s, shown_2 = m - t[2], shown_3 = m - t[1], shown_4 = m + 1.96 * s, shown_5 = m + t[1], shown_6 = m + t[2]), list(all = 6, estimate = 10, shown_1 = 10, shown_4 = 10))
inside <- sum(d >= -1 & d <= 1.5)
e <- list(estimate = inside / n, low_0.95 = binom.test(inside, n)$conf.int[1], high_0.95 = binom.test(inside, n)$conf.int[2], up1 = binom.test(inside, n, 0.6, "greater")$p.value)
add("share-counted", "binom.test(sum(d >= -1 & d <= 1.5), n, c, alternative)",
  list(measure = txt("agreement"), method = txt("any"), first = arr(d), second = arr(0 * d), spec = "[-1, 1.5]", nulls = arr(0.6)), e, 10)
write_rows()
