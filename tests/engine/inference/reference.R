# What R makes of tests, criteria and influence, on the data that tests/engine/reference holds.
#
#   Rscript reference.R OUTPUT.json
#
# mixtures: tails of chi-squares, F and gammas (stats), and of a weighted sum by mgcv's psum.chisq (Davies). terms: summary.gam
# (Wood 2013) and AIC of gam(method = "REML") for random effects, curves per level, curves times a number and surfaces.
# series: the same for the 11 products of store 2 of the orange-juice data. influence: hatvalues, cooks.distance and
# rstandard of lm and glm. anova: nested lm and glm; anova.lm's F per term when every other term is in the model (drop1).

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "..", "reference", "common.R"))
suppressPackageStartupMessages(library(mgcv))
of <- function(name) fromJSON(file.path(here, "..", "reference", paste0(name, ".json")), simplifyDataFrame = FALSE)
fifteen_digits <- function(values) signif(as.numeric(values), 15)

tests_of <- function(fit) {
  found <- summary(fit)
  list(
    smooth = list(degrees = ten_digits(found$s.table[, 2]), statistic = ten_digits(found$s.table[, 3]), pValue = ten_digits(found$s.table[, 4])),
    parametric = list(statistic = ten_digits(found$pTerms.table[, 2]), pValue = ten_digits(found$pTerms.table[, 3])),
    aic = ten_digits(AIC(fit)), degrees = ten_digits(attr(logLik(fit), "df"))
  )
}
reml <- function(formula, data, ...) gam(formula, data = data, method = "REML", control = tight_control(), ...)

groups <- of("groups")
stores <- transform(as.data.frame(groups$stores$data), store = factor(store))
varying <- of("varying-curves")
by_level <- transform(as.data.frame(varying$byLevel$data), area = factor(area))
by_number <- as.data.frame(varying$byNumber$data)
surface <- as.data.frame(varying$surfaces[[1]]$data)

series_of <- function(series) {
  rows <- transform(as.data.frame(series), lp = log(price), deal = factor(deal))
  tests_of(reml(logmove ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + deal + feat, rows, knots = list(woy = c(0.5, 52.5))))
}

tests <- of("tests-of-terms")
rows <- transform(as.data.frame(tests$data)[1:40, ], promotion = factor(promotion, levels = c("none", "display", "feature")))
rows$weight <- round(1 + (seq_len(40) %% 5) / 2, 2)
rows$share <- rows$bought * 0.6 + (seq_len(40) %% 4) / 10
rows$trials <- 10
influence_of <- function(fit, ...) {
  list(leverage = ten_digits(hatvalues(fit)), cooksDistance = ten_digits(cooks.distance(fit)), standardised = ten_digits(rstandard(fit, ...)))
}
line <- lm(logUnits ~ log(price) + promotion, rows, weights = weight)
counts <- glm(units ~ log(price) + promotion, quasipoisson(), rows)
shares <- suppressWarnings(glm(share ~ price, binomial(), rows, weights = trials))

all_rows <- transform(as.data.frame(tests$data), promotion = factor(promotion, levels = c("none", "display", "feature")))
small_line <- lm(logUnits ~ price, all_rows)
large_line <- lm(logUnits ~ price + promotion, all_rows)
line_anova <- anova(small_line, large_line)
small_shares <- glm(bought ~ price, binomial(), all_rows)
large_shares <- glm(bought ~ price + promotion, binomial(), all_rows)
shares_anova <- anova(small_shares, large_shares, test = "Chisq")
dropped <- drop1(large_line, test = "F")

write_result(list(
  madeWith = made_with(c("mgcv", "jsonlite")),
  mixtures = list(
    chiSquare = list(x = c(0.001, 3.84, 50, 300, 5, 80, 900, 1100, 0.5), degrees = c(1, 1, 1, 1, 10, 10, 1000, 1000, 0.3),
      tail = fifteen_digits(pchisq(c(0.001, 3.84, 50, 300, 5, 80, 900, 1100, 0.5), c(1, 1, 1, 1, 10, 10, 1000, 1000, 0.3), lower.tail = FALSE))),
    f = list(x = c(4, 0.01, 100, 3, 2, 1e4, 20, 3), numerator = c(1, 1, 1, 5, 3.7, 2, 10, 0.2), denominator = c(20, 20, 20, 95.3, 9000, 3, 1e5, 1),
      tail = fifteen_digits(pf(c(4, 0.01, 100, 3, 2, 1e4, 20, 3), c(1, 1, 1, 5, 3.7, 2, 10, 0.2), c(20, 20, 20, 95.3, 9000, 3, 1e5, 1), lower.tail = FALSE))),
    gamma = list(x = c(0.2, 3, 30), shape = 1.75, scale = 1.4, tail = fifteen_digits(pgamma(c(0.2, 3, 30), 1.75, scale = 1.4, lower.tail = FALSE))),
    weighted = list(x = c(20, 1, -5), tail = fifteen_digits(c(
      psum.chisq(20, c(6, 3, 1), tol = 1e-9, nlim = 1e7), psum.chisq(1, c(6, 3, 1), tol = 1e-9, nlim = 1e7),
      psum.chisq(-5, c(6, 3, -1, -2), df = c(1, 2, 1, 6), tol = 1e-9, nlim = 1e7))))
  ),
  terms = list(
    levels = tests_of(reml(y ~ s(x, k = 8, bs = "ps") + depth + s(store, bs = "re"), stores)),
    slopes = tests_of(reml(y ~ s(x, k = 8, bs = "ps") + depth + s(store, bs = "re") + s(store, by = depth, bs = "re"), stores)),
    byLevel = tests_of(reml(y ~ area + s(x, by = area, bs = "ps", k = 8), by_level)),
    byNumber = tests_of(reml(y ~ s(x, by = amount, bs = "ps", k = 9) + other, by_number)),
    surface = tests_of(reml(y ~ s(x, bs = "ps", k = 8) + s(z, bs = "ps", k = 8) + ti(x, z, bs = "ps", k = c(5, 5)), surface))
  ),
  series = lapply(of("additive-models")$series, function(series) series_of(series$data)),
  influence = list(
    rows = lapply(rows[c("price", "promotion", "logUnits", "units", "weight", "share", "trials")], function(column) if (is.factor(column)) as.character(column) else column),
    line = influence_of(line), counts = influence_of(counts, type = "pearson"), shares = influence_of(shares, type = "pearson")
  ),
  anova = list(
    line = list(statistic = ten_digits(line_anova$F[2]), pValue = ten_digits(line_anova[["Pr(>F)"]][2])),
    shares = list(statistic = ten_digits(shares_anova$Deviance[2]), pValue = ten_digits(shares_anova[["Pr(>Chi)"]][2])),
    perTerm = list(statistic = ten_digits(dropped[["F value"]][-1]), pValue = ten_digits(dropped[["Pr(>F)"]][-1])),
    aic = ten_digits(c(AIC(small_line), AIC(large_line), AIC(small_shares), AIC(large_shares)))
  )
))
