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
