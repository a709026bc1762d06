# The way from areas to recoveries by R alone (lm, t.test, sd), for a handful of the demo's analytes.
# Reads numbers.csv and levels.csv in the folder given, prints "name<TAB>value" lines.
folder <- commandArgs(trailingOnly = TRUE)[1]
numbers <- read.csv(file.path(folder, "numbers.csv"), stringsAsFactors = FALSE)
levels <- read.csv(file.path(folder, "levels.csv"), stringsAsFactors = FALSE)
say <- function(name, value) cat(sprintf("%s\t%.17g\n", name, value))

for (key in unique(paste(numbers$experiment, numbers$analyte, sep = "/"))) {
  own <- numbers[paste(numbers$experiment, numbers$analyte, sep = "/") == key, ]
  line <- levels[levels$experiment == own$experiment[1] & levels$analyte == own$analyte[1], ]
  internal <- own$point[1] != "none"
  x <- if (internal) line$concentration / line$standard_concentration else line$concentration
  y <- if (internal) line$area / line$internal_area else line$area
  response <- if (internal) own$area / own$internal_area else own$area
  if (line$model[1] == "average_response_factor") {
    read <- response / mean(y / x)
  } else {
    stopifnot(line$model[1] == "linear")
    b <- unname(coef(lm(y ~ x, weights = switch(line$weighting[1], "none" = rep(1, length(x)), "1/x" = 1 / x, "1/x2" = 1 / x^2))))
    read <- (response - b[1]) / b[2]
  }
  own$ng <- switch(own$point[1],
    "none" = read * own$dilution * own$volume / own$share,
    "vial" = read * own$added * own$dilution * own$volume / own$share,
    "extract" = read * own$added / own$share)
  own$ng[own$state != "value"] <- 0
  own <- own[own$counts_as == "method", ]
  totals <- aggregate(ng ~ replicate + kind + batch + sample_volume, own, sum)
  spiked <- totals[totals$kind == "spiked", ]
  spiked$net <- spiked$ng
  if (own$subtract[1] == "native") {
    native <- totals[totals$kind == "unspiked", ]
    per_mL <- tapply(native$ng / native$sample_volume, native$batch, mean)
    spiked$net <- spiked$ng - per_mL[spiked$batch] * spiked$sample_volume
  }
  recovery <- 100 * spiked$net / own$spike[1]
  say(paste0(key, "/n"), length(recovery))
  say(paste0(key, "/mean"), mean(recovery))
  say(paste0(key, "/sd"), sd(recovery))
  if (own$subtract[1] == "none") {
    interval <- t.test(recovery)$conf.int
    say(paste0(key, "/lower"), interval[1])
    say(paste0(key, "/upper"), interval[2])
  }
}
