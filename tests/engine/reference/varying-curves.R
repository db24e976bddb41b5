# Curves that vary with another column, by mgcv: gam(method = "REML") with tight tolerances, ps splines.
#
#   Rscript varying-curves.R OUTPUT.json
#
# byLevel: a curve per level of a factor, the factor itself present. byNumber: a curve times a number, beside the
# straight line in that number's other part. surface: main effects and ti(), their interaction without them.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

fit_gam <- function(formula, data) gam(formula, data = data, method = "REML", control = tight_control())

set.seed(20240311)
n <- 180
by_level <- data.frame(
  x = round(runif(n, 0.5, 3), 3),
  area = sample(c("coast", "hills", "plain"), n, replace = TRUE)
)
by_level$y <- with(by_level, ten_digits(
  c(coast = 2, hills = 1, plain = 1.4)[area] + ifelse(area == "coast", sin(2.5 * x), ifelse(area == "hills", -0.8 * x, exp(-x))) + rnorm(n, 0, 0.2)
))
with_factor <- transform(by_level, area = factor(area))
by_level_fit <- fit_gam(y ~ area + s(x, by = area, bs = "ps", k = 8), with_factor)
new_rows <- data.frame(x = c(0.4, 1.1, 2.2, 3.3), area = c("plain", "coast", "hills", "coast"))
there <- predict(by_level_fit, transform(new_rows, area = factor(area, levels = levels(with_factor$area))), se.fit = TRUE)

set.seed(20240312)
by_number <- data.frame(x = round(runif(n, -1, 4), 3), amount = round(rnorm(n, 1, 1), 3), other = round(runif(n), 3))
by_number$y <- with(by_number, ten_digits(1 + amount * (0.5 + cos(x)) + 2 * other + rnorm(n, 0, 0.3)))
by_number_fit <- fit_gam(y ~ s(x, by = amount, bs = "ps", k = 9) + other, by_number)

surface_case <- function(seed, sizes, size, strength) {
  set.seed(seed)
  data <- data.frame(x = round(runif(n, 1, 5), 3), z = round(runif(n, -2, 2), 3))
  data$y <- with(data, ten_digits(log(x) + 0.4 * z^2 + strength * sin(x) * z + rnorm(n, 0, 0.2)))
  # ps margins lie on the data's range widened by 0.1 % at each end, as ours do.
  fit <- fit_gam(
    as.formula(sprintf("y ~ s(x, bs = 'ps', k = %d) + s(z, bs = 'ps', k = %d) + ti(x, z, bs = 'ps', k = c(%d, %d))", size, size, sizes[1], sizes[2])), data
  )
  terms <- predict(fit, type = "terms")
  list(sizes = sizes, size = size, data = as.list(data), fit = c(summarise_gam(fit), list(interaction = ten_digits(terms[, 3]))))
}

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  byLevel = list(
    size = 8, data = as.list(by_level), fit = summarise_gam(by_level_fit),
    newRows = as.list(new_rows), linearPredictor = ten_digits(there$fit), standardError = ten_digits(there$se.fit)
  ),
  byNumber = list(size = 9, data = as.list(by_number), fit = summarise_gam(by_number_fit)),
  surfaces = list(surface_case(20240313, c(5, 5), 8, 0.5), surface_case(20240314, c(6, 4), 7, 0.15))
))
