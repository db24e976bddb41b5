# Standard errors of curves with the mean's error, and with that of the penalties, by mgcv.
#
#   Rscript bands.R OUTPUT.json
#
# Series of additive-models.json (its orange-juice rows), by gam(method = "REML") for gaussian and bam(method = "fREML",
# discrete = FALSE) for quasi-Poisson, at every sixth row. pointwise: predict(type = "terms"). withMean: predict(type =
# "iterms"), whose errors have the mean's (Marra & Wood 2012). unconditional: predict(type = "terms", unconditional = TRUE),
# whose covariance has the error of the penalties to second order (Wood, Pya & Saefken 2016). corrected: both. The last two
# are gam's alone: bam has no such covariance for quasi-Poisson.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

series <- fromJSON(file.path(here, "additive-models.json"), simplifyDataFrame = FALSE)$series
knots <- list(woy = c(0.5, 52.5))
right_side <- ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + deal + feat

errors_of <- function(fit, rows, ...) {
  found <- predict(fit, newdata = rows, se.fit = TRUE, ...)$se.fit
  list(price = ten_digits(found[, "s(lp)"]), woy = ten_digits(found[, "s(woy)"]))
}
at_some <- function(rows) rows[seq(1, nrow(rows), by = 6), ]
known_penalties <- function(fit, at) list(pointwise = errors_of(fit, at, type = "terms"), withMean = errors_of(fit, at, type = "iterms"))
chosen_penalties <- function(fit, at) {
  list(
    unconditional = errors_of(fit, at, type = "terms", unconditional = TRUE),
    corrected = errors_of(fit, at, type = "iterms", unconditional = TRUE)
  )
}
one <- function(which) {
  rows <- transform(as.data.frame(series[[which]]$data), lp = log(price), deal = factor(deal))
  gaussian_fit <- gam(update(right_side, logmove ~ .), data = rows, knots = knots, method = "REML", control = tight_control())
  quasi_fit <- bam(update(right_side, units ~ .), data = rows, knots = knots, family = quasipoisson(), method = "fREML", discrete = FALSE)
  list(
    series = which,
    gaussian = c(known_penalties(gaussian_fit, at_some(rows)), chosen_penalties(gaussian_fit, at_some(rows))),
    quasiPoisson = known_penalties(quasi_fit, at_some(rows))
  )
}

write_result(list(madeWith = made_with(c("mgcv", "jsonlite")), series = lapply(c(5, 7, 8, 9), one)))
