# Regression splines by R's splines::ns and lm, and single local regressions by stats::loess.
#
#   Rscript natural-and-local.R OUTPUT.json
#
# natural: lm(y ~ ns(x, df)), alone and beside a factor, predicted outside the range too. local: loess(surface =
# "direct", statistics = "exact"), degrees 0 to 2, spans 0.3, 0.5 and 0.75; x has ties; predicted between rows too.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(splines))

set.seed(20240321)
n <- 90
natural_data <- data.frame(x = round(rgamma(n, 3, 1), 2), promotion = sample(c("feature", "none"), n, replace = TRUE))
natural_data$y <- with(natural_data, ten_digits(sin(x) + 0.3 * (promotion == "feature") + rnorm(n, 0, 0.2)))
natural_data$promotionFactor <- factor(natural_data$promotion, levels = c("none", "feature"))
at <- c(-1, 0.2, 1, 2.5, 4, 7, 12)

natural_case <- function(df, with_factor) {
  formula <- if (with_factor) y ~ ns(x, df = df) + promotionFactor else y ~ ns(x, df = df)
  environment(formula) <- environment()
  fit <- lm(formula, data = natural_data)
  own <- predict(fit, se.fit = TRUE)
  new_rows <- data.frame(x = at, promotionFactor = factor("feature", levels = levels(natural_data$promotionFactor)))
  there <- predict(fit, new_rows, se.fit = TRUE)
  list(
    df = df, withFactor = with_factor, dispersion = ten_digits(own$residual.scale^2),
    linearPredictor = ten_digits(own$fit), standardError = ten_digits(own$se.fit),
    there = list(linearPredictor = ten_digits(there$fit), standardError = ten_digits(there$se.fit))
  )
}

set.seed(20240322)
m <- 70
# Rounded to tenths, so that many rows share their value and windows end in ties.
local_data <- data.frame(x = round(runif(m, 0, 6), 1))
local_data$y <- with(local_data, ten_digits(1 + cos(x) + 0.2 * x + rnorm(m, 0, 0.25)))
between <- c(0.33, 1.27, 2.05, 3.33, 4.71, 5.55)

local_case <- function(degree, span) {
  fit <- loess(y ~ x, data = local_data, degree = degree, span = span,
               control = loess.control(surface = "direct", statistics = "exact"))
  own <- predict(fit, local_data, se = TRUE)
  there <- predict(fit, data.frame(x = between), se = TRUE)
  list(
    degree = degree, span = span,
    trace = ten_digits(fit$trace.hat), residualDegreesOfFreedom = ten_digits(fit$one.delta), residualScale = ten_digits(fit$s),
    fitted = ten_digits(own$fit), standardError = ten_digits(own$se.fit),
    there = list(fitted = ten_digits(there$fit), standardError = ten_digits(there$se.fit))
  )
}
local_cases <- expand.grid(degree = 0:2, span = c(0.3, 0.5, 0.75))

write_result(list(
  madeWith = made_with("jsonlite"),
  natural = list(
    data = as.list(natural_data[c("x", "promotion", "y")]), at = at,
    fits = list(natural_case(1, FALSE), natural_case(2, FALSE), natural_case(4, FALSE), natural_case(6, FALSE), natural_case(4, TRUE))
  ),
  local = list(data = as.list(local_data), between = between, fits = Map(local_case, local_cases$degree, local_cases$span))
))
