# Detection limit, quantitation limit and precision over batches by R alone (lm, qt, sd, aov), from areas and levels.
# Reads numbers.csv and levels.csv in the folder given, prints "name<TAB>value" lines.
folder <- commandArgs(trailingOnly = TRUE)[1]
numbers <- read.csv(file.path(folder, "numbers.csv"), stringsAsFactors = FALSE)
levels <- read.csv(file.path(folder, "levels.csv"), stringsAsFactors = FALSE)
say <- function(name, value) cat(sprintf("%s\t%.17g\n", name, value))

for (analyte in unique(numbers$analyte)) {
  own <- numbers[numbers$analyte == analyte, ]
  line <- levels[levels$analyte == analyte, ]
  x <- line$concentration / line$standard_concentration
  y <- line$area / line$internal_area
  b <- unname(coef(lm(y ~ x, weights = 1 / x)))
  own$ng <- ((own$area / own$internal_area) - b[1]) / b[2] * own$added / own$share
  own$ng_per_l <- 1000 * own$ng / own$sample_volume
  found <- own$state == "value"
  spiked <- own$ng_per_l[own$kind == "spiked"]
  blanks <- own$ng_per_l[own$kind == "method blank"]
  numeric <- blanks[found[own$kind == "method blank"]]
  n <- length(spiked)
  mdls <- qt(0.99, n - 1) * sd(spiked)
  say(paste0(analyte, "/mdls"), mdls)
  mdlb <- if (length(numeric) == 0) NA else if (length(numeric) < length(blanks)) max(numeric) else
    max(0, mean(numeric)) + qt(0.99, length(numeric) - 1) * sd(numeric)
  if (!is.na(mdlb)) say(paste0(analyte, "/mdlb"), mdlb)
  say(paste0(analyte, "/mdl"), max(mdls, mdlb, na.rm = TRUE))
  percent <- 100 * own$ng[own$kind == "spiked"] / own$spike[own$kind == "spiked"]
  half <- qt(0.995, n - 1) * sd(percent) * sqrt(1 + 1 / n)
  say(paste0(analyte, "/lower"), mean(percent) - half)
  say(paste0(analyte, "/upper"), mean(percent) + half)

  # Each spiked portion loses the mean method blank of its own experiment; not detected counts as zero.
  own$counted <- ifelse(found, own$ng, 0)
  blank <- tapply(own$counted[own$kind == "method blank"], own$experiment[own$kind == "method blank"], mean)
  of <- own[own$kind == "spiked", ]
  of$net <- 100 * (of$counted - blank[as.character(of$experiment)]) / of$spike
  table <- summary(aov(net ~ factor(experiment), of))[[1]]
  between <- table[["Mean Sq"]][1]
  within <- table[["Mean Sq"]][2]
  size <- length(of$net) / length(unique(of$experiment))
  say(paste0(analyte, "/f"), between / within)
  say(paste0(analyte, "/repeatability"), 100 * sqrt(within) / mean(of$net))
  say(paste0(analyte, "/intermediate"), 100 * sqrt(within + max(0, (between - within) / size)) / mean(of$net))
}
