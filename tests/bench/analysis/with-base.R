# The same analysis in base R. Arguments: file of doubles, then name=value pairs; style=apply is how most people write it,
# style=columns is vectorised by hand. Prints JSON.
given <- commandArgs(trailingOnly = TRUE)
pairs <- strsplit(given[-1], "=")
options <- setNames(lapply(pairs, `[`, 2), sapply(pairs, `[`, 1))
factor_of <- function(name) as.numeric(options[[name]])
weights <- readBin(given[1], "double", n = 1e7)
n <- factor_of("n")

run_length <- function(on) {
  place <- seq_along(on)
  place - cummax(ifelse(on, 0L, place))
}

in_last <- function(on, window) {
  total <- c(0, cumsum(on))
  place <- seq_along(on)
  total[place + 1] - total[pmax(0, place - window) + 1]
}

signals <- function(x, center, sigma, lower, upper, with_zones) {
  step <- diff(x)
  turns <- step[-1] * step[-length(step)] < 0
  count <- sum(x > upper | x < lower)
  count <- count + sum(run_length(x > center) >= 9) + sum(run_length(x < center) >= 9)
  count <- count + sum(run_length(step > 0) >= 5) + sum(run_length(step < 0) >= 5)
  count <- count + sum(run_length(turns) >= 12)
  if (!with_zones) return(count)
  for (zone in list(c(2, 2), c(1, 4))) {
    for (beyond in list(x > center + zone[1] * sigma, x < center - zone[1] * sigma)) {
      count <- count + sum(beyond & in_last(beyond, zone[2] + 1) >= zone[2])
    }
  }
  above <- x > center + sigma
  outside <- above | x < center - sigma
  high <- in_last(above, 8)
  count + sum(run_length(!outside) >= 15) + sum(run_length(outside) >= 8 & high > 0 & high < 8)
}

by_apply <- function(columns) {
  list(
    mean = apply(columns, 2, mean),
    sd = apply(columns, 2, sd),
    low = apply(columns, 2, min),
    high = apply(columns, 2, max)
  )
}

by_columns <- function(columns) {
  mean <- colMeans(columns)
  rows <- lapply(seq_len(nrow(columns)), function(row) columns[row, ])
  sd <- sqrt(colSums((columns - rep(mean, each = nrow(columns)))^2) / (nrow(columns) - 1))
  list(mean = mean, sd = sd, low = do.call(pmin, rows), high = do.call(pmax, rows))
}

analyse <- function() {
  figures <- (if (options$style == "apply") by_apply else by_columns)(matrix(weights, nrow = n))
  mean <- figures$mean
  center <- mean(mean)
  count <- 0
  for (panel in list(
    list(points = figures$high - figures$low, per_sigma = factor_of("d2"), width = factor_of("d3")),
    list(points = figures$sd, per_sigma = factor_of("c4"), width = sqrt(1 - factor_of("c4")^2))
  )) {
    sigma <- mean(panel$points) / panel$per_sigma
    se <- sigma / sqrt(n)
    count <- count + signals(mean, center, se, center - 3 * se, center + 3 * se, TRUE)
    middle <- panel$per_sigma * sigma
    width <- panel$width * sigma
    count <- count + signals(panel$points, middle, width, max(0, middle - 3 * width), middle + 3 * width, FALSE)
  }
  nearest <- min(center - factor_of("lower"), factor_of("upper") - center)
  list(mean = center, signals = count, cpk = nearest / (3 * sqrt(mean(figures$sd^2))), ppk = nearest / (3 * sd(weights)))
}

milliseconds <- Inf
for (round in seq_len(factor_of("rounds"))) {
  taken <- system.time(found <- analyse(), gcFirst = FALSE)[["elapsed"]]
  milliseconds <- min(milliseconds, 1000 * taken)
}
cat(sprintf(
  '{"milliseconds": %.3f, "figures": {"mean": %.12f, "signals": %d, "cpk": %.12f, "ppk": %.12f}}',
  milliseconds, found$mean, as.integer(found$signals), found$cpk, found$ppk
))
