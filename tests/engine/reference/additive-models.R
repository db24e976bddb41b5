# Additive models of the 11 products of store 2 (orange-juice data of Debian's r-cran-bayesm), by mgcv.
#
#   Rscript additive-models.R OUTPUT.json
#
# gaussian: gam(method = "REML") with tight tolerances. quasi-poisson: bam(method = "fREML", discrete = FALSE), since
# gam's REML for quasi families is another criterion. Penalised splines (ps, cp) with second differences.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

rows <- orange_juice_rows()
right_side <- ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + dealFactor + feat
knots <- list(woy = c(0.5, 52.5))

summarise_fit <- function(fit) {
  on_link <- predict(fit, se.fit = TRUE)
  by_term <- predict(fit, type = "terms", se.fit = TRUE)
  smooths <- c("s(lp)", "s(woy)")
  list(
    linearPredictor = ten_digits(on_link$fit),
    standardError = ten_digits(on_link$se.fit),
    priceCurve = ten_digits(by_term$fit[, "s(lp)"]),
    priceError = ten_digits(by_term$se.fit[, "s(lp)"]),
    edf = ten_digits(summary(fit)$edf),
    totalEdf = ten_digits(sum(fit$edf)),
    dispersion = ten_digits(fit$sig2),
    deal = ten_digits(coef(fit)["dealFactor1"]),
    feature = ten_digits(coef(fit)["feat"]),
    deviance = ten_digits(fit$deviance),
    nullDeviance = ten_digits(fit$null.deviance)
  )
}

fit_series <- function(brand) {
  series <- rows[rows$store == 2 & rows$brand == brand, ]
  tight <- gam.control(epsilon = 1e-12, newton = list(conv.tol = 1e-12, maxNstep = 5, maxSstep = 2, maxHalf = 30, use.svd = FALSE))
  gaussian_fit <- gam(update(right_side, logmove ~ .), data = series, knots = knots, method = "REML", control = tight)
  quasi_fit <- bam(
    update(right_side, units ~ .), data = series, knots = knots, family = quasipoisson(), method = "fREML",
    discrete = FALSE, control = gam.control(epsilon = 1e-12, maxit = 500)
  )
  list(
    name = sprintf("store 2, product %d", brand),
    data = as.list(series[c("logmove", "units", "price", "woy", "deal", "feat")]),
    gaussian = summarise_fit(gaussian_fit),
    quasiPoisson = summarise_fit(quasi_fit)
  )
}

write_result(list(madeWith = made_with(c("mgcv", "bayesm", "jsonlite")), series = lapply(1:11, fit_series)))
