# Two large models of the orange-juice data, by mgcv's bam(method = "fREML", discrete = FALSE). Too big to be committed.
#
#   Rscript all-rows.R OUTPUT.json
#
# everything: all 106,139 rows, a price curve per product and a level per store (about 6 s). stores: one product in 83 stores
# with a price curve of each store's own, built as in groups.R (about half a minute).

here <- dirname(sub("--file=", "", grep("--file=", commandArgs(), value = TRUE)))
source(file.path(here, "common.R"))
suppressPackageStartupMessages(library(mgcv))

rows <- orange_juice_rows()
for (column in c("store", "brand")) rows[[column]] <- factor(rows[[column]])
knots <- list(woy = c(0.5, 52.5))
summarise_large <- function(fit) list(linearPredictor = ten_digits(fit$linear.predictors), totalEdf = ten_digits(sum(fit$edf)), dispersion = ten_digits(fit$sig2))

everything <- bam(
  logmove ~ brand + s(price, by = brand, k = 8, bs = "ps") + s(woy, bs = "cp", k = 12) + dealFactor + feat + s(store, bs = "re"),
  data = rows, knots = knots, method = "fREML", discrete = FALSE
)

product <- rows[rows$brand == 7, ]
parts <- curve_parts(product$lp, as.character(product$store))
stores <- bam(
  units ~ s(lp, k = 8, bs = "ps") + level + slope + wiggly + s(woy, bs = "cp", k = 12) + dealFactor + feat,
  data = c(as.list(product), parts), paraPen = ridges(parts), knots = knots, family = quasipoisson(), method = "fREML",
  discrete = FALSE, control = gam.control(epsilon = 1e-9, maxit = 500)
)

columns <- c("logmove", "units", "price", "woy", "deal", "feat", "store", "brand")
write_result(list(
  madeWith = made_with(c("mgcv", "bayesm", "jsonlite")), data = as.list(orange_juice_rows()[columns]),
  everything = summarise_large(everything), stores = summarise_large(stores)
))
