# Tests of terms and information criteria of additive models, by mgcv and lm.
#
#   Rscript tests-of-terms.R OUTPUT.json
#
# tests: summary's statistic, reference degrees of freedom and p-value per curve (Wood 2013) and Wald's test of the factor;
# gaussian by gam(method = "REML"), binomial and negative binomial at given penalties (of our difference penalties), so that
# both sides test the same fit. criteria: AIC with the correction for smoothing parameters, its degrees of freedom, by
# gam(method = "REML"). nested: anova's F, and the difference in
# AIC, of a straight line within a natural spline.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

set.seed(20240351)
n <- 240
data <- data.frame(
  price = round(runif(n, 1, 2.6), 2), yearFraction = round((seq_len(n) %% 52 + 0.5) / 52, 4),
  temperature = round(rnorm(n, 12, 6), 1), promotion = sample(c("none", "feature", "display"), n, replace = TRUE, prob = c(0.6, 0.25, 0.15))
)
eta <- with(data, 3 - 1.5 * log(price) - 0.8 * sin(5 * log(price)) + 0.4 * sin(2 * pi * yearFraction) + 0.002 * (temperature - 12)^2
  + c(none = 0, feature = 0.15, display = 0.1)[promotion])
data$logUnits <- ten_digits(eta + rnorm(n, 0, 0.35))
data$units <- rnbinom(n, size = 5, mu = exp(eta))
data$bought <- rbinom(n, 1, plogis(2 * (eta - 2.4)))
rows <- transform(data, lp = log(price), promotion = factor(promotion, levels = c("none", "display", "feature")))

right_side <- ~ s(lp, k = 8, bs = "ps") + s(yearFraction, k = 12, bs = "cp") + s(temperature, k = 8, bs = "ps") + promotion
ends <- list(yearFraction = c(0, 1))
formula_of <- function(response) update(right_side, paste(response, "~ ."))
given <- c(0.4, 0.2, 3)

# mgcv scales each penalty; sp counts in its own.
at_given <- function(response, family) {
  scales <- vapply(gam(formula_of(response), data = rows, knots = ends, fit = FALSE)$smooth, function(term) term$S.scale, 0)
  bam(formula_of(response), data = rows, family = family, knots = ends, sp = given * scales, method = "fREML", discrete = FALSE,
      control = gam.control(epsilon = 1e-8, maxit = 500))
}
by_reml <- function(response, family, control) {
  gam(formula_of(response), data = rows, family = family, knots = ends, method = "REML", control = control)
}

tests_of <- function(fit, known_scale) {
  found <- summary(fit, dispersion = if (known_scale) 1 else NULL)
  list(
    fit = summarise_gam(fit),
    smooth = list(
      referenceDegreesOfFreedom = ten_digits(found$s.table[, 2]), statistic = ten_digits(found$s.table[, 3]), pValue = ten_digits(found$s.table[, 4])
    ),
    factor = list(degreesOfFreedom = ten_digits(found$pTerms.df), statistic = ten_digits(found$pTerms.table[, 2]), pValue = ten_digits(found$pTerms.pv))
  )
}
criteria_of <- function(fit) {
  list(aic = ten_digits(AIC(fit)), logLikelihood = ten_digits(logLik(fit)), degreesOfFreedom = ten_digits(attr(logLik(fit), "df")), edf = ten_digits(sum(fit$edf)))
}
gaussian_fit <- by_reml("logUnits", gaussian(), tight_control())

line <- lm(logUnits ~ temperature + promotion, data = rows)
curve <- lm(logUnits ~ splines::ns(temperature, df = 4) + promotion, data = rows)
nested <- anova(line, curve)

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  data = as.list(data),
  given = given,
  gaussian = c(tests_of(gaussian_fit, FALSE), list(criteria = criteria_of(gaussian_fit))),
  negativeBinomial = c(tests_of(at_given("units", nb()), TRUE), list(criteria = criteria_of(by_reml("units", nb(), gam.control(epsilon = 1e-9))))),
  binomial = c(tests_of(at_given("bought", binomial()), TRUE), list(criteria = criteria_of(by_reml("bought", binomial(), gam.control(epsilon = 1e-9))))),
  nested = list(
    df = 4, statistic = ten_digits(nested$F[2]), degreesOfFreedom = nested$Df[2], residualDegreesOfFreedom = nested$Res.Df[2], pValue = ten_digits(nested[["Pr(>F)"]][2]),
    aicDifference = ten_digits(AIC(curve) - AIC(line))
  )
))
