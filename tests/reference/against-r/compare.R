# Answers the cases of a folder's cases.json with R's own functions where R has them and with the published formulas
# where it has not; writes answers.json beside it. Started by tests/statistics/against-r/run.ts; sample.json is kept by its --freeze.
needed <- c("jsonlite", "survival", "epitools", "MASS", "sandwich", "geepack")
missing <- needed[!vapply(needed, requireNamespace, TRUE, quietly = TRUE)]
if (length(missing) > 0) {
  cat("R lacks:", paste0("r-cran-", missing), "\n")
  quit(status = 3)
}
suppressPackageStartupMessages({ library(survival); library(MASS); library(sandwich); library(geepack) })
folder <- commandArgs(trailingOnly = TRUE)[1]
tight <- glm.control(epsilon = 1e-14, maxit = 200)
# The covariance of a glm is that of the step before its last: begin again where it ended.
poissonFit <- function(formula, data) {
  first <- glm(formula, poisson, data, control = tight)
  glm(formula, poisson, data, control = tight, start = coef(first))
}
number <- function(x) if (is.null(x)) NA else x
named <- function(prefix, x) if (length(x)) setNames(x, paste0(prefix, seq_along(x) - 1)) else NULL
interval <- function(e, l) c(estimate = unname(e), lower = l[[1]], upper = l[[2]])
root <- function(f, low, high) if (f(low) == 0) low else uniroot(f, c(low, high), tol = 1e-15, maxiter = 5000)$root
z <- function(level) qnorm(0.5 + level / 2)
tail <- function(level) (1 - level) / 2

r <- list()
r$incidenceRate <- function(i) {
  t <- poisson.test(i$events, i$exposure / i$per, conf.level = i$level)
  interval(t$estimate, t$conf.int)
}
r$poissonMidPInterval <- function(i) {
  n <- i$events; a <- tail(i$level)
  ci <- poisson.test(n, conf.level = i$level)$conf.int
  if (n == 0) return(c(lower = 0, upper = max(0, -log(2 * a))))
  mid <- function(m) ppois(n, m, lower.tail = FALSE) + dpois(n, m) / 2
  c(lower = root(function(m) mid(m) - a, ci[1], ci[2]),
    upper = root(function(m) ppois(n - 1, m) + dpois(n, m) / 2 - a, ci[1], ci[2]))
}
r$poissonByarInterval <- function(i) {
  n <- i$events
  c(lower = if (n == 0) 0 else max(0, n * (1 - 1 / (9 * n) - z(i$level) / (3 * sqrt(n)))^3),
    upper = (n + 1) * (1 - 1 / (9 * (n + 1)) + z(i$level) / (3 * sqrt(n + 1)))^3)
}
r$exceedance <- function(i) c(chance = ppois(i$events - 1, i$expected, lower.tail = FALSE))
r[["rateRatio exact"]] <- function(i) {
  t <- poisson.test(i$events, i$exposure, conf.level = i$level)
  c(interval(t$estimate, t$conf.int), pValue = t$p.value)
}
r[["rateRatio mid-p"]] <- function(i) {
  exact <- r[["rateRatio exact"]](i)
  if (any(i$events == 0)) return(exact)
  a <- i$events[1]; n <- sum(i$events); q <- tail(i$level)
  share <- function(x) 1 / (1 + i$exposure[2] / (exp(x) * i$exposure[1]))
  over <- function(x) pbinom(a, n, share(x), lower.tail = FALSE) + dbinom(a, n, share(x)) / 2
  under <- function(x) pbinom(a - 1, n, share(x)) + dbinom(a, n, share(x)) / 2
  ends <- log(exact[c("lower", "upper")])
  c(exact["estimate"], lower = exp(root(function(x) over(x) - q, ends[[1]], ends[[2]])),
    upper = exp(root(function(x) under(x) - q, ends[[1]], ends[[2]])),
    pValue = min(1, 2 * min(over(0), under(0))))
}
r[["rateRatio wald"]] <- function(i) {
  if (any(i$events == 0)) return(r[["rateRatio exact"]](i))
  # The second row is the one compared: a.
  m <- epitools::rateratio(matrix(c(rev(i$events), rev(i$exposure)), 2), method = "wald", conf.level = i$level)
  fit <- poissonFit(events ~ a + offset(log(exposure)), data.frame(i[c("events", "exposure")], a = 1:0))
  c(interval(m$measure[2, 1], m$measure[2, 2:3]), pValue = coef(summary(fit))[2, 4])
}
r$rateDifference <- function(i) {
  x <- i$events; t <- i$exposure
  d <- x[1] / t[1] - x[2] / t[2]
  m <- z(i$level) * sqrt(sum(x / t^2))
  if (any(x == 0)) {
    ci <- sapply(1:2, function(k) poisson.test(x[k], t[k], conf.level = i$level)$conf.int)
    e <- x / t
    return(1000 * interval(d, c(d - sqrt((e[1] - ci[1, 1])^2 + (ci[2, 2] - e[2])^2), d + sqrt((ci[2, 1] - e[1])^2 + (e[2] - ci[1, 2])^2))))
  }
  1000 * interval(d, c(d - m, d + m))
}
split2 <- function(i) {
  one <- seq_len(i$size)
  list(a = i$events[one], b = i$events[-one], ta = i$exposure[one], tb = i$exposure[-one])
}
r$mantelHaenszel <- function(i) with(split2(i), {
  if (sum(a) == 0 || sum(b) == 0) return(NULL)
  t <- ta + tb; m <- a + b
  top <- sum(a * tb / t); bottom <- sum(b * ta / t)
  se <- sqrt(sum(m * ta * tb / t^2) / (top * bottom))
  u <- a > 0 & b > 0
  h <- if (sum(u) < 2) 0 else sum((log(a * tb / (b * ta)) - log(top / bottom))[u]^2 / (1 / a + 1 / b)[u])
  c(interval(top / bottom, top / bottom * exp(c(-1, 1) * z(i$level) * se)),
    association = (sum(a) - sum(m * ta / t))^2 / sum(m * ta * tb / t^2),
    heterogeneity = h, heterogeneityP = if (sum(u) < 2) 1 else pchisq(h, sum(u) - 1, lower.tail = FALSE))
})
r$mantelHaenszelDifference <- function(i) with(split2(i), {
  if (sum(a) == 0 || sum(b) == 0) return(NULL)
  w <- ta * tb / (ta + tb)
  d <- sum(w * (a / ta - b / tb)) / sum(w)
  m <- z(i$level) * sqrt(sum(w^2 * (a / ta^2 + b / tb^2))) / sum(w)
  1000 * interval(d, c(d - m, d + m))
})
r$directlyStandardisedRate <- function(i) {
  if (sum(i$events) == 0) return(NULL)
  d <- epitools::ageadjust.direct(i$events, i$exposure, stdpop = i$weights, conf.level = i$level)
  1000 * interval(d["adj.rate"], d[c("lci", "uci")])
}
r$standardisedIncidenceRatio <- function(i) {
  t <- poisson.test(i$observed, i$expected, conf.level = i$level)
  interval(t$estimate, t$conf.int)
}
r$burden <- function(i) {
  s <- sum(i$days)
  if (s == 0) return(c(estimate = 0, lower = NA, upper = NA))
  e <- 1000 * s / i$hours
  interval(e, e * exp(c(-1, 1) * z(i$level) * sqrt(sum(i$days^2)) / s))
}
r[["proportion wilson"]] <- function(i) {
  t <- prop.test(i$successes, i$trials, conf.level = i$level, correct = FALSE)
  interval(t$estimate, t$conf.int)
}
r[["proportion clopper-pearson"]] <- function(i) {
  t <- binom.test(i$successes, i$trials, conf.level = i$level)
  interval(t$estimate, t$conf.int)
}
r$meanShare <- function(i) {
  wilson <- function(x) prop.test(x, i$trials, conf.level = i$level, correct = FALSE)$conf.int
  interval(i$sum / i$trials, c(wilson(floor(i$sum))[1], wilson(ceiling(i$sum))[2]))
}
r$funnelLimits <- function(i) {
  m <- i$rate / 1000 * i$exposure
  mid <- function(k) ((if (k == 0) 1 else pgamma(m, k)) + pgamma(m, k + 1)) / 2
  at <- function(p) if (mid(0) <= p) 0 else root(function(k) mid(k) - p, 0, m + 40 * sqrt(m) + 40)
  c(lower = at(1 - tail(i$level)), upper = at(tail(i$level))) * 1000 / i$exposure
}
r$smallestDetectableRatio <- function(i) {
  a <- i$rate / 1000 * i$exposureA; b <- i$rate / 1000 * i$exposureB
  power <- function(d) d / sqrt(exp(d) / a + 1 / b) - z(i$level) - qnorm(i$power)
  # The first crossing on a fine grid, then its root.
  grid <- seq(0, 25, by = 1e-3); over <- which(power(grid) > 0)
  if (length(over) == 0) return(c(ratio = NA))
  c(ratio = exp(-root(power, grid[over[1] - 1], grid[over[1]])))
}

r$poissonRegression <- function(i) {
  m <- poissonFit(events ~ group + x + offset(log(exposure)), data.frame(i[c("events", "group", "x", "exposure")]))
  s <- sqrt(diag(vcov(m))); phi <- sum(residuals(m, "pearson")^2) / m$df.residual
  c(deviance = deviance(m), pearson = phi * m$df.residual, named("estimate", unname(coef(m))), named("model", unname(s)),
    named("quasi", unname(s * sqrt(max(1, phi)))),
    named("robust", unname(sqrt(diag(vcovCL(m, i$team, type = "HC0", cadjust = FALSE))))))
}
# Bias-reduced linearisation by its definition: whole matrices over rows, Pearson's scale, Moore-Penrose roots.
cr2 <- function(m, cluster, k) {
  mu <- fitted(m); Z <- model.matrix(m) * sqrt(mu); M <- solve(crossprod(Z)); H <- Z %*% M %*% t(Z); n <- length(mu)
  e <- (m$y - mu) / sqrt(mu); L <- diag(n) - H
  G <- sapply(unique(cluster), function(c) {
    own <- cluster == c
    v <- eigen(L[own, own, drop = FALSE], symmetric = TRUE)
    inverse <- ifelse(v$values > 1e-10, 1 / sqrt(pmax(v$values, 1e-10)), 0)
    A <- v$vectors %*% (inverse * t(v$vectors))
    s <- A %*% Z[own, , drop = FALSE] %*% M[, k]
    c(sum(s * e[own]), L[, own, drop = FALSE] %*% s)
  })
  g <- crossprod(G[-1, ])
  list(variance = sum(G[1, ]^2), expected = sum(diag(g)), df = sum(diag(g))^2 / sum(g^2))
}
r$clusterRobustRateRatio <- function(i) {
  d <- data.frame(i[c("team", "group", "stratum", "exposure", "events")])
  d <- d[ave(d$events, d$stratum, FUN = sum) > 0, ]
  f <- if (length(unique(d$stratum)) > 1) events ~ group + factor(stratum) + offset(log(exposure)) else events ~ group + offset(log(exposure))
  m <- poissonFit(f, d)
  b <- coef(m)[[2]]; v <- vcov(m)[2, 2]; w <- vcovCL(m, d$team, type = "HC0", cadjust = FALSE)[2, 2]
  s <- sqrt(max(v, w)); small <- cr2(m, d$team, 2); t <- sqrt(max(v, small$variance)); q <- qt(0.5 + i$level / 2, small$df)
  c(estimate = exp(b), lower = exp(b - z(i$level) * s), upper = exp(b + z(i$level) * s), pValue = 2 * pnorm(-abs(b) / s),
    varianceInflation = w / v,
    if (abs(small$expected / v - 1) < 1e-6) c(df = small$df, smallLower = exp(b - q * t), smallUpper = exp(b + q * t), smallP = 2 * pt(-abs(b) / t, small$df))
    else c(df = NA, smallLower = NA, smallUpper = NA, smallP = NA))
}
r$exchangeableRegression <- function(i) {
  d <- data.frame(i[c("team", "group", "exposure", "events")])
  d <- d[order(d$team), ]
  m <- geeglm(events ~ group + offset(log(exposure)), poisson, d, id = team, corstr = "exchangeable",
    control = geese.control(epsilon = 1e-13, maxit = 500))
  s <- summary(m)
  c(correlation = m$geese$alpha[[1]], dispersion = m$geese$gamma[[1]], intercept = coef(m)[[1]], group = coef(m)[[2]],
    robust = s$coefficients[2, 2])
}
r$teamRateTest <- function(i) {
  rate <- i$events / i$exposure
  t <- t.test(rate[i$group == 1], rate[i$group == 0], var.equal = TRUE, conf.level = i$level)
  c(1000 * interval(t$estimate[[1]] - t$estimate[[2]], t$conf.int), statistic = t$statistic[[1]], pValue = t$p.value)
}
r$rateTrend <- function(i) {
  m <- poissonFit(events ~ period + offset(log(exposure)), data.frame(i[c("events", "exposure")], period = seq_along(i$events)))
  phi <- sum(residuals(m, "pearson")^2) / m$df.residual
  b <- coef(m)[[2]]; s <- sqrt(vcov(m)[2, 2] * max(1, phi))
  c(interval(exp(b), exp(b + c(-1, 1) * z(i$level) * s)), pValue = 2 * pnorm(-abs(b / s)), dispersion = phi)
}
r$shrunkenRates <- function(i) {
  y <- i$events; e <- i$exposure
  m <- suppressWarnings(glm.nb(y ~ 1 + offset(log(e)), control = glm.control(epsilon = 1e-12, maxit = 100)))
  # glm.nb stops its search of the shape early: repeat both halves until they stand still.
  theta <- m$theta
  for (k in 1:200) {
    m <- glm(y ~ 1 + offset(log(e)), family = negative.binomial(theta), control = tight)
    new <- suppressWarnings(theta.ml(y, fitted(m), limit = 200, eps = 1e-12))[[1]]
    if (abs(new / theta - 1) < 1e-12) break
    theta <- new
  }
  if (k == 200 || theta > 1e5) return(NULL)
  mean <- exp(coef(m)[[1]]); n <- length(y)
  at <- function(p, k) 1000 * qgamma(p, theta + y[k], theta / mean + e[k])
  c(mean = 1000 * mean, shape = theta, estimate = 1000 * (theta + y[1]) / (theta / mean + e[1]), lower = at(tail(i$level), 1),
    upper = at(1 - tail(i$level), 1), lastEstimate = 1000 * (theta + y[n]) / (theta / mean + e[n]), lastUpper = at(1 - tail(i$level), n))
}
r$kaplanMeier <- function(i) {
  s <- summary(survfit(Surv(i$time, i$event) ~ 1, conf.type = "log-log", conf.int = i$level))
  half <- s$time[s$surv <= 0.5 + 1e-12]
  gone <- s$surv < 1e-12
  error <- ifelse(gone, 0, s$std.err)
  c(median = if (length(half)) half[1] else NA, steps = length(s$time), named("survival", ifelse(gone, 0, s$surv)), named("error", error),
    named("lower", ifelse(gone, NA, s$lower)), named("upper", ifelse(gone, NA, s$upper)))
}
r$logRank <- function(i) {
  s <- survdiff(Surv(i$time, i$event) ~ i$group)
  c(statistic = s$chisq, pValue = pchisq(s$chisq, 1, lower.tail = FALSE))
}

r$uChart <- function(i) {
  u <- sum(i$events) / sum(i$exposure)
  c(centre = u, named("lower", pmax(0, u - 3 * sqrt(u / i$exposure))), named("upper", u + 3 * sqrt(u / i$exposure)))
}
r$gChart <- function(i) { g <- mean(i$gaps); c(centre = g, upper = g + 3 * sqrt(g * (g + 1))) }
r$poissonCusum <- function(i) {
  k <- i$inControl * (i$ratio - 1) / log(i$ratio)
  path <- Reduce(function(s, j) max(0, s + i$counts[j] - k[j]), seq_along(k), 0, accumulate = TRUE)[-1]
  c(signalAt = which(path > 4)[1], named("path", path))
}
r$cusumRunLength <- function(i) {
  states <- 0:i$threshold
  P <- outer(states, states, function(from, to) ifelse(to == 0, ppois(i$reference - from, i$mean), dpois(to - from + i$reference, i$mean)))
  c(length = solve(diag(length(states)) - P, rep(1, length(states)))[1])
}
r$quantile <- function(i) c(quantile = unname(quantile(i$values, i$p, type = 7)), named("tertile", unname(quantile(i$values, 1:2 / 3, type = 7))))
r$timeLoss <- function(i) {
  days <- max(0, as.numeric(diff(as.Date(i$days))) - 1)
  c(days = days, band = as.integer(cut(days, c(-1, 0, 7, 28, Inf))) - 1)
}
r$ageOn <- function(i) {
  b <- as.POSIXlt(as.Date(i$born)); o <- as.POSIXlt(as.Date(i$on))
  c(age = o$year - b$year - (o$mon < b$mon || (o$mon == b$mon && o$mday < b$mday)))
}
r[["limbSymmetryIndex, designEffect"]] <- function(i)
  c(higher = 100 * i$injured / i$uninjured, lower = 100 * i$uninjured / i$injured, effect = 1 + (i$size - 1) * i$icc)

cases <- jsonlite::fromJSON(file.path(folder, "cases.json"), simplifyDataFrame = FALSE)
answer <- function(case) tryCatch({
  values <- suppressWarnings(r[[case$name]](case$input))
  if (is.null(values)) list(none = jsonlite::unbox("not comparable"))
  else list(values = lapply(setNames(sprintf("%.17g", values), names(values)), jsonlite::unbox))
}, error = function(e) list(none = jsonlite::unbox(conditionMessage(e))))
jsonlite::write_json(list(version = jsonlite::unbox(R.version.string), answers = lapply(cases, answer)), file.path(folder, "answers.json"))
