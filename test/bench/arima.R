# Fits each line of standard input with R's own arima: p d q P D Q m, then the figures ("NA" where missing).
# Prints for each: seconds (the least of two), log-likelihood, coefficients; "NA" after the seconds where arima fails.
lines <- readLines(file("stdin"))
for (line in lines) {
  parts <- strsplit(line, " ")[[1]]
  orders <- as.integer(parts[1:7])
  x <- suppressWarnings(as.numeric(parts[-(1:7)]))
  seasonal <- list(order = orders[4:6], period = orders[7])
  fit <- function(method) tryCatch(
    suppressWarnings(arima(x, order = orders[1:3], seasonal = seasonal, method = method)),
    error = function(e) NULL
  )
  seconds <- Inf
  for (pass in 1:2) {
    started <- Sys.time()
    found <- fit("CSS-ML")
    if (is.null(found)) found <- fit("ML")
    seconds <- min(seconds, as.numeric(Sys.time() - started, units = "secs"))
  }
  if (is.null(found)) cat(seconds, "NA\n")
  else cat(format(c(seconds, found$loglik, found$coef), digits = 15, scientific = TRUE, trim = TRUE), "\n")
}
