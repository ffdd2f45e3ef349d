# Writes means.json: measures of means computed with base R (and nlme for one
# row). Run in this folder: Rscript means_rows.R > means.json
# Data are drawn here with a fixed seed, rounded, and invented.

options(digits = 17)
num <- function(x) ifelse(is.infinite(x), ifelse(x > 0, '1e999', '-1e999'), sprintf("%.17g", x))
arr <- function(x) if (is.character(x)) paste0("[", paste0('"', x, '"', collapse = ", "), "]") else
  paste0("[", paste(num(x), collapse = ", "), "]")
obj <- function(l) paste0("{", paste(sprintf('"%s": %s', names(l), unlist(l)), collapse = ", "), "}")
program <- paste0("R ", R.version$major, ".", R.version$minor)
rows <- character()
add <- function(id, call, input, expected, digits, prog = program) {
  rows[[length(rows) + 1]] <<- paste0("  ", obj(list(id = sprintf('"%s"', id), program = sprintf('"%s"', prog),
    call = sprintf('"%s"', call), date = '"2026-12-01"', input = obj(input),
    expected = obj(lapply(expected, num)), digits = obj(list(all = digits)))))
}
str <- function(s) sprintf('"%s"', s)

# The numbers of a t statistic: both tails at nulls, limits at one-sided
# errors, for estimate, se, df on the scale of the analysis.
nulls <- function(e, c, est, se, df) {
  for (i in seq_along(c)) {
    t <- (est - c[i]) / se
    e[[paste0("lnup", i)]] <- pt(t, df, lower.tail = FALSE, log.p = TRUE)
    e[[paste0("lndown", i)]] <- pt(t, df, log.p = TRUE)
  }
  e
}
limits <- function(e, a, est, se, df, f = identity) {
  for (i in seq_along(a)) {
    q <- qt(a[i], df, lower.tail = FALSE)
    e[[paste0("low", i)]] <- f(est - q * se)
    e[[paste0("high", i)]] <- f(est + q * se)
  }
  e
}

set.seed(20261201)
x <- round(rnorm(14, 11.9, 1.3), 2)
y <- round(rnorm(19, 12.8, 2.1), 2)
z <- round(x + rnorm(14, -0.4, 0.7), 2)
lx <- round(exp(rnorm(14, 1.2, 0.4)), 3)
ly <- round(exp(rnorm(17, 0.9, 0.6)), 3)
cs <- c(-3, -0.5, 0, 0.8, 40, -1e6)
as <- c(0.025, 0.05, 1e-6, 0.3)

one <- t.test(x, mu = 12)
add("one-sample", "t.test(x, mu = 12), pt, qt", list(measure = str("mean"), method = str("t"), first = arr(x), nulls = arr(12 + cs), errors = arr(as)),
  limits(nulls(list(estimate = mean(x), se = one$stderr, df = 13), 12 + cs, mean(x), one$stderr, 13), as, mean(x), one$stderr, 13), 11)
stopifnot(abs(one$conf.int - t.test(x)$conf.int) < 1e-12)

p <- t.test(x, z, paired = TRUE)
add("paired", "t.test(x, z, paired = TRUE), pt, qt", list(measure = str("paired-mean-difference"), method = str("t"), first = arr(x), second = arr(z), nulls = arr(cs), errors = arr(as)),
  limits(nulls(list(estimate = unname(p$estimate), se = p$stderr, df = 13), cs, unname(p$estimate), p$stderr, 13), as, unname(p$estimate), p$stderr, 13), 11)

for (v in c("welch", "pooled-variance")) {
  r <- t.test(x, y, var.equal = v != "welch")
  d <- mean(x) - mean(y)
  add(paste0("difference-", v), sprintf("t.test(x, y, var.equal = %s), pt, qt", v != "welch"),
    list(measure = str("mean-difference"), method = str(v), first = arr(x), second = arr(y), nulls = arr(cs), errors = arr(as)),
    limits(nulls(list(estimate = d, se = r$stderr, df = unname(r$parameter)), cs, d, r$stderr, r$parameter), as, d, r$stderr, r$parameter), 11)
  for (u in c(0.3, 5)) {
    se <- sqrt(r$stderr^2 + u^2); df <- r$parameter * (se / r$stderr)^4
    add(paste0("difference-", v, "-u", u), "t.test; se and df with u added in quadrature, pt, qt",
      list(measure = str("mean-difference"), method = str(v), first = arr(x), second = arr(y), u = u, nulls = arr(cs[-6]), errors = arr(as)),
      limits(nulls(list(se = se, df = unname(df)), cs[-6], d, se, df), as, d, se, df), 10)
  }
  r <- t.test(log(lx), log(ly), var.equal = v != "welch")
  d <- mean(log(lx)) - mean(log(ly))
  cg <- c(0.8, 1, 1.25, 1e-5, 30)
  add(paste0("geometric-", v), sprintf("exp(t.test(log(x), log(y), var.equal = %s)), pt, qt", v != "welch"),
    list(measure = str("geometric-mean-ratio"), method = str(v), first = arr(lx), second = arr(ly), nulls = arr(cg), errors = arr(as)),
    limits(nulls(list(estimate = exp(d), se = r$stderr, df = unname(r$parameter)), log(cg), d, r$stderr, r$parameter), as, d, r$stderr, r$parameter, exp), 11)
}

# Design effect: n over D in the closed forms, df n/D - 1.
D <- 1.8; n1 <- 40; n2 <- 55; m1 <- 5.2; m2 <- 4.4; s1 <- 1.9; s2 <- 2.6
c1 <- s1^2 * D / n1; c2 <- s2^2 * D / n2
df <- (c1 + c2)^2 / (c1^2 / (n1 / D - 1) + c2^2 / (n2 / D - 1))
add("difference-welch-clusters", "Welch's formulas with n/D, pt, qt",
  list(measure = str("mean-difference"), method = str("welch"), groups = arr(c(n1, m1, s1, n2, m2, s2)), design = D, nulls = arr(cs), errors = arr(as)),
  limits(nulls(list(se = sqrt(c1 + c2), df = df), cs, m1 - m2, sqrt(c1 + c2), df), as, m1 - m2, sqrt(c1 + c2), df), 11)

# Far tails: ln p down to -2000.
f1 <- c(400, 1, 0.2); f2 <- c(350, 0, 0.3); cf <- c(-4, 0, 0.3, 2, 6)
c1 <- f1[3]^2 / f1[1]; c2 <- f2[3]^2 / f2[1]; df <- (c1 + c2)^2 / (c1^2 / 399 + c2^2 / 349)
add("difference-welch-far", "pt(log.p = TRUE) far out", list(measure = str("mean-difference"), method = str("welch"), groups = arr(c(f1, f2)), nulls = arr(cf), errors = arr(c(1e-200, 1e-12))),
  limits(nulls(list(se = sqrt(c1 + c2), df = df), cf, 1, sqrt(c1 + c2), df), c(1e-200, 1e-12), 1, sqrt(c1 + c2), df), 10)

# Ratio of means.
pos1 <- round(rnorm(12, 9, 2), 2); pos2 <- round(rnorm(15, 6, 2.5), 2)
M1 <- mean(pos1); M2 <- mean(pos2); C1 <- var(pos1) / 12; C2 <- var(pos2) / 15
fT <- function(r) (M1 - r * M2) / sqrt(C1 + r^2 * C2)
fdf <- function(r) (C1 + r^2 * C2)^2 / (C1^2 / 11 + r^4 * C2^2 / 14)
cr <- c(0.5, 1, 1.6, 3)
e <- list(estimate = M1 / M2, se = sqrt(C1 / M1^2 + C2 / M2^2))
for (i in seq_along(cr)) {
  e[[paste0("lnup", i)]] <- pt(fT(cr[i]), fdf(cr[i]), lower.tail = FALSE, log.p = TRUE)
  e[[paste0("lndown", i)]] <- pt(fT(cr[i]), fdf(cr[i]), log.p = TRUE)
}
ar <- c(0.025, 0.05, 0.001)
for (i in seq_along(ar)) {
  h <- function(lr, s) qnorm(pt(s * fT(exp(lr)), fdf(exp(lr)), lower.tail = FALSE)) - qnorm(ar[i])
  e[[paste0("low", i)]] <- exp(uniroot(h, log(M1 / M2) + c(-2, 0), s = 1, tol = 1e-15)$root)
  e[[paste0("high", i)]] <- exp(uniroot(h, log(M1 / M2) + c(0, 2), s = -1, tol = 1e-15)$root)
}
add("ratio-fieller", "pt of the ratio statistic; uniroot on log ratio, tol 1e-15",
  list(measure = str("ratio-of-means"), method = str("fieller"), first = arr(pos1), second = arr(pos2), nulls = arr(cr), errors = arr(ar)), e, 10)
a <- C1 / M1^2; b <- C2 / M2^2; df <- (a + b)^2 / (a^2 / 11 + b^2 / 14)
add("ratio-log-delta", "delta method on the log ratio, pt, qt",
  list(measure = str("ratio-of-means"), method = str("log-delta"), first = arr(pos1), second = arr(pos2), nulls = arr(cr), errors = arr(ar)),
  limits(nulls(list(estimate = M1 / M2, se = sqrt(a + b), df = df), log(cr), log(M1 / M2), sqrt(a + b), df), ar, log(M1 / M2), sqrt(a + b), df, exp), 11)

# Standardized difference. pt with ncp keeps about ten digits of the central
# part; limits by uniroot.
nu <- 31; nt <- 14 * 19 / 33
sp <- sqrt((13 * var(x) + 18 * var(y)) / nu); d <- (mean(x) - mean(y)) / sp
J <- exp(lgamma(nu / 2) - lgamma((nu - 1) / 2)) / sqrt(nu / 2)
e <- list(estimate = J * d, se = sqrt(1 / nt + (J * d)^2 * (1 - (nu - 2) / (nu * J^2))))
cd <- c(-1, -0.5, 0, 0.4)
for (i in seq_along(cd)) {
  e[[paste0("lnup", i)]] <- pt(d * sqrt(nt), nu, ncp = cd[i] * sqrt(nt), lower.tail = FALSE, log.p = TRUE)
  e[[paste0("lndown", i)]] <- pt(d * sqrt(nt), nu, ncp = cd[i] * sqrt(nt), log.p = TRUE)
}
ad <- c(0.025, 0.05)
for (i in seq_along(ad)) {
  h <- function(c, side) pt(d * sqrt(nt), nu, ncp = c * sqrt(nt), lower.tail = side) - ad[i]
  e[[paste0("low", i)]] <- uniroot(h, c(-4, d), side = FALSE, tol = 1e-14)$root
  e[[paste0("high", i)]] <- uniroot(h, c(d, 4), side = TRUE, tol = 1e-14)$root
}
add("smd", "pt(d*sqrt(n1*n2/(n1+n2)), nu, ncp = c*sqrt(n1*n2/(n1+n2))); uniroot, tol 1e-14",
  list(measure = str("standardized-mean-difference"), method = str("noncentral-t"), first = arr(x), second = arr(y), nulls = arr(cd), errors = arr(ad)), e, 8)

# Linear model with a covariate, a factor and strata.
n <- 47
g <- rep(0:1, length.out = n); age <- round(rnorm(n, 50, 9), 1); site <- sample(c("east", "north", "west"), n, TRUE)
st <- sample(0:1, n, TRUE)
v <- round(20 + 1.3 * (g == 0) + 0.08 * age + 0.9 * (site == "west") - 0.5 * st + rnorm(n) * (1 + (g == 0)), 2)
for (lg in c(FALSE, TRUE)) {
  out <- if (lg) log(v) else v
  f <- lm(out ~ age + factor(site) + factor(st) + I(g == 0)); b <- coef(summary(f))
  X <- model.matrix(f); k <- ncol(X); res <- residuals(f); h <- hatvalues(f)
  B <- solve(crossprod(X)); V <- B %*% crossprod(X * (res / (1 - h))) %*% B
  for (w in c("linear", "linear-hc3")) {
    est <- unname(b[k, 1]); se <- if (w == "linear") unname(b[k, 2]) else unname(sqrt(V[k, k])); df <- n - k
    cc <- if (lg) c(0.9, 1, 1.1) else cs
    e <- list(estimate = if (lg) exp(est) else est, se = se, df = df)
    e <- nulls(e, if (lg) log(cc) else cc, est, se, df)
    add(paste0(if (lg) "geometric-" else "difference-", w),
      if (w == "linear") "lm(y ~ age + factor(site) + factor(st) + first group)" else "the same lm, sandwich with squared residuals over (1-h)^2 by hand",
      list(measure = str(if (lg) "geometric-mean-ratio" else "mean-difference"), method = str(w), value = arr(v), group = arr(g), covariate = arr(age),
        site = arr(site), strata = arr(st), nulls = arr(cc), errors = arr(as)),
      limits(e, as, est, se, df, if (lg) exp else identity), 10)
  }
}

# Crossover: complete data, so the mixed model and the t test agree.
library(nlme)
ns <- 13; sq <- rep(0:1, c(6, 7)); sub <- rep(rnorm(ns, 0, 2), each = 2); per <- rep(1:2, ns)
tr <- ifelse(rep(sq, each = 2) == per - 1, 0, 1) # 0: first group
cv <- round(30 + sub + 0.8 * (tr == 0) + 0.5 * per + rnorm(2 * ns), 2)
D <- cv[per == 1] - cv[per == 2]
for (v in c("welch", "pooled-variance")) {
  r <- t.test(D[sq == 0] / 2, D[sq == 1] / 2, var.equal = v != "welch"); est <- unname(r$estimate[1] - r$estimate[2])
  add(paste0("crossover-", v), sprintf("t.test(D[AB]/2, D[BA]/2, var.equal = %s), pt, qt", v != "welch"),
    list(measure = str("mean-difference"), method = str(v), value = arr(cv), subject = arr(rep(seq_len(ns) - 1, each = 2)), period = arr(per),
      sequence = arr(rep(sq, each = 2)), nulls = arr(cs[-6]), errors = arr(as)),
    limits(nulls(list(estimate = est, se = r$stderr, df = unname(r$parameter)), cs[-6], est, r$stderr, r$parameter), as, est, r$stderr, r$parameter), 11)
}
m <- lme(cv ~ factor(per) + I(tr == 0), random = ~ 1 | s, data = data.frame(cv, per, tr, s = factor(rep(1:ns, each = 2))))
b <- summary(m)$tTable
add("crossover-mixed-model", "lme(y ~ period + treatment, random = ~ 1 | subject)",
  list(measure = str("mean-difference"), method = str("pooled-variance"), value = arr(cv), subject = arr(rep(seq_len(ns) - 1, each = 2)), period = arr(per),
    sequence = arr(rep(sq, each = 2))), list(estimate = b[3, 1], se = b[3, 2], df = b[3, 3]), 6,
  paste0(program, " with nlme ", packageVersion("nlme")))

# Permutations by brute force.
px <- c(4.1, 5.3, 6.2, 5.9, 7.0); py <- c(3.0, 4.4, 2.7, 4.9, 3.8, 6.1)
all <- c(px, py); sel <- combn(11, 5); cp <- c(-1, 0, 0.513, 1.7, 4)
e <- list(estimate = mean(px) - mean(py))
for (i in seq_along(cp)) {
  sh <- c(px - cp[i], py); s <- apply(sel, 2, function(k) mean(sh[k]) - mean(sh[-k])); o <- mean(px - cp[i]) - mean(py)
  e[[paste0("lnup", i)]] <- log(mean(s >= o - 1e-9)); e[[paste0("lndown", i)]] <- log(mean(s <= o + 1e-9))
}
add("difference-permutation", "all combn(11, 5) differences of means of the shifted data",
  list(measure = str("mean-difference"), method = str("permutation"), first = arr(px), second = arr(py), nulls = arr(cp)), e, 12)
ps <- c(0.7, -1.6, -0.2, -1.2, 3.1, 3.4, 3.7, 0.8, 0.1, 2.0)
sg <- as.matrix(expand.grid(rep(list(c(-1, 1)), 10)))
e <- list(estimate = mean(ps)); cm <- c(-1, 0, 0.513, 2.2)
for (i in seq_along(cm)) {
  s <- sg %*% (ps - cm[i]); o <- sum(ps - cm[i])
  e[[paste0("lnup", i)]] <- log(mean(s >= o - 1e-9)); e[[paste0("lndown", i)]] <- log(mean(s <= o + 1e-9))
}
add("mean-permutation", "all 2^10 sign changes of the values less the null",
  list(measure = str("mean"), method = str("permutation"), first = arr(ps), nulls = arr(cm)), e, 12)

# Given effects.
gv <- function(id, measure, est, se, df, scale, cc, extra, f = identity, digits = 11, own = se) {
  g <- scale(est)
  add(id, "pt or pnorm of (g(estimate) - g(c))/se, qt or qnorm",
    c(list(measure = str(measure), given = obj(extra), nulls = arr(cc), errors = arr(as))),
    limits(nulls(list(estimate = est, se = own), scale(cc), g, se, df), as, g, se, df, f), digits)
}
gv("given-normal", "estimate", 1.3, 0.42, Inf, identity, cs, list(estimate = 1.3, se = 0.42))
gv("given-t", "estimate", 1.3, 0.42, 9, identity, cs, list(estimate = 1.3, se = 0.42, df = 9))
gv("given-difference", "mean-difference", 1.3, 0.42, 9, identity, cs, list(estimate = 1.3, se = 0.42, df = 9))
gv("given-ratio", "hazard-ratio", 0.74, 0.11, Inf, log, c(0.5, 1, 1.3, 1e-9), list(estimate = 0.74, se = 0.11), exp)
gv("given-ratio-interval", "ratio-estimate", 0.74, (log(0.92) - log(0.6)) / (2 * qnorm(0.975)), Inf, log, c(0.5, 1, 1.3), list(estimate = 0.74, low = 0.6, high = 0.92, level = 0.95), exp)
gv("given-interval-t", "mean-difference", 2, 1.4 / qt(0.95, 12), 12, identity, c(0, 1, 3), list(estimate = 2, low = 0.6, high = 3.4, level = 0.9, df = 12))
gv("given-proportion", "proportion", 0.2, 0.03 / 0.16, Inf, qlogis, c(0.1, 0.2, 0.4), list(estimate = 0.2, se = 0.03), plogis, own = 0.03)
gv("given-correlation", "correlation", 0.5, 0.08 / 0.75, Inf, atanh, c(-0.2, 0, 0.8), list(estimate = 0.5, se = 0.08), tanh, own = 0.08)

cat("[\n", paste(rows, collapse = ",\n"), "\n]\n", sep = "")
