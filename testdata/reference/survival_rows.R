# Writes survival.json with the survival package: Rscript survival_rows.R > survival.json
suppressMessages(library(survival))
source("rows.R")
set.seed(414)
prog <- paste(program, "with survival", packageVersion("survival"))

draw <- function(n, grid, beta, strata) {
  g <- rep(0:1, length.out = n); s <- sample(strata, n, TRUE)
  t <- ceiling(rexp(n, exp(beta * (g == 0) + 0.3 * s) / 8) / grid) * grid; cens <- ceiling(runif(n, 2, 18) / grid) * grid
  data.frame(time = round(pmin(t, cens), 3), event = as.numeric(t <= cens), group = g, s = s)
}
cases <- list(ties = draw(40, 1, 0.7, 3), fine = draw(150, 0.01, -0.4, 1), coarse = draw(600, 4, 0.2, 5), few = draw(9, 1, 1, 1))
for (name in names(cases)) {
  d <- cases[[name]]; d$first <- as.numeric(d$group == 0)
  given <- list(time = arr(d$time), event = arr(d$event), group = arr(d$group), strata = arr(d$s - 1))
  for (stratified in c(FALSE, TRUE)) {
    if (stratified && max(d$s) == 1) next
    f <- if (stratified) Surv(time, event) ~ first + strata(s) else Surv(time, event) ~ first
    tight <- coxph.control(eps = 1e-14, toler.chol = 1e-15, iter.max = 100)
    fit <- coxph(f, d, ties = "efron", control = tight)
    at <- function(b) coxph(f, d, ties = "efron", init = b, control = coxph.control(iter.max = 0))
    b <- unname(coef(fit)); se <- unname(sqrt(fit$var[1, 1]))
    lr <- function(x) sign(b - x) * sqrt(max(0, 2 * (fit$loglik[2] - at(x)$loglik[1])))
    sc <- function(x) sign(b - x) * sqrt(at(x)$score)
    q <- qnorm(.975)
    e <- list(beta = b, se = se, loglik_gain = fit$loglik[2] - fit$loglik[1], lr_z_at_1 = lr(0), score_z_at_1 = sc(0), lr_z_at_half = lr(log(0.5)), score_z_at_half = sc(log(0.5)),
      "lr_low" = exp(root(function(x) lr(x) - q, b - 5 * se - 1, b - 1e-3 * se)), "lr_high" = exp(root(function(x) lr(x) + q, b + 1e-3 * se, b + 5 * se + 1)),
      "score_low" = exp(root(function(x) sc(x) - q, b - 4 * se, b - 0.2 * se)), "score_high" = exp(root(function(x) sc(x) + q, b + 0.2 * se, b + 4 * se)))
    sd <- survdiff(if (stratified) Surv(time, event) ~ first + strata(s) else Surv(time, event) ~ first, d)
    e$logrank_chisq <- sd$chisq
    # Grambsch and Therneau's test from the Schoenfeld residuals; cox.zph itself has
    # been another, exact score test since survival 3.0.
    r <- residuals(fit, "schoenfeld"); t <- sort(d$time[d$event == 1])
    r <- r[order(as.numeric(names(r)))]; g <- rank(t); m <- sum(d$event)
    e$proportionality_chisq <- sum((g - mean(g)) * r)^2 * m / (sum((g - mean(g))^2) / se^2)
    add(paste0("cox-", name, if (stratified) "-strata" else ""),
      "coxph(Surv(time, event) ~ first, ties = 'efron'); survdiff; limits by uniroot on coxph(init = b, iter.max = 0); residuals(fit, 'schoenfeld') with ranks of event times",
      c(given, list(stratified = if (stratified) "true" else "false")), e, list(all = 9, lr_low = 7, lr_high = 7, score_low = 7, score_high = 7), prog)
  }
  if (name == "few") next
  for (tau in c(5, 9)) {
    m <- summary(survfit(Surv(time, event) ~ group, d), rmean = tau)$table
    mean <- m[, "rmean"]; se <- m[, "se(rmean)"]
    k <- summary(survfit(Surv(time, event) ~ 1, d[d$group == 0, ], conf.type = "log-log", conf.int = 0.95), times = c(2, 4))
    add(sprintf("restricted-%s-%g", name, tau), "summary(survfit(Surv(time, event) ~ group), rmean = tau)$table; summary(survfit(conf.type = 'log-log'), times)",
      c(given, list(tau = tau)), list(difference = unname(mean[1] - mean[2]), se = sqrt(sum(se^2)), mean_first = unname(mean[1]), mean_second = unname(mean[2]),
      share_2 = k$surv[1], low_2 = k$lower[1], high_2 = k$upper[1], share_4 = k$surv[2], low_4 = k$lower[2], high_4 = k$upper[2]), 10, prog)
  }
}
write_rows()
