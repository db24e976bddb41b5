# Terms on groups and over time, by mgcv: gam(method = "REML") with tight tolerances, and one bam(method = "fREML").
#
#   Rscript groups.R OUTPUT.json
#
# levels, slopes: s(store, bs = "re"), and with a slope per store. walk: indicators of the weeks under first differences
# (paraPen), weeks 31 to 34 without rows. curves, curvesOfCounts: a deviation curve per store, its level, slope and wiggly
# part each under a ridge of its own (paraPen), as mgcv's own "fs" splits level and slope by an arbitrary rotation.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

fit_gam <- function(formula, data, ...) gam(formula, data = data, method = "REML", control = tight_control(), ...)

# Coefficients that carry a matrix's name, and their share of the degrees of freedom.
edf_of <- function(fit, name) ten_digits(sum(fit$edf[grepl(paste0("^", name, "[0-9]*$"), names(coef(fit)))]))

set.seed(20240331)
stores <- sprintf("S%02d", 1:12)
n <- 220
chain <- data.frame(x = round(runif(n, 0, 4), 3), store = sample(stores, n, replace = TRUE, prob = 1:12), depth = round(rexp(n, 2), 3))
store_level <- setNames(rnorm(12, 0, 0.5), stores)
store_slope <- setNames(rnorm(12, 0, 0.4), stores)
chain$y <- with(chain, ten_digits(sin(x) + 0.8 * depth + store_level[store] + store_slope[store] * depth + rnorm(n, 0, 0.3)))
chain_factor <- transform(chain, store = factor(store))
levels_fit <- fit_gam(y ~ s(x, k = 8, bs = "ps") + depth + s(store, bs = "re"), chain_factor)
slopes_fit <- fit_gam(y ~ s(x, k = 8, bs = "ps") + depth + s(store, bs = "re") + s(store, by = depth, bs = "re"), chain_factor)
levels_summary <- c(summarise_gam(levels_fit), list(storeLevels = ten_digits(coef(levels_fit)[grepl("s\\(store\\)", names(coef(levels_fit)))])))

set.seed(20240332)
weeks <- setdiff(11:70, 31:34)
walk <- data.frame(week = sort(rep(weeks, length.out = 150)), x = round(runif(150, 1, 3), 3))
level_of_week <- cumsum(rnorm(70, 0, 0.15))
walk$y <- with(walk, ten_digits(cos(2 * x) + level_of_week[week] + rnorm(150, 0, 0.25)))
# The constant belongs to the intercept: the first week's level is where differences start.
indicators <- outer(walk$week, 12:70, "==") * 1
differences <- diff(diag(60))[, -1]
walk_fit <- gam(
  y ~ s(x, k = 8, bs = "ps") + indicators, data = c(as.list(walk), list(indicators = indicators)),
  paraPen = list(indicators = list(crossprod(differences))), method = "REML", control = tight_control()
)

curves_case <- function(seed, counts) {
  set.seed(seed)
  rows_each <- 24
  data <- data.frame(x = round(runif(8 * rows_each, 0, 3), 3), store = rep(sprintf("S%d", 1:8), each = rows_each))
  level <- rnorm(8, 0, 0.4); slope <- rnorm(8, 0, 0.3); turn <- rnorm(8, 0, 0.35)
  g <- as.integer(factor(data$store))
  eta <- with(data, 1.2 * sin(2.5 * x) + level[g] + slope[g] * (x - 1.5) + turn[g] * cos(2 * x))
  data$y <- if (counts) { mean <- exp(3 + eta); rnbinom(length(mean), size = mean / 1.2, mu = mean) } else ten_digits(eta + rnorm(length(eta), 0, 0.25))
  parts <- curve_parts(data$x, data$store)
  arguments <- list(
    y ~ s(x, k = 8, bs = "ps") + level + slope + wiggly, data = c(as.list(data), parts), paraPen = ridges(parts)
  )
  fit <- if (counts) {
    do.call(bam, c(arguments, list(family = quasipoisson(), method = "fREML", discrete = FALSE, control = gam.control(epsilon = 1e-10, maxit = 500))))
  } else {
    do.call(gam, c(arguments, list(method = "REML", control = tight_control())))
  }
  partsEdf <- list(level = edf_of(fit, "level"), slope = edf_of(fit, "slope"), wiggly = edf_of(fit, "wiggly"))
  list(size = 6, data = as.list(data), fit = summarise_gam(fit), partsEdf = partsEdf)
}

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  stores = list(data = as.list(chain), levels = levels_summary, slopes = summarise_gam(slopes_fit)),
  walk = list(data = as.list(walk), fit = summarise_gam(walk_fit), walkEdf = edf_of(walk_fit, "indicators")),
  curves = curves_case(20240333, counts = FALSE),
  curvesOfCounts = curves_case(20240334, counts = TRUE)
))
