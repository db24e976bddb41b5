# Fits the references of the orange-juice check on the CSV that orange-juice.R wrote, and prints them as JSON.
#
#   Rscript fits.R FOLDER [STORE]        STORE is a code as in the file, by default 002
#
# For each product, in that store:
# - loglog: lm(log(units) ~ log(price)) over weeks with units > 0, price = shelf_price
# - gaussian: gam(log(units) ~ ...), REML, tight tolerances; fitted values are of log(units)
# - quasiPoisson: bam(units ~ ..., family = quasipoisson()), fREML, discrete = FALSE; fitted values are of units
# Both with s(log(price)), a season on the circle of the year fraction, deal (mechanic price_cut) and feature.
# Written with R 4.2 and mgcv 1.8-41.

suppressPackageStartupMessages(library(mgcv))

arguments <- commandArgs(trailingOnly = TRUE)
if (!length(arguments) %in% 1:2) stop("Say where the files are: Rscript fits.R FOLDER [STORE]")
store <- if (length(arguments) == 2) arguments[2] else "002"

sales <- read.csv(file.path(arguments[1], "sales.csv"), colClasses = c(store = "character", week = "Date"))
sales <- sales[sales$store == store, ]
if (nrow(sales) == 0) stop(sprintf("There are no sales of a store %s.", store))

# Year fraction of the week's middle day: (day of year - 0.5) / days in that year.
middle <- as.POSIXlt(sales$week + 3)
year <- middle$year + 1900
days_in_year <- ifelse((year %% 4 == 0 & year %% 100 != 0) | year %% 400 == 0, 366, 365)
sales$year_fraction <- (middle$yday + 1 - 0.5) / days_in_year
sales$log_price <- log(sales$shelf_price)
sales$deal <- as.integer(sales$mechanic == "price_cut")

smooth_of <- function(response) {
  as.formula(paste(response, "~ s(log_price, k = 8, bs = 'ps') + s(year_fraction, k = 12, bs = 'cp') + deal + feature"))
}
ends <- list(year_fraction = c(0, 1))

summary_of <- function(model, rows) {
  list(
    weeks = format(rows$week),
    fitted = as.numeric(fitted(model)),
    standardErrors = as.numeric(predict(model, type = "link", se.fit = TRUE)$se.fit),
    edf = sum(model$edf),
    termEdf = as.list(summary(model)$edf),
    dispersion = model$sig2,
    penalties = as.numeric(model$sp)
  )
}

fit_product <- function(rows) {
  sold <- rows[rows$units > 0, ]
  line <- lm(log(units) ~ log_price, data = sold)
  tight <- gam.control(epsilon = 1e-10, maxit = 500, newton = list(conv.tol = 1e-10, maxNstep = 5))
  gaussian <- gam(smooth_of("log(units)"), data = sold, method = "REML", knots = ends, control = tight)
  quasi <- bam(
    smooth_of("units"), data = rows, family = quasipoisson(), method = "fREML", discrete = FALSE, knots = ends,
    control = gam.control(epsilon = 1e-10, maxit = 500)
  )
  list(
    rows = nrow(rows),
    loglog = list(elasticity = unname(coef(line)["log_price"]), intercept = unname(coef(line)["(Intercept)"])),
    gaussian = c(summary_of(gaussian, sold), list(spread = sd(log(sold$units)))),
    quasiPoisson = c(summary_of(quasi, rows), list(spread = sd(rows$units)))
  )
}

products <- sort(unique(sales$product))
fits <- lapply(products, function(code) fit_product(sales[sales$product == code, ]))
names(fits) <- products
cat(jsonlite::toJSON(
  list(store = store, mgcv = as.character(packageVersion("mgcv")), lapack = basename(La_library()), products = fits),
  auto_unbox = TRUE, digits = NA
))
