# Times the reference package on the works of the engine's bench, and hands over the rows and what it makes of them.
#
#   Rscript reference.R FOLDER WORK ...        WORK: normal, quasiPoisson, stores, everything, everySeries
#
# Writes FOLDER/rows.bin (doubles, column after column) and FOLDER/reference.json: warm medians of processor time, linear
# predictors and degrees of freedom. Debian's reference BLAS and LAPACK, one thread; others are refused, for a faster library
# would be another yardstick. The series is store 2's product 7, the product of "stores" is 7.

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "../../engine/reference/common.R"))
suppressPackageStartupMessages(library(mgcv))

arguments <- commandArgs(trailingOnly = TRUE)
if (length(arguments) < 2) stop("Say where to and what: Rscript reference.R FOLDER WORK ...")
folder <- arguments[1]
works <- arguments[-1]
blas <- extSoftVersion()[["BLAS"]]
if (!grepl("/blas/libblas\\.so\\.3", blas) || !grepl("/lapack/liblapack\\.so\\.3", La_library())) {
  stop(sprintf("The yardstick is Debian's reference BLAS and LAPACK; this R has %s and %s.", blas, La_library()))
}

rows <- orange_juice_rows()
columns <- c("logmove", "units", "price", "woy", "deal", "feat", "store", "brand")
file_of_rows <- file(file.path(folder, "rows.bin"), "wb")
for (column in columns) writeBin(as.double(rows[[column]]), file_of_rows, endian = "little")
close(file_of_rows)

for (column in c("deal", "store", "brand")) rows[[column]] <- factor(rows[[column]])
product <- rows[rows$brand == 7, ]
one_series <- product[product$store == 2, ]
all_series <- split(rows, list(rows$store, rows$brand), drop = TRUE)
knots <- list(woy = c(0.5, 52.5))

fit_quasi <- function(series) {
  gam(units ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + deal + feat, data = series, knots = knots,
      family = quasipoisson(), method = "REML")
}
fits <- list(
  normal = function() {
    gam(logmove ~ s(lp, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + deal + feat, data = one_series, knots = knots, method = "REML")
  },
  quasiPoisson = function() fit_quasi(one_series),
  stores = function() {
    bam(units ~ s(lp, k = 8, bs = "ps") + s(lp, store, bs = "fs", k = 6, xt = "ps") + s(woy, bs = "cp", k = 12) + deal + feat,
        data = product, knots = knots, family = quasipoisson(), method = "fREML", discrete = TRUE)
  },
  everything = function() {
    bam(logmove ~ brand + s(price, by = brand, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + deal + feat + s(store, bs = "re"),
        data = rows, knots = knots, method = "fREML", discrete = TRUE)
  },
  everySeries = function() lapply(all_series, fit_quasi)
)
# How often: to warm up, and then medians of so many turns of so many fits.
often <- list(
  normal = c(warm = 5, turns = 15, repeated = 10), quasiPoisson = c(warm = 5, turns = 15, repeated = 10),
  stores = c(warm = 1, turns = 3, repeated = 1), everything = c(warm = 2, turns = 9, repeated = 1),
  everySeries = c(warm = 0, turns = 1, repeated = 1)
)

# Processor time, not the clock's: what else the machine does must not count.
processor_time <- function() sum(proc.time()[c("user.self", "sys.self")])

time_work <- function(name) {
  fit <- fits[[name]]
  counts <- often[[name]]
  for (turn in seq_len(counts["warm"])) fit()
  times <- vapply(seq_len(counts["turns"]), function(turn) {
    before <- processor_time()
    for (repeated in seq_len(counts["repeated"])) made <<- fit()
    (processor_time() - before) / counts["repeated"]
  }, 0)
  models <- if (name == "everySeries") made else list(made)
  list(
    ms = 1000 * median(times),
    linearPredictors = lapply(unname(models), function(model) ten_digits(model$linear.predictors)),
    edf = I(unname(vapply(models, function(model) sum(model$edf), 0)))
  )
}

writeLines(toJSON(list(
  madeWith = made_with(c("mgcv", "bayesm")), blas = blas, columns = columns, rowCount = nrow(rows),
  # The package warns of the two smooths of price, which are meant.
  works = suppressWarnings(sapply(works, time_work, simplify = FALSE))
), digits = NA, auto_unbox = TRUE), file.path(folder, "reference.json"))
