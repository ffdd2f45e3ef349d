# Values for counts.json by base R: Rscript counts_rows.R > rows.json
# Rows are joined with those of counts_rows.py by counts_rows.py itself.
rows <- character()
num <- function(x) if (is.infinite(x)) stop("no infinities") else sprintf("%.17g", x)
obj <- function(l) paste0("{", paste0('"', names(l), '": ', sapply(l, num), collapse = ", "), "}")
# digits: significant digits that the program can be trusted for.
row <- function(id, call, input, expected, digits) {
  d <- sprintf('{"all": %d}', digits)
  rows <<- c(rows, sprintf('{"id": "%s", "program": "R 4.2.2 (stats)", "call": "%s", "date": "2026-12-01", "input": %s, "expected": %s, "digits": %s}',
    id, call, obj(input), obj(expected), d))
}

# One proportion.
for (v in list(c(7, 12), c(1, 12), c(81, 263), c(3, 1000), c(999990, 1e6), c(17, 4000))) {
  x <- v[1]; n <- v[2]
  e <- list()
  for (l in c(0.9, 0.95, 0.99)) {
    ci <- binom.test(x, n, conf.level = l)$conf.int
    e[[sprintf("exact_low_%g", l)]] <- ci[1]; e[[sprintf("exact_high_%g", l)]] <- ci[2]
    ci <- prop.test(x, n, conf.level = l, correct = FALSE)$conf.int
    e[[sprintf("wilson_low_%g", l)]] <- ci[1]; e[[sprintf("wilson_high_%g", l)]] <- ci[2]
  }
  c0 <- (x / n) * 0.7
  e$p_up <- binom.test(x, n, c0, alternative = "greater")$p.value
  e$p_down <- binom.test(x, n, c0, alternative = "less")$p.value
  row(sprintf("proportion-%d-%d", x, n), "binom.test(x, n, null, alternative, conf.level); prop.test(x, n, correct = FALSE)",
    list(x = x, n = n, null = c0), e, 10L)
}

# Fisher's test at several odds ratios; conditional limits and estimate by a
# root search of our own, because fisher.test stops its own early.
support <- function(t) max(0, t[1] + t[3] - t[4]):min(t[2], t[1] + t[3])
dens <- function(t, psi) { s <- support(t); l <- dhyper(s, t[2], t[4], t[1] + t[3], log = TRUE) + s * log(psi); d <- exp(l - max(l)); d / sum(d) }
root <- function(f, a, b) exp(uniroot(f, c(a, b), tol = 1e-14, maxiter = 10000)$root)
for (t in list(c(7, 12, 1, 12), c(3, 4, 1, 4), c(12, 100, 5, 90), c(24, 73, 53, 65), c(189, 11034, 104, 11037), c(5, 40, 0, 20))) {
  s <- support(t)
  m <- matrix(c(t[1], t[2] - t[1], t[3], t[4] - t[3]), 2)
  up <- function(psi, mid = 0) { d <- dens(t, psi); sum(d[s > t[1]]) + (1 - mid / 2) * d[s == t[1]] }
  down <- function(psi, mid = 0) { d <- dens(t, psi); sum(d[s < t[1]]) + (1 - mid / 2) * d[s == t[1]] }
  e <- list()
  for (psi in c(0.5, 1, 2.5)) {
    e[[sprintf("p_up_%g", psi)]] <- fisher.test(m, or = psi, alternative = "greater")$p.value
    e[[sprintf("p_down_%g", psi)]] <- fisher.test(m, or = psi, alternative = "less")$p.value
  }
  for (mid in 0:1) {
    w <- c("exact", "mid-p")[mid + 1]
    e[[paste0(w, "_low")]] <- root(function(u) log(up(exp(u), mid) / 0.025), -10, 10)
    if (t[1] < max(s)) e[[paste0(w, "_high")]] <- root(function(u) log(down(exp(u), mid) / 0.025), -10, 10)
  }
  if (t[1] < max(s)) e$estimate <- root(function(u) sum(s * dens(t, exp(u))) - t[1], -10, 10)
  row(sprintf("odds-%s", paste(t, collapse = "-")),
    "fisher.test(m, or, alternative) at 0.5, 1, 2.5; uniroot(tol = 1e-14) on dhyper(log = TRUE) tilted by the odds ratio",
    list(x1 = t[1], n1 = t[2], x2 = t[3], n2 = t[4]), e, 9L)
}

# Two proportions at no effect: the score statistic without N/(N-1).
for (t in list(c(7, 12, 1, 12), c(56, 70, 48, 80), c(3, 4000, 19, 5000))) {
  z2 <- suppressWarnings(prop.test(c(t[1], t[3]), c(t[2], t[4]), correct = FALSE)$statistic)
  row(sprintf("pooled-z-%s", paste(t, collapse = "-")), "sqrt(prop.test(x, n, correct = FALSE)$statistic)",
    list(x1 = t[1], n1 = t[2], x2 = t[3], n2 = t[4]), list(z_abs = sqrt(z2[[1]])), 11L)
}

# Paired proportions.
for (t in list(c(20, 12, 2, 16), c(8, 3, 1, 2), c(794, 150, 86, 570))) {
  m <- matrix(t, 2)
  row(sprintf("mcnemar-%s", paste(t, collapse = "-")), "sqrt(mcnemar.test(m, correct = FALSE)$statistic); binom.test(b, b + c, alternative)",
    list(both = t[1], first = t[2], second = t[3], neither = t[4]),
    list(z_abs = sqrt(mcnemar.test(m, correct = FALSE)$statistic[[1]]),
         p_up = binom.test(t[2], t[2] + t[3], alternative = "greater")$p.value,
         p_down = binom.test(t[2], t[2] + t[3], alternative = "less")$p.value), 11L)
}

# Rates.
for (v in list(c(1, 3.5), c(5, 1), c(17, 1234.5), c(100000, 7))) {
  x <- v[1]; T <- v[2]; ci <- poisson.test(x, T)$conf.int; c0 <- 0.6 * x / T
  mid <- function(mu) ppois(x, mu, lower.tail = FALSE) + dpois(x, mu) / 2
  row(sprintf("rate-%g", x), "poisson.test(x, T, r, alternative); ppois + dpois/2",
    list(x = x, exposure = T, null = c0),
    list(low = ci[1], high = ci[2],
         p_up = poisson.test(x, T, c0, alternative = "greater")$p.value,
         p_down = poisson.test(x, T, c0, alternative = "less")$p.value,
         mid_up = mid(c0 * T)), 11L)
}
for (v in list(c(12, 100, 5, 90), c(11, 800, 21, 3011), c(41, 28010, 15, 19017), c(3, 50, 1, 70))) {
  p <- poisson.test(v[c(1, 3)], v[c(2, 4)])
  n <- v[1] + v[3]; pr <- function(r) r * v[2] / (r * v[2] + v[4])
  w <- prop.test(v[1], n, correct = FALSE)$conf.int; g <- v[4] / v[2]
  row(sprintf("rate-ratio-%d-%d", v[1], v[3]), "poisson.test(x, T); binom.test(x1, n, p); prop.test(x1, n, correct = FALSE) mapped to the ratio",
    list(x1 = v[1], e1 = v[2], x2 = v[3], e2 = v[4]),
    list(estimate = p$estimate[[1]], exact_low = p$conf.int[1], exact_high = p$conf.int[2],
         p_up_0.8 = binom.test(v[1], n, pr(0.8), alternative = "greater")$p.value,
         p_down_3 = binom.test(v[1], n, pr(3), alternative = "less")$p.value,
         score_low = w[1] / (1 - w[1]) * g, score_high = w[2] / (1 - w[2]) * g), 11L)
}

# Strata.
for (a in list(list(id = "three", x1 = c(12, 5, 9), n1 = c(42, 19, 34), x2 = c(6, 3, 10), n2 = c(39, 18, 32)),
               list(id = "five", x1 = c(0, 4, 11, 2, 30), n1 = c(8, 20, 60, 5, 99), x2 = c(2, 1, 9, 2, 17), n2 = c(9, 25, 55, 6, 120)))) {
  m <- array(rbind(a$x1, a$n1 - a$x1, a$x2, a$n2 - a$x2), c(2, 2, length(a$x1)))
  h <- mantelhaen.test(m, correct = FALSE)
  i <- as.list(c(a$x1, a$n1, a$x2, a$n2))
  names(i) <- paste0(rep(c("x1", "n1", "x2", "n2"), each = length(a$x1)), "_", seq_along(a$x1))
  row(paste0("strata-", a$id), "mantelhaen.test(array, correct = FALSE)", c(list(k = length(a$x1)), i),
    list(odds_ratio = h$estimate[[1]], low = h$conf.int[1], high = h$conf.int[2], chi2 = h$statistic[[1]]), 11L)
}
cat("[\n", paste0("  ", rows, collapse = ",\n"), "\n]\n", sep = "")
