# Reference values from base R (written with R 4.2.2), as flat JSON: name -> number.
# Usage: Rscript tests/reference/r/reference.R > tests/reference/r/reference.json && npx prettier --write tests/reference/r
# Every figure is computed here by R's own functions, or by brute force (numeric derivatives, loops) where R has none.

out <- list()
put <- function(name, value) {
  value <- unname(value)
  if (length(value) == 1) out[[name]] <<- value
  else for (i in seq_along(value)) out[[paste0(name, ".", i)]] <<- value[i]
}

# ---- Distributions, both tails ----------------------------------------------------------------------------------
for (df in c(1, 2.5, 3, 7, 30.25, 400)) {
  for (p in c(0.4, 0.025, 0.005, 1e-6)) {
    put(sprintf("qt upper %g df %g", p, df), qt(p, df, lower.tail = FALSE))
    put(sprintf("qchisq lower %g df %g", p, df), qchisq(p, df))
    put(sprintf("qchisq upper %g df %g", p, df), qchisq(p, df, lower.tail = FALSE))
  }
  for (t in c(0.01, 1.5, 6, 40)) put(sprintf("pt two-sided t %g df %g", t, df), 2 * pt(-t, df))
}
for (df2 in c(2, 9.5, 120)) for (df1 in c(1, 5)) {
  for (p in c(0.5, 0.01)) put(sprintf("qf upper %g df %g %g", p, df1, df2), qf(p, df1, df2, lower.tail = FALSE))
  for (f in c(0.2, 4, 60)) put(sprintf("pf upper %g df %g %g", f, df1, df2), pf(f, df1, df2, lower.tail = FALSE))
}
for (p in c(0.5, 0.1, 0.001, 1e-12)) put(sprintf("qnorm upper %g", p), qnorm(p, lower.tail = FALSE))
for (t in c(2, 4.5)) for (df in c(4, 18)) for (d in c(0.5, 3)) {
  put(sprintf("pt noncentral t %g df %g delta %g", t, df, d), pt(t, df, ncp = d, lower.tail = FALSE))
}
# R's ptukey is good to about 1e-9 only where the degrees of freedom are many.
for (k in c(2, 3, 6, 10)) for (df in c(30, 60, 120)) {
  put(sprintf("ptukey q 3.5 k %g df %g", k, df), ptukey(3.5, k, df, lower.tail = FALSE))
}

# ---- Description ------------------------------------------------------------------------------------------------
vangel <- function(x, level = 0.95) {
  n <- length(x); v <- n - 1; k <- sd(x) / mean(x); a <- 1 - level
  bound <- function(u) 100 * k / sqrt(((u + 2) / n - 1) * k^2 + u / v)
  c(bound(qchisq(1 - a / 2, v)), bound(qchisq(a / 2, v)))
}
recoveries <- c(78.4, 91.2, 85.5, 88.1, 80.9, 95.3)
for (level in c(0.9, 0.95, 0.99)) {
  put(sprintf("describe ci %g", level), t.test(recoveries, conf.level = level)$conf.int[1:2])
  a <- 1 - level
  put(sprintf("describe sdCi %g", level), sd(recoveries) * sqrt(5 / qchisq(c(1 - a / 2, a / 2), 5)))
  put(sprintf("describe rsdCi %g", level), vangel(recoveries, level))
}
put("describe mean sd", c(mean(recoveries), sd(recoveries)))

# ---- t tests ----------------------------------------------------------------------------------------------------
other <- c(70.2, 74.8, 69.9, 77.3)
w <- t.test(recoveries, other)
put("welch", c(w$statistic, w$parameter, w$p.value, w$conf.int[1:2]))
o <- t.test(recoveries, mu = 100)
put("oneSampleT", c(o$statistic, o$p.value, o$conf.int[1:2] - 100))
lowerTest <- t.test(recoveries, other, mu = -20, alternative = "greater")
upperTest <- t.test(recoveries, other, mu = 20, alternative = "less")
put("tost", c(lowerTest$p.value, upperTest$p.value, t.test(recoveries, other, conf.level = 0.9)$conf.int[1:2]))
s <- split(sleep$extra, sleep$group)
w <- t.test(s[[1]], s[[2]]); put("welch sleep", c(w$statistic, w$parameter, w$p.value))
w <- with(ToothGrowth, t.test(len[supp == "OJ"], len[supp == "VC"]))
put("welch ToothGrowth", c(w$statistic, w$parameter, w$p.value))

# ---- Multiplicity -----------------------------------------------------------------------------------------------
p <- c(0.04, 0.001, 0.3, 0.02, 0.02, 0.9, 0.0004)
put("holm", p.adjust(p, "holm"))
put("benjaminiHochberg", p.adjust(p, "BH"))

# ---- Analysis of variance ---------------------------------------------------------------------------------------
line <- function(fit) { a <- anova(fit); c(a[["Sum Sq"]], a[["F value"]][1], a[["Pr(>F)"]][1]) }
put("oneWay InsectSprays", line(lm(count ~ spray, InsectSprays)))
put("oneWay PlantGrowth", line(lm(weight ~ group, PlantGrowth)))
brownForsythe <- function(y, g) {
  d <- abs(y - ave(y, g, FUN = median)); a <- anova(lm(d ~ factor(g)))
  c(a[["F value"]][1], a[["Pr(>F)"]][1])
}
put("brownForsythe InsectSprays", brownForsythe(InsectSprays$count, InsectSprays$spray))
put("brownForsythe PlantGrowth", brownForsythe(PlantGrowth$weight, PlantGrowth$group))
tukey <- TukeyHSD(aov(count ~ spray, InsectSprays))$spray
for (pair in c("F-A", "E-C", "D-B")) put(paste("tukey InsectSprays", pair), tukey[pair, ])
plant <- TukeyHSD(aov(weight ~ group, PlantGrowth))$group
put("tukey PlantGrowth trt2-trt1", plant["trt2-trt1", ])

npkFit <- anova(lm(yield ~ block + N * P * K, npk))
put("npk ss", npkFit[["Sum Sq"]])
put("npk p", npkFit[["Pr(>F)"]][2:7])
put("warpbreaks", { a <- anova(lm(breaks ~ wool * tension, warpbreaks)); c(a[["Sum Sq"]], a[["F value"]][1:3], a[["Pr(>F)"]][1:3]) })
# Unbalanced: drop the rows 3, 4, 20, 37 of warpbreaks; Type II by comparing models, tested on the full residual.
unbalanced <- warpbreaks[-c(3, 4, 20, 37), ]
full <- lm(breaks ~ wool * tension, unbalanced)
add <- lm(breaks ~ wool + tension, unbalanced)
ss <- function(small, large) deviance(small) - deviance(large)
mse <- deviance(full) / df.residual(full)
s2 <- c(ss(lm(breaks ~ tension, unbalanced), add), ss(lm(breaks ~ wool, unbalanced), add), ss(add, full))
d2 <- c(1, 2, 2); f2 <- s2 / d2 / mse
put("typeII ss", s2); put("typeII f", f2)
put("typeII p", pf(f2, d2, df.residual(full), lower.tail = FALSE))
put("typeII residual", c(deviance(full), df.residual(full), summary(full)$r.squared))
# Unbalanced with a block (replicate number parity) and three factors' worth of structure in ToothGrowth.
tg <- ToothGrowth[-c(1, 12, 13, 44, 45, 60), ]
tg$dose <- factor(tg$dose); tg$block <- factor(seq_len(nrow(tg)) %% 3)
fullT <- lm(len ~ block + supp * dose, tg); addT <- lm(len ~ block + supp + dose, tg)
put("typeII block", c(anova(lm(len ~ block, tg))[["Sum Sq"]][1],
  ss(lm(len ~ block + dose, tg), addT), ss(lm(len ~ block + supp, tg), addT), ss(addT, fullT), deviance(fullT), df.residual(fullT)))
cellN <- with(warpbreaks, table(wool, tension))
cell <- with(warpbreaks, mean(breaks[wool == "A" & tension == "L"]))
wf <- lm(breaks ~ wool * tension, warpbreaks)
put("cell mean A L", cell + c(0, -1, 1) * qt(0.975, 48) * summary(wf)$sigma / sqrt(9))

# ---- Outliers ---------------------------------------------------------------------------------------------------
grubbsCritical <- function(n, a, sides) { t <- qt(1 - a / (sides * n), n - 2); (n - 1) / sqrt(n) * sqrt(t^2 / (n - 2 + t^2)) }
for (n in c(4, 6, 10, 20)) put(sprintf("grubbs critical n %g", n), c(grubbsCritical(n, 0.05, 2), grubbsCritical(n, 0.01, 1)))
cochranCritical <- function(n, k, a) 1 / (1 + (k - 1) / qf(1 - a / k, n - 1, (k - 1) * (n - 1)))
for (k in c(3, 5, 9)) for (n in c(2, 3)) put(sprintf("cochran critical k %g n %g", k, n), cochranCritical(n, k, 0.05))

# ---- Planning ---------------------------------------------------------------------------------------------------
for (n in c(3, 6, 20)) for (d in c(0.5, 1, 2)) {
  put(sprintf("power n %g delta %g", n, d), power.t.test(n = n, delta = d, sd = 1, strict = TRUE)$power)
  put(sprintf("power one-sided n %g delta %g", n, d), power.t.test(n = n, delta = d, sd = 1, alternative = "one.sided")$power)
}
firstN <- function(test) { n <- 2; while (!test(n)) n <- n + 1; n }
put("replicates difference 10 sd 10", ceiling(power.t.test(delta = 10, sd = 10, power = 0.8)$n))
put("replicates difference 15 sd 10 power 0.9", ceiling(power.t.test(delta = 15, sd = 10, power = 0.9)$n))
put("replicates half width", sapply(c(4, 8, 15), function(h) firstN(function(n) qt(0.975, n - 1) * 12 / sqrt(n) <= h)))
put("replicates rsd", sapply(c(8, 12, 16), function(r) firstN(function(n) pchisq(qchisq(0.05, n - 1) * (20 / r)^2, n - 1) >= 0.8)))

# ---- Calibration ------------------------------------------------------------------------------------------------
x <- c(1, 2, 5, 10, 20, 50, 100)
y <- c(0.0212, 0.0395, 0.1018, 0.2071, 0.399, 0.985, 1.912)
models <- list(linear = y ~ x, quadratic = y ~ x + I(x^2))
weights <- list(none = rep(1, 7), "1/x" = 1 / x, "1/x2" = 1 / x^2)
numericGradient <- function(f, at) sapply(seq_along(at), function(i) {
  h <- 1e-4 * max(abs(at[i]), 1e-8); step <- replace(numeric(length(at)), i, h)
  (8 * (f(at + step) - f(at - step)) - (f(at + 2 * step) - f(at - 2 * step))) / (12 * h)
})
for (m in names(models)) for (w in names(weights)) {
  fit <- lm(models[[m]], weights = weights[[w]])
  name <- paste("calibration", m, w)
  put(paste(name, "coefficients"), coef(fit))
  put(paste(name, "standard errors"), summary(fit)$coefficients[, 2])
  put(paste(name, "sigma r2"), c(summary(fit)$sigma, summary(fit)$r.squared))
  put(paste(name, "covariance last"), vcov(fit)[1, length(coef(fit))])
  height <- function(b, at) sum(b * at^(seq_along(b) - 1))
  root <- function(b, target) uniroot(function(at) height(b, at) - target, c(0, 130), tol = 1e-14)$root
  back <- sapply(y, function(target) root(coef(fit), target))
  put(paste(name, "rse"), 100 * sqrt(sum(((back - x) / x)^2) / df.residual(fit)))
  target <- 0.3
  x0 <- root(coef(fit), target)
  g <- numericGradient(function(b) root(b, target), coef(fit))
  dxdy <- (root(coef(fit), target + 1e-4) - root(coef(fit), target - 1e-4)) / 2e-4
  w0 <- switch(w, none = 1, "1/x" = 1 / x0, "1/x2" = 1 / x0^2)
  se <- sqrt(dxdy^2 * summary(fit)$sigma^2 / (w0 * 3) + c(g %*% vcov(fit) %*% g))
  put(paste(name, "solve 0.3 of 3"), c(x0, se))
}
rf <- lm(y ~ 0 + x, weights = 1 / x^2)
put("calibration average", c(coef(rf), summary(rf)$coefficients[, 2], summary(rf)$sigma, 100 * sd(y / x) / mean(y / x)))

# ---- Net mean, ratios, losses: variance by numeric derivatives in the raw means ---------------------------------
propagate <- function(f, means, variances, dfs) {
  g <- numericGradient(f, means); terms <- g^2 * variances
  c(f(means), sqrt(sum(terms)), sum(terms)^2 / sum(terms^2 / dfs))
}
varMean <- function(v) var(v) / length(v)
spiked <- c(182, 195, 204, 188, 199, 192); native <- c(98, 107, 101)
nm <- propagate(function(m) m[1] - m[2], c(mean(spiked), mean(native)), c(varMean(spiked), varMean(native)), c(5, 2))
put("netMean", c(nm, nm[1] + c(-1, 1) * qt(0.975, nm[3]) * nm[2]))
me <- propagate(function(m) 100 * (m[1] - m[2]) / m[3], c(mean(spiked), mean(native), 80),
  c(varMean(spiked), varMean(native), 4^2), c(5, 2, 8))
put("netMean matrix effect", me)
# By batch: batches 1 1 1 2 2 2 of the spiked, native 98 | 107 101.
net <- spiked - c(98, 98, 98, 104, 104, 104)
su2 <- var(c(107, 101)); terms <- c(var(net) / 6, su2 * (0.5^2 / 1 + 0.5^2 / 2))
put("netMean batches", c(mean(net), sqrt(sum(terms)), sum(terms)^2 / sum(terms^2 / c(5, 1))))

signal <- c(99.1, 101.8, 97.6); evaporation <- c(60.3, 57.9, 61.5, 59.2); drying <- c(54.8, 52.7, 55.9, 53.1)
extraction <- c(27.4, 25.1, 29.8, 26.6, 28.3)
groups <- list(signal, evaporation, drying, extraction)
means <- sapply(groups, mean); variances <- sapply(groups, varMean); dfs <- lengths(groups) - 1
for (k in 2:4) {
  lg <- function(m) log(m[k] / m[k - 1]); r <- propagate(lg, means, variances, dfs)
  put(sprintf("step recovery %d", k - 1), c(exp(r[1]), r[2:3], exp(r[1] + c(-1, 1) * qt(0.975, r[3]) * r[2])))
  lost <- propagate(function(m) 100 * (m[4] / m[k]) * (1 - m[k] / m[k - 1]), means, variances, dfs)
  put(sprintf("lost %d", k - 1), c(lost, lost[1] + c(-1, 1) * qt(0.975, lost[3]) * lost[2]))
  put(sprintf("regain %d", k - 1), 100 * means[4] / means[1] * (means[k - 1] / means[k] - 1))
}
stageP <- sapply(2:4, function(k) t.test(groups[[k - 1]], groups[[k]])$p.value)
put("stage p", stageP); put("stage p holm", p.adjust(stageP, "holm"))
put("stage p against 100", t.test(evaporation, mu = 100)$p.value)

fc <- propagate(function(m) log(m[2] / m[1] * m[4] / m[3]), means, variances, dfs)
put("forecast", c(100 * exp(fc[1]), fc[2:3], 100 * exp(fc[1] + c(-1, 1) * qt(0.975, fc[3]) * fc[2])))
fc2 <- propagate(function(m) log(m[2] / m[1] * m[3] / m[2]), means, variances, dfs)
put("forecast cancelling", c(100 * exp(fc2[1]), fc2[2:3]))

f1 <- c(61.2, 58.4, 63.9, 60.1); f2 <- c(11.4, 14.2, 9.8, 12.3)
y1 <- 0.9; se1 <- 0.03; df1 <- 6; y2 <- 0.8; se2 <- 0.05; df2 <- 4; r0 <- 97; ser0 <- 1.5; dfr0 <- 5
# f1 passed both stages, f2 the first; replicates enter as one linear combination.
openOf <- function(q) { a1 <- 1 / (exp(q[1] + q[2]) * q[3] / 100); a2 <- 1 / (exp(q[1]) * q[3] / 100)
  c(mean(f1 * (a1 - 1) + f2 * (a2 - 1)), 100 - mean(f1 * a1 + f2 * a2)) }
q <- c(log(y1), log(y2), r0)
for (i in 1:2) {
  a1 <- 1 / (y1 * y2 * r0 / 100); a2 <- 1 / (y1 * r0 / 100)
  own <- if (i == 1) varMean(f1 * (a1 - 1) + f2 * (a2 - 1)) else varMean(f1 * a1 + f2 * a2)
  g <- numericGradient(function(b) openOf(b)[i], q)
  terms <- c(own, g^2 * c(se1, se2, ser0)^2)
  put(c("openLoss downstream", "openLoss open")[i], c(openOf(q)[i], sqrt(sum(terms)), sum(terms)^2 / sum(terms^2 / c(3, df1, df2, dfr0))))
}

A <- c(1020, 998, 1011, 1005); B <- c(842, 871, 855); C <- c(690, 655, 702, 671, 688); U <- c(52, 61, 47)
mm <- c(mean(A), mean(B), mean(C), mean(U)); mv <- c(varMean(A), varMean(B), varMean(C), varMean(U)); md <- c(3, 2, 4, 2)
effect <- list(matrixEffect = function(m) log((m[2] - m[4]) / m[1]), recovery = function(m) log((m[3] - m[4]) / (m[2] - m[4])),
  processEfficiency = function(m) log((m[3] - m[4]) / m[1]))
for (e in names(effect)) {
  r <- propagate(effect[[e]], mm, mv, md); est <- 100 * exp(r[1])
  put(paste("matrixEffect", e), c(est, est * r[2], r[3], 100 * exp(r[1] + c(-1, 1) * qt(0.975, r[3]) * r[2])))
}

# ---- Precision --------------------------------------------------------------------------------------------------
days <- list(c(92.1, 94.3, 93.2), c(88.7, 90.2), c(95.4, 96.1, 94.9, 95.8), c(91.3, 92.2, 90.8))
value <- unlist(days); day <- factor(rep(1:4, lengths(days)))
a <- anova(lm(value ~ day)); ms <- a[["Mean Sq"]]; N <- length(value); n0 <- (N - sum(lengths(days)^2) / N) / 3
put("precision", c(mean(value), sqrt(ms[2]), sqrt((ms[1] - ms[2]) / n0), sqrt(ms[2] + (ms[1] - ms[2]) / n0), a[["F value"]][1], a[["Pr(>F)"]][1]))

# ---- Detection --------------------------------------------------------------------------------------------------
for (n in c(7, 8, 10, 21)) put(sprintf("qt 0.99 n %d", n), qt(0.99, n - 1))
for (n in c(5, 6, 7, 8, 10)) put(sprintf("half range factor n %d", n), qt(0.995, n - 1) * sqrt(1 + 1 / n))

cat("{\n", paste(sprintf('  "%s": %.17g', names(out), unlist(out)), collapse = ",\n"), "\n}\n", sep = "")
