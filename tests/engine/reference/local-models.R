# Smoothing splines at given degrees of freedom and models with local terms, by R's package gam (backfitting).
#
#   Rscript local-models.R OUTPUT.json
#
# splines: gam(y ~ s(x, df)), df without the constant, and two orthogonal columns. local: gam with lo(): one local line, and
# one beside a factor and a straight line (version 1.22.1 fails at one-column lo() of degree 2). orthogonal: two local lines.
# backfitted: two local lines of columns that are not, by turns of loess(surface = "direct") until they rest; lo() itself
# interpolates and takes each column's straight line out of its local fit, which is another fixed point. Terms are centred.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(gam))

tight <- gam.control(epsilon = 1e-11, bf.epsilon = 1e-11, maxit = 200, bf.maxit = 500)
terms_of <- function(fit) {
  terms <- predict(fit, type = "terms")
  lapply(seq_len(ncol(terms)), function(column) ten_digits(terms[, column] - mean(terms[, column])))
}

set.seed(20240341)
# Every pair of values once, so that the two columns are orthogonal.
grid <- expand.grid(x = round(seq(0, 4, length.out = 14), 3), z = round(seq(-1, 1, length.out = 10), 3))
grid$y <- with(grid, ten_digits(sin(1.3 * x) + 0.8 * z^2 + rnorm(nrow(grid), 0, 0.15)))
one_term <- function(df) list(df = df, terms = terms_of(gam(as.formula(sprintf("y ~ s(x, %d)", df)), data = grid, control = tight)))

set.seed(20240342)
n <- 140
rows <- data.frame(
  x = round(runif(n, 0, 5), 2), z = round(rbeta(n, 2, 2), 3),
  promotion = sample(c("feature", "none"), n, replace = TRUE), line = round(rnorm(n), 3)
)
rows$y <- with(rows, ten_digits(cos(x) + 2 * z * (1 - z) + 0.4 * (promotion == "feature") + 0.2 * line + rnorm(n, 0, 0.2)))
with_factor <- transform(rows, promotion = factor(promotion, levels = c("none", "feature")))

# Two local lines, each fitted to what the other leaves (Buja, Hastie & Tibshirani 1989).
backfit <- function(data, span_x, span_z) {
  smooth_on <- function(column, response, span) {
    fit <- loess(response ~ column, degree = 1, span = span, control = loess.control(surface = "direct"))
    fitted(fit) - mean(fitted(fit))
  }
  x_term <- z_term <- numeric(nrow(data))
  repeat {
    before <- c(x_term, z_term)
    x_term <- smooth_on(data$x, data$y - mean(data$y) - z_term, span_x)
    z_term <- smooth_on(data$z, data$y - mean(data$y) - x_term, span_z)
    if (max(abs(c(x_term, z_term) - before)) < 1e-13) break
  }
  list(ten_digits(x_term), ten_digits(z_term))
}

local_case <- function(name, formula) {
  fit <- gam(formula, data = with_factor, control = tight)
  list(name = name, fitted = ten_digits(fitted(fit)), terms = terms_of(fit))
}

write_result(list(
  madeWith = made_with(c("gam", "jsonlite")),
  splines = list(
    data = as.list(grid), oneTerm = lapply(c(2, 3, 4, 6), one_term),
    twoTerms = list(df = c(4, 2), terms = terms_of(gam(y ~ s(x, 4) + s(z, 2), data = grid, control = tight)))
  ),
  local = list(
    data = as.list(rows),
    cases = list(
      local_case("one local line", y ~ lo(x, span = 0.5, degree = 1)),
      local_case("a local line beside a factor and a straight line", y ~ lo(x, span = 0.4, degree = 1) + promotion + line)
    ),
    orthogonal = terms_of(gam(y ~ lo(x, span = 0.5, degree = 1) + lo(z, span = 0.6, degree = 1), data = grid, control = tight)),
    backfitted = backfit(rows, 0.5, 0.6)
  )
))
