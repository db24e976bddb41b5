# Least squares, log-linear and quasi-Poisson regressions without curves, and distributions' quantiles.
#
#   Rscript linear-models.R OUTPUT.json
#
# iceCream: lm on ice-cream.csv. longley: lm on R's datasets::longley in the units of NIST's file. logGaussian: lm of a
# logarithm with predict's intervals. quasiPoisson: glm with offset, prior weights and a factor. quantiles: qnbinom, qpois, qgamma.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))

coefficients_of <- function(fit) {
  table <- summary(fit)$coefficients
  list(estimate = ten_digits(table[, 1]), error = ten_digits(table[, 2]))
}

ice_cream <- read.csv(file.path(here, "ice-cream.csv"), comment.char = "#")
ice_cream_fit <- lm(
  consumption_pints_per_head ~ income_dollars_per_week + price_dollars_per_pint + temperature_f, data = ice_cream
)

nist <- with(datasets::longley, data.frame(
  employed = Employed * 1000, deflator = GNP.deflator, product = GNP * 1000, unemployed = Unemployed * 10,
  forces = Armed.Forces * 10, population = Population * 1000, year = Year
))

set.seed(20240219)
n <- 60
simulated <- data.frame(
  price = round(runif(n, 0.8, 2.4), 2),
  promotion = sample(c("none", "feature", "display"), n, replace = TRUE, prob = c(0.6, 0.25, 0.15)),
  exposure = round(runif(n, 0.4, 1), 2),
  weight = round(runif(n, 0.5, 3), 1)
)
simulated$mean <- with(simulated, exposure * exp(3.2 - 1.8 * log(price) + c(none = 0, feature = 0.4, display = 0.2)[promotion]))
simulated$units <- rnbinom(n, size = simulated$mean / 1.5, mu = simulated$mean)
simulated$kilograms <- with(simulated, round(mean * exp(rnorm(n, 0, 0.3)), 3))
simulated$promotion <- factor(simulated$promotion, levels = c("none", "display", "feature"))

log_fit <- lm(log(kilograms) ~ log(price) + promotion, data = simulated)
new_rows <- data.frame(price = c(0.5, 1.2, 3), promotion = factor(c("feature", "none", "display"), levels = levels(simulated$promotion)))
on_link <- predict(log_fit, new_rows, se.fit = TRUE)

quasi_fit <- glm(
  units ~ log(price) + promotion + offset(log(exposure)), data = simulated, family = quasipoisson(), weights = weight,
  control = glm.control(epsilon = 1e-14, maxit = 100)
)

# Each family's quantiles at a known mean: no uncertainty of coefficients.
cases <- expand.grid(mean = c(0.3, 4, 25, 480), dispersion = c(0.7, 1, 1.3, 4), probability = c(0.025, 0.1, 0.9, 0.975))
cases$count <- with(cases, ifelse(
  dispersion <= 1, qpois(probability, mean), suppressWarnings(qnbinom(probability, size = mean / (dispersion - 1), mu = mean))
))
cases$weight <- with(cases, ten_digits(qgamma(probability, shape = mean / dispersion, scale = dispersion)))

write_result(list(
  madeWith = made_with(c("jsonlite")),
  iceCream = list(data = as.list(ice_cream), fit = coefficients_of(ice_cream_fit), rSquared = ten_digits(summary(ice_cream_fit)$r.squared)),
  longley = list(data = as.list(nist)),
  simulated = as.list(transform(simulated, promotion = as.character(promotion))),
  logGaussian = list(
    fit = coefficients_of(log_fit), dispersion = ten_digits(summary(log_fit)$sigma^2),
    newRows = as.list(transform(new_rows, promotion = as.character(promotion))),
    linearPredictor = ten_digits(on_link$fit), standardError = ten_digits(on_link$se.fit)
  ),
  quasiPoisson = list(
    fit = coefficients_of(quasi_fit), dispersion = ten_digits(summary(quasi_fit)$dispersion),
    deviance = ten_digits(quasi_fit$deviance), nullDeviance = ten_digits(quasi_fit$null.deviance), fitted = ten_digits(fitted(quasi_fit))
  ),
  quantiles = as.list(cases)
))
