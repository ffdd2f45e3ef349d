# Writes the R rows of dist.json: Rscript dist_rows.R > rows_r.json
# Base R only. Values are printed with 17 digits; what R itself keeps is said
# per group ("digits") where that is less.
num <- function(x) trimws(formatC(x, digits = 17, format = "g", width = 1))
first <- TRUE
group <- function(fn, call, digits, args, values) {
  if (!first) cat(",\n")
  first <<- FALSE
  cat(sprintf("{\"fn\":\"%s\",\"program\":\"R\",\"version\":\"%s\",\"call\":\"%s\",\"date\":\"2026-12-01\",\"digits\":%d,\"rows\":[\n",
              fn, paste(R.version$major, R.version$minor, sep = "."), call, digits))
  rows <- sapply(seq_along(values), function(i)
    sprintf("{\"args\":[%s],\"value\":\"%s\"}", paste(num(args[i, ]), collapse = ","), num(values[i])))
  cat(paste(rows, collapse = ",\n"), "]}")
}
cat("[\n")
a <- as.matrix(expand.grid(p = c(0.49, 0.2, 0.025, 1e-5, 1e-12), nu = c(1, 2, 4.5, 30, 500, 1e5)))
group("TQuantile", "qt(p, nu, lower.tail = FALSE)", 10, a, qt(a[, 1], a[, 2], lower.tail = FALSE))
a <- as.matrix(expand.grid(p = c(0.9, 0.5, 0.025, 1e-8, 1e-100), nu = c(1, 3, 10, 100, 1e4)))
group("ChiSquareQuantile", "qchisq(p, nu, lower.tail = FALSE)", 10, a, qchisq(a[, 1], a[, 2], lower.tail = FALSE))
a <- rbind(c(0.05, 3, 10), c(0.025, 23, 31), c(0.9, 5, 2), c(1e-6, 1, 40), c(0.5, 100, 1000))
group("FQuantile", "qf(p, d1, d2, lower.tail = FALSE)", 10, a, qf(a[, 1], a[, 2], a[, 3], lower.tail = FALSE))
a <- rbind(c(0.025, 7, 6), c(0.975, 8, 5), c(0.05, 1, 20), c(1e-10, 30, 70), c(0.3, 0.5, 0.5), c(0.025, 500, 1000))
group("BetaQuantile", "qbeta(p, a, b)", 10, a, qbeta(a[, 1], a[, 2], a[, 3]))
a <- rbind(c(1.96, 12), c(-0.3, 5), c(8, 40), c(25, 300), c(100, 3))
group("TUpperLn", "pt(t, nu, lower.tail = FALSE, log.p = TRUE)", 12, a,
      pt(a[, 1], a[, 2], lower.tail = FALSE, log.p = TRUE))
a <- rbind(c(7, 12, 0.3), c(40, 400, 0.2), c(900, 1000, 0.5), c(12, 1e6, 1e-5))
group("BinomialUpperLn", "pbinom(k - 1, n, p, lower.tail = FALSE, log.p = TRUE)", 12, a,
      pbinom(a[, 1] - 1, a[, 2], a[, 3], lower.tail = FALSE, log.p = TRUE))
a <- rbind(c(12, 3.5), c(0, 4), c(300, 100), c(1000, 1100))
group("PoissonUpperLn", "ppois(x - 1, mu, lower.tail = FALSE, log.p = TRUE)", 12, a,
      ppois(a[, 1] - 1, a[, 2], lower.tail = FALSE, log.p = TRUE))
# R's noncentral t is limited: |delta| <= 37.62, absolute accuracy about 1e-12.
a <- rbind(c(2, 5, 1), c(2.1, 20, 3), c(-1, 8, 0.5), c(30, 25, 28), c(1.2, 4, -0.4))
group("NoncentralTUpper", "pt(t, nu, delta, lower.tail = FALSE)", 9, a, pt(a[, 1], a[, 2], a[, 3], lower.tail = FALSE))
a <- rbind(c(20, 5, 3), c(3.84, 1, 7.85), c(30, 12, 20))
group("NoncentralChiSquareUpper", "pchisq(x, nu, lambda, lower.tail = FALSE)", 9, a,
      pchisq(a[, 1], a[, 2], a[, 3], lower.tail = FALSE))
a <- rbind(c(5, 6, 28), c(12, 9, 80), c(20, 30, 400))
group("RankSumUpper", "pwilcox(u - 1, m, n, lower.tail = FALSE)", 12, a,
      apply(a, 1, function(v) pwilcox(v[3] - 1, v[1], v[2], lower.tail = FALSE)))
a <- rbind(c(10, 45), c(25, 250), c(40, 600))
group("SignedRankUpper", "psignrank(v - 1, n, lower.tail = FALSE)", 12, a,
      psignrank(a[, 2] - 1, a[, 1], lower.tail = FALSE))
cat("\n]\n")
