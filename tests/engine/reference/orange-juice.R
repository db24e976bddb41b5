# Writes the orange-juice data of Debian's r-cran-bayesm as our own CSV files: stores.csv, products.csv, sales.csv.
# 83 stores, 11 brands, weeks 40 to 160, 106,139 store-brand-weeks (Montgomery, Marketing Science 16 (1997) 315-337).
#
#   Rscript orange-juice.R FOLDER
#
# - units = round(exp(logmove) / 64), R's rounding (to even)
# - shelf_price = 64 x the product's own price, which the data gives per ounce, to 4 decimals
# - net_sales = units x shelf_price, as written
# - regular_price = the highest shelf price of the last 13 calendar weeks, this one included
# - feature = 1 where feat > 0; mechanic = price_cut where deal = 1
# - week 40 begins Thursday 14 June 1990; the chain's week starts on Thursday
# Costs are not in the data: they are left empty.

arguments <- commandArgs(trailingOnly = TRUE)
if (length(arguments) != 1) stop("Say where to: Rscript orange-juice.R FOLDER")
folder <- arguments[1]
dir.create(folder, recursive = TRUE, showWarnings = FALSE)

data("orangeJuice", package = "bayesm", envir = environment())
rows <- orangeJuice$yx
stopifnot(
  nrow(rows) == 106139,
  length(unique(rows$store)) == 83,
  identical(sort(unique(rows$brand)), 1:11),
  identical(range(rows$week), c(40L, 160L)),
  !anyDuplicated(rows[c("store", "brand", "week")])
)

product_code <- function(brand) sprintf("OJ%02d", brand)
store_code <- function(store) sprintf("%03d", store)
first_day <- function(week) as.Date("1990-06-14") + 7 * (week - 40)
stopifnot(format(first_day(40), "%u") == "4")

# The price columns stand in the order of the brand numbers: row i's own price is price<brand_i>.
prices <- as.matrix(rows[paste0("price", 1:11)])
own_price <- prices[cbind(seq_len(nrow(rows)), rows$brand)]
shelf_price <- round(64 * own_price, 4)
units <- round(exp(rows$logmove) / 64)
stopifnot(shelf_price > 0, units >= 1)

# One line per store and brand, one column per week; weeks that are missing count for nothing.
series <- interaction(rows$store, rows$brand, drop = TRUE)
weeks <- 40:160
by_week <- matrix(-Inf, nlevels(series), length(weeks))
position <- cbind(as.integer(series), rows$week - 39)
by_week[position] <- shelf_price
highest <- by_week
for (lag in 1:12) {
  later <- (lag + 1):length(weeks)
  highest[, later] <- pmax(highest[, later], by_week[, later - lag])
}
regular_price <- highest[position]
stopifnot(is.finite(regular_price), regular_price >= shelf_price)

write_rows <- function(frame, name) {
  write.csv(frame, file.path(folder, name), row.names = FALSE, quote = FALSE, na = "", eol = "\r\n", fileEncoding = "UTF-8")
}

money <- function(amount) sprintf("%.4f", amount)
sales <- data.frame(
  week = format(first_day(rows$week)),
  store = store_code(rows$store),
  product = product_code(rows$brand),
  units = sprintf("%d", as.integer(units)),
  net_sales = money(units * shelf_price),
  regular_price = money(regular_price),
  shelf_price = money(shelf_price),
  feature = as.integer(rows$feat > 0),
  display = 0L,
  mechanic = ifelse(rows$deal == 1, "price_cut", "none")
)
write_rows(sales[order(sales$week, sales$store, sales$product), ], "sales.csv")

stores <- sort(unique(rows$store))
write_rows(data.frame(
  store = store_code(stores), name = paste("Store", stores), region = "all", opened = "1989-09-14", closed = ""
), "stores.csv")

ounces <- c(64, 96, 64, 64, 64, 96, 64, 64, 64, 64, 128)
write_rows(data.frame(
  product = product_code(1:11),
  name = sprintf("Orange juice %d of %d oz", 1:11, ounces),
  gtin = "",
  brand = paste("Brand", 1:11),
  category = "Orange juice",
  sold_by_weight = 0L,
  valid_from = "1989-09-14",
  unit_cost = "",
  regular_price = "",
  tax_rate = "0"
), "products.csv")
