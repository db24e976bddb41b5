# Shared by the reference scripts: where results go, and which R and packages made them.

suppressPackageStartupMessages(library(jsonlite))

made_with <- function(packages) {
  versions <- vapply(packages, function(name) as.character(packageVersion(name)), "")
  list(
    r = as.character(getRversion()),
    packages = as.list(setNames(versions, packages)),
    lapack = basename(La_library())
  )
}

output_path <- function() {
  arguments <- commandArgs(trailingOnly = TRUE)
  if (length(arguments) != 1) stop("Say where to: Rscript SCRIPT.R OUTPUT.json")
  arguments[1]
}

# Results to ten digits: a hundred times finer than the tightest tolerance held to them.
ten_digits <- function(values) signif(as.numeric(values), 10)

# Data keep all digits (15); names of single values stay single values.
write_result <- function(result) {
  writeLines(toJSON(result, digits = NA, auto_unbox = TRUE, pretty = FALSE), output_path())
}

# Steps so small that what is left between two programs is their arithmetic.
tight_control <- function() {
  mgcv::gam.control(
    epsilon = 1e-12, maxit = 500,
    newton = list(conv.tol = 1e-9, maxNstep = 5, maxSstep = 2, maxHalf = 30, use.svd = FALSE)
  )
}

# What an additive model of mgcv says at its own rows. edf: per smooth term, then in all, the intercept included.
summarise_gam <- function(fit) {
  on_link <- predict(fit, type = "link", se.fit = TRUE)
  list(
    linearPredictor = ten_digits(on_link$fit), standardError = ten_digits(on_link$se.fit),
    edf = I(ten_digits(vapply(fit$smooth, function(term) sum(fit$edf[term$first.para:term$last.para]), 0))),
    totalEdf = ten_digits(sum(fit$edf)), dispersion = ten_digits(fit$sig2),
    deviance = ten_digits(fit$deviance), nullDeviance = ten_digits(fit$null.deviance)
  )
}

# The orange-juice data of Debian's r-cran-bayesm: 83 stores x 11 products x up to 121 weeks, 106,139 rows.
orange_juice_rows <- function() {
  data("orangeJuice", package = "bayesm", envir = environment())
  rows <- orangeJuice$yx
  # The price columns stand in the order of the brand numbers: row i's own price is price<brand_i>.
  rows$price <- as.matrix(rows[paste0("price", 1:11)])[cbind(seq_len(nrow(rows)), rows$brand)]
  rows$lp <- log(rows$price)
  rows$woy <- ((rows$week - 40 + 23) %% 52) + 1
  rows$units <- round(exp(rows$logmove) / 64)
  rows$dealFactor <- factor(rows$deal)
  rows
}

# One group's splines as level, slope and a wiggly part that no constant and no line over all rows shares, under unit ridges.
curve_parts <- function(x, group, size = 6) {
  margin <- 0.001 * diff(range(x))
  step <- (diff(range(x)) + 2 * margin) / (size - 3)
  knots <- min(x) - margin + step * ((0:(size + 3)) - 3)
  rows <- splines::splineDesign(knots, x)
  shared <- rbind(colSums(rows), colSums(x * rows))
  free <- qr.Q(qr(t(shared)), complete = TRUE)[, -(1:2)]
  root <- chol(crossprod(diff(diag(size), differences = 2) %*% free))
  wiggles <- rows %*% free %*% solve(root)
  member <- outer(group, sort(unique(group)), "==") * 1
  list(
    level = member, slope = member * (x - mean(x)) / sd(x),
    wiggly = do.call(cbind, lapply(seq_len(ncol(wiggles)), function(k) member * wiggles[, k]))
  )
}
ridges <- function(parts) lapply(parts, function(part) list(diag(ncol(part))))
