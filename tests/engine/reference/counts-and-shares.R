# Additive models of counts and of shares whose scale is known, by mgcv.
#
#   Rscript counts-and-shares.R OUTPUT.json
#
# negativeBinomial: bam(family = nb()), theta estimated. binomial: bam(family = binomial()), the share with its number of
# trials as weights, and once with single trials. All with method = "fREML", discrete = FALSE; ps and cp splines with second differences.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

fit_by <- function(response, data, family, weights = NULL) {
  formula <- update(~ s(lp, k = 8, bs = "ps") + s(yearFraction, k = 12, bs = "cp") + promotion, paste(response, "~ ."))
  data$lp <- log(data$price)
  data$promotion <- factor(data$promotion, levels = c("none", "display", "feature"))
  data$trialsOfRow <- if (is.null(weights)) 1 else weights
  bam(
    formula, data = data, family = family, weights = trialsOfRow, knots = list(yearFraction = c(0, 1)),
    method = "fREML", discrete = FALSE, control = gam.control(epsilon = 1e-10, maxit = 500)
  )
}

drivers <- function(n) {
  data.frame(
    price = round(runif(n, 1, 2.6), 2),
    yearFraction = round((seq_len(n) %% 52 + 0.5) / 52, 4),
    promotion = sample(c("none", "feature", "display"), n, replace = TRUE, prob = c(0.6, 0.25, 0.15))
  )
}

effect <- function(data) with(data, {
  lp <- log(price)
  -1.6 * lp - 1.5 * sin(4 * lp) * lp + 0.5 * sin(2 * pi * yearFraction) + c(none = 0, feature = 0.5, display = 0.25)[promotion]
})

summarise_shares <- function(fit) c(summarise_gam(fit), list(fitted = ten_digits(fitted(fit))))

count_case <- function(name, seed, level, theta) {
  set.seed(seed)
  data <- drivers(160)
  data$units <- rnbinom(nrow(data), size = theta, mu = exp(level + effect(data)))
  fit <- fit_by("units", data, nb())
  list(name = name, data = as.list(data), fit = c(summarise_shares(fit), list(theta = ten_digits(fit$family$getTheta(TRUE)))))
}

share_case <- function(name, seed, largest) {
  set.seed(seed)
  data <- drivers(160)
  data$trials <- if (largest == 1) 1 else sample(5:largest, nrow(data), replace = TRUE)
  data$share <- ten_digits(rbinom(nrow(data), data$trials, plogis(0.8 + effect(data))) / data$trials)
  fit <- fit_by("share", data, binomial(), weights = data$trials)
  list(name = name, data = as.list(data), fit = summarise_shares(fit))
}

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  negativeBinomial = list(
    count_case("few units", 20240301, 1.6, 2.5), count_case("tens of units", 20240302, 3.6, 6), count_case("hundreds of units", 20240303, 6, 12)
  ),
  binomial = list(share_case("many trials", 20240304, 60), share_case("single trials", 20240305, 1))
))
