# Spline bases and predictions beyond the range, by R's splines and mgcv.
#
#   Rscript splines.R OUTPUT.json
#
# basis: splines::splineDesign on the knots a smooth of size 7 has over 0 to 10. beyond: a penalised spline of mgcv at
# given smoothing parameter, with weights and an offset, predicted inside and outside the range of its data.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

lower <- 0 - 0.01
upper <- 10 + 0.01
step <- (upper - lower) / 4
knots <- seq(lower - 3 * step, upper + 3 * step, length.out = 11)
x <- c(0, 0.3, 2.5, 4.9, 7.77, 9.99, 10)

set.seed(11)
n <- 80
data <- data.frame(x = round(runif(n, 1, 9), 3), w = round(runif(n, 0.2, 2), 2), o = round(rnorm(n), 2))
data$y <- ten_digits(sin(data$x) + data$o + rnorm(n, 0, 0.2))
fit <- gam(y ~ s(x, k = 9, bs = "ps") + offset(o), data = data, weights = w, sp = 2.5)
at <- data.frame(x = c(-1, 0.5, 1.2, 5, 8.5, 9.5, 14), o = c(0, 0, 1, 0, -1, 0, 0.5))
there <- predict(fit, at, se.fit = TRUE)

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  basis = list(lower = 0, upper = 10, size = 7, x = x, rows = ten_digits(t(splines::splineDesign(knots, x)))),
  beyond = list(
    data = as.list(data), penalty = ten_digits(2.5 / fit$smooth[[1]]$S.scale), at = as.list(at), size = 9,
    linearPredictor = ten_digits(there$fit), standardError = ten_digits(there$se.fit), edf = ten_digits(sum(fit$edf)), dispersion = ten_digits(fit$sig2)
  )
))
