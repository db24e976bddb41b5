# Times the reference package on one series of the orange-juice data, for the engine's bench.
#
#   Rscript engine-reference.R OUTPUT.json STORE PRODUCT
#
# Warm medians of gam(method = "REML"), normal and quasi-Poisson. Debian's reference BLAS and LAPACK, one thread; others are
# refused, for a faster library would be another yardstick.

library(mgcv, quietly = TRUE)
library(jsonlite, quietly = TRUE)

arguments <- commandArgs(trailingOnly = TRUE)
if (length(arguments) != 3) stop("Say where to and which: Rscript engine-reference.R OUTPUT.json STORE PRODUCT")
blas <- extSoftVersion()[["BLAS"]]
if (!grepl("/blas/libblas\\.so\\.3", blas) || !grepl("/lapack/liblapack\\.so\\.3", La_library())) {
  stop(sprintf("The yardstick is Debian's reference BLAS and LAPACK; this R has %s and %s.", blas, La_library()))
}

data("orangeJuice", package = "bayesm", envir = environment())
rows <- orangeJuice$yx
rows$price <- as.matrix(rows[paste0("price", 1:11)])[cbind(seq_len(nrow(rows)), rows$brand)]
rows <- rows[rows$store == as.integer(arguments[2]) & rows$brand == as.integer(arguments[3]), ]
rows$lp <- log(rows$price)
rows$woy <- ((rows$week - 40 + 23) %% 52) + 1
rows$units <- round(exp(rows$logmove) / 64)
rows$dealFactor <- factor(rows$deal)

knots <- list(woy = c(0.5, 52.5))
fit_normal <- function() {
  gam(logmove ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + dealFactor + feat, data = rows, knots = knots, method = "REML")
}
fit_quasi <- function() {
  gam(units ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + dealFactor + feat, data = rows, knots = knots,
      family = quasipoisson(), method = "REML")
}

# Processor time, not the clock's: what else the machine does must not count.
processor_time <- function() sum(proc.time()[c("user.self", "sys.self")])

warm_median <- function(fit) {
  for (turn in 1:5) fit()
  times <- vapply(1:15, function(turn) {
    before <- processor_time()
    for (repeated in 1:10) fit()
    (processor_time() - before) / 10
  }, 0)
  1000 * median(times)
}

writeLines(toJSON(list(
  lapack = La_library(), blas = blas, mgcv = as.character(packageVersion("mgcv")),
  normalMs = warm_median(fit_normal), quasiPoissonMs = warm_median(fit_quasi),
  data = as.list(rows[c("logmove", "units", "price", "woy", "deal", "feat")])
), digits = NA, auto_unbox = TRUE), arguments[1])
