# Additive models of all 913 series (83 stores x 11 products) of the orange-juice data of Debian's r-cran-bayesm, by mgcv.
# Too big to be committed: made anew where it is compared.
#
#   Rscript all-series.R OUTPUT.json
#
# Per series: gaussian, gam(method = "REML") with tight tolerances, of logmove (about 40 ms each); quasiPoisson,
# bam(method = "fREML", discrete = FALSE), of units (about 70 ms). Linear predictor and penalties, in the scale of our
# difference penalties. The model is additive-models.R's.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

rows <- orange_juice_rows()
right_side <- ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + dealFactor + feat
knots <- list(woy = c(0.5, 52.5))

summarise_series <- function(fit) {
  list(
    linearPredictor = ten_digits(fit$linear.predictors), totalEdf = ten_digits(sum(fit$edf)), dispersion = ten_digits(fit$sig2),
    penalties = ten_digits(fit$sp / vapply(fit$smooth, function(term) term$S.scale, 0))
  )
}

fit_series <- function(series) {
  # A feature or deal that never changes cannot be told from the intercept.
  formula <- right_side
  if (length(unique(series$deal)) < 2) formula <- update(formula, ~ . - dealFactor)
  if (length(unique(series$feat)) < 2) formula <- update(formula, ~ . - feat)
  gaussian_fit <- gam(update(formula, logmove ~ .), data = series, knots = knots, method = "REML", control = tight_control())
  quasi_fit <- bam(
    update(formula, units ~ .), data = series, knots = knots, family = quasipoisson(), method = "fREML", discrete = FALSE,
    control = gam.control(epsilon = 1e-10, maxit = 500)
  )
  list(
    store = series$store[1], product = series$brand[1], data = as.list(series[c("logmove", "units", "price", "woy", "deal", "feat")]),
    gaussian = summarise_series(gaussian_fit), quasiPoisson = summarise_series(quasi_fit)
  )
}

every_series <- split(rows, list(rows$store, rows$brand), drop = TRUE)
write_result(list(madeWith = made_with(c("mgcv", "bayesm", "jsonlite")), series = unname(lapply(every_series, fit_series))))
