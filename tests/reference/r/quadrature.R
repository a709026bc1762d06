# Tails of the studentized range and of noncentral t by Gauss-Legendre quadrature in double precision (written with R 4.2.2).
# R's own ptukey is no truth here: its relative error at the 5 % point is 1e-1 at 2 degrees of freedom and 1e-3 at 3.
# Usage: Rscript tests/reference/r/quadrature.R > tests/reference/r/quadrature.json && npx prettier --write tests/reference/r

out <- list()
put <- function(name, value) out[[name]] <<- value

# Nodes and weights on -1 to 1 (Golub and Welsch, Math. Comp. 23 (1969) 221).
order <- 24
beta <- seq_len(order - 1) / sqrt(4 * seq_len(order - 1)^2 - 1)
jacobi <- diag(0, order)
jacobi[cbind(1:(order - 1), 2:order)] <- beta
jacobi[cbind(2:order, 1:(order - 1))] <- beta
rule <- eigen(jacobi, symmetric = TRUE)
node <- rule$values
weight <- 2 * rule$vectors[1, ]^2

pieces <- function(from, to, count) {
  edge <- seq(from, to, length.out = count + 1)
  half <- diff(edge) / 2
  list(x = as.vector(outer(node, half) + rep(edge[-1] - half, each = order)), w = as.vector(outer(weight, half)))
}

# Log of s = sqrt(chi-square/df): its density, normalised by its own sum, which must come out as 1.
chi <- function(df, count = 12) {
  sd <- 1 / sqrt(2 * df)
  from <- if (df > 200) -40 * sd else -90 / df - 3
  to <- if (df > 200) 40 * sd else log(1 + 60 * sd)
  # The long lower end of few degrees of freedom is smooth, the rest is not.
  bend <- max(from, -6)
  u <- pieces(bend, to, count)
  if (bend > from) {
    rest <- pieces(from, bend, ceiling((bend - from) / 3))
    u <- list(x = c(rest$x, u$x), w = c(rest$w, u$w))
  }
  f <- u$w * exp(df * (u$x - expm1(2 * u$x) / 2))
  list(s = exp(u$x), f = f / sum(f))
}

z <- pieces(-8.5, 13, 9)
logPhi <- pnorm(z$x, log.p = TRUE)
rangeUpper <- function(r, k) {
  ratio <- pmin(1, exp(pnorm(z$x - r, log.p = TRUE) - logPhi))
  k * sum(z$w * dnorm(z$x) * exp((k - 1) * logPhi) * -expm1((k - 1) * log1p(-ratio)))
}
for (k in c(2, 3, 10, 100)) for (df in c(1, 2, 3, 5, 8, 20, 1e4)) {
  s <- chi(df)
  for (q in c(1, 3, 5, 8, 15, 60)) {
    put(sprintf("studentized range q %g k %g df %g", q, k, df), sum(s$f * sapply(q * s$s, rangeUpper, k)))
  }
}
for (k in c(2, 3, 10, 100)) for (q in c(1, 3, 5, 8)) put(sprintf("studentized range q %g k %g df Inf", q, k), rangeUpper(q, k))

for (df in c(1, 2, 3, 4, 8, 30, 1000)) for (delta in c(-3, 0.5, 2, 6, 30)) {
  s <- chi(df, 100)
  for (t in c(-4, 0.5, 2, 5, 12, 40)) {
    put(sprintf("noncentral t %g df %g delta %g", t, df, delta), sum(s$f * pnorm(delta - t * s$s)))
  }
}

cat("{\n", paste(sprintf('  "%s": %.17g', names(out), unlist(out)), collapse = ",\n"), "\n}\n", sep = "")
