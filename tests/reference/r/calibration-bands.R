# Bands of calibration curves and tests of their coefficients from base R (written with R 4.2.2), as flat JSON: name -> number.
# Usage: Rscript tests/reference/r/calibration-bands.R > tests/reference/r/calibration-bands.json && npx prettier --write tests/reference/r
# Levels and responses are invented: a curve that bends slightly, two injections at two levels.

out <- list()
put <- function(name, value) for (i in seq_along(value)) out[[paste0(name, ".", i)]] <<- unname(value)[i]

x <- c(0.5, 1, 2, 5, 5, 20, 50, 100, 100, 200)
y <- c(0.0118, 0.0209, 0.0432, 0.1031, 0.1066, 0.4123, 1.0171, 1.978, 2.021, 3.861)
at <- c(0.5, 3, 40, 150, 200)
models <- list("linear" = y ~ x, "quadratic" = y ~ x + I(x^2))
weighed <- function(x, w) switch(w, "none" = rep(1, length(x)), "1/x" = 1 / x, "1/x2" = 1 / x^2)
bands <- function(name, fit, w) for (level in c(0.95, 0.99)) {
  curve <- predict(fit, data.frame(x = at), interval = "confidence", level = level)
  one <- suppressWarnings(predict(fit, data.frame(x = at), interval = "prediction", level = level, weights = weighed(at, w)))
  put(paste(name, "height"), curve[, "fit"])
  put(paste(name, "confidence lower", level), curve[, "lwr"])
  put(paste(name, "confidence upper", level), curve[, "upr"])
  put(paste(name, "prediction lower", level), one[, "lwr"])
  put(paste(name, "prediction upper", level), one[, "upr"])
}
for (m in names(models)) for (w in c("none", "1/x", "1/x2")) {
  weights <- weighed(x, w)
  fit <- lm(models[[m]], weights = weights)
  bands(paste(m, w), fit, w)
  table <- summary(fit)$coefficients
  put(paste(m, w, "p of coefficients"), table[, 4])
}
bands("average response factor", lm(y ~ 0 + x, weights = 1 / x^2), "1/x2")

cat("{\n", paste(sprintf('  "%s": %.17g', names(out), unlist(out)), collapse = ",\n"), "\n}\n", sep = "")
