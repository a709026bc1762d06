# Reference values for the chemistry from base R (written with R 4.2.2), as flat JSON: name -> number.
# Usage: Rscript tests/reference/r/chemistry.R > tests/reference/r/chemistry.json && npx prettier --write tests/reference/r
# Losses by quadrature of R's pgamma, charges by adding up every microstate, edges by uniroot: other ways than the program's.

out <- list()
put <- function(name, value) {
  value <- unname(value)
  if (length(value) == 1) out[[name]] <<- value
  else for (i in seq_along(value)) out[[paste0(name, ".", i)]] <<- value[i]
}

# ---- Breakthrough by tanks in series -----------------------------------------------------------------------------
# Mean over the load of what leaves: the outlet curve P(N, N v/V_R) averaged by composite Gauss-Legendre quadrature.
nodes <- c(0.1834346424956498, 0.5255324099163290, 0.7966664774136267, 0.9602898564975363)
weights <- c(0.3626837833783620, 0.3137066458778873, 0.2223810344533745, 0.1012285362903763)
loss <- function(plates, ratio, pieces = 400) {
  edges <- seq(0, ratio, length.out = pieces + 1)
  half <- diff(edges) / 2
  middle <- edges[-1] - half
  sum(sapply(1:4, function(k) {
    weights[k] * sum(half * (pgamma(plates * (middle - half * nodes[k]), plates) + pgamma(plates * (middle + half * nodes[k]), plates)))
  })) / ratio
}
for (n in c(1, 2.5, 5, 10, 20, 50, 100, 400)) {
  for (r in c(0.1, 0.5, 0.9, 1, 1.5, 4)) put(sprintf("loss N %g ratio %g", n, r), loss(n, r))
  for (b in c(0.005, 0.01, 0.02, 0.05, 0.1, 0.5)) {
    put(sprintf("ratio N %g loss %g", n, b), uniroot(function(r) loss(n, r) - b, c(1e-3, 20), tol = 1e-13)$root)
  }
}

# ---- Charge ------------------------------------------------------------------------------------------------------
substances <- list(
  gabapentin = list(acids = 3.68, bases = 10.7, permanent = 0),
  glyphosate = list(acids = c(0.8, 2.3, 6), bases = 10.2, permanent = 0),
  benzidine = list(acids = numeric(0), bases = c(4.66, 3.57), permanent = 0),
  bisphenol = list(acids = c(9.6, 10.2), bases = numeric(0), permanent = 0),
  betaine = list(acids = 1.8, bases = numeric(0), permanent = 1),
  many = list(acids = c(2, 4, 6.5, 9), bases = c(1, 5, 8.5, 11), permanent = 0)
)
for (name in names(substances)) {
  s <- substances[[name]]
  for (ph in c(2, 5.5, 7, 10)) {
    ionised <- c(1 / (1 + 10^(s$acids - ph)), 1 / (1 + 10^(ph - s$bases)))
    sign <- c(rep(-1, length(s$acids)), rep(1, length(s$bases)))
    states <- as.matrix(expand.grid(rep(list(0:1), length(ionised))))
    p <- apply(states, 1, function(on) prod(ifelse(on == 1, ionised, 1 - ionised)))
    net <- as.vector(states %*% sign) + s$permanent
    charged <- rowSums(states) > 0 | s$permanent != 0
    label <- sprintf("%s pH %g", name, ph)
    put(paste(label, "neutral"), sum(p[!charged]))
    put(paste(label, "cation"), sum(p[net > 0]))
    put(paste(label, "anion"), sum(p[net < 0]))
    put(paste(label, "zwitterion"), sum(p[net == 0 & charged]))
    put(paste(label, "mean"), sum(p * net))
    for (z in sort(unique(net), decreasing = TRUE)) put(sprintf("%s state %g", label, z), sum(p[net == z]))
  }
}

# ---- Edges of pH windows -----------------------------------------------------------------------------------------
neutral <- function(ph, acids, bases) prod(1 / (1 + 10^(ph - acids))) * prod(1 / (1 + 10^(bases - ph)))
edge <- function(f, low, high) uniroot(f, c(low, high), tol = 1e-14, maxiter = 10000)$root
for (share in c(0.5, 0.9, 0.99)) {
  put(sprintf("diacid neutral below, share %g", share), edge(function(x) neutral(x, c(9.6, 10.2), numeric(0)) - share, 0, 14))
  put(sprintf("dibase neutral above, share %g", share), edge(function(x) neutral(x, numeric(0), c(4.66, 3.57)) - share, 0, 14))
  put(sprintf("ampholyte neutral, share %g", share),
      c(edge(function(x) neutral(x, 9, 3) - share, 0, 6), edge(function(x) neutral(x, 9, 3) - share, 6, 14)))
  put(sprintf("ampholyte charged, share %g", share),
      c(edge(function(x) 1 - neutral(x, 9, 3) - share, 0, 6), edge(function(x) 1 - neutral(x, 9, 3) - share, 6, 14)))
}

cat("{\n")
cat(paste0("  \"", names(out), "\": ", sapply(out, function(v) sprintf("%.17g", v)), collapse = ",\n"))
cat("\n}\n")
