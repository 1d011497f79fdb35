# Trimmed means and Bonett's interval, written out in R.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_robust.R > robust.txt
#
# One line an answer: set, quantity, value, allowed relative error. Base R has
# neither: Yuen's numbers are made here from mean(trim = 0.2) and a winsorized
# variance by quantile-free clipping, Bonett's ends as the first change of sign on
# a fine grid outward from the centre, then uniroot.
cat("# Made by refdata_robust.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
set.seed(20261203)
out <- function(set, what, value, tol = 1e-11) cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
sets <- list(
  D1 = list(ref = c(12.003, 11.994, 12.011, 12.007, 11.998, 12.015, 12.002, 12.009, 11.989, 12.006, 12.012, 12.001),
            cand = c(12.008, 12.013, 11.997, 12.019, 12.004, 12.011, 11.992, 12.016, 12.006, 12.001, 12.022, 12.009)),
  SHORT = list(ref = round(rnorm(5), 2), cand = round(rnorm(6, 1, 3), 2)),
  HEAVY = list(ref = round(rt(40, 3), 3), cand = round(rt(25, 2) * 2 + 1, 3)),
  SKEW = list(ref = round(rexp(30, 0.1), 2), cand = round(rexp(31, 0.05), 2)),
  FLAT = list(ref = round(runif(100), 3), cand = round(runif(8), 3)),
  WILD = list(ref = c(1:9, 1000), cand = c(3, 4, 5, 6, 7, 8))
)
bonett <- function(r, c, level) {
  z <- qnorm((1 + level) / 2); n1 <- length(r); n2 <- length(c)
  q <- (n2 / (n2 - z)) / (n1 / (n1 - z))
  four <- function(x) { n <- length(x); sum((x - mean(x, trim = 1 / (2 * sqrt(n - 4))))^4) }
  A <- four(c); B <- four(r); S2 <- (n2 - 1) * var(c); S1 <- (n1 - 1) * var(r)
  g <- function(u) {
    rho <- exp(u)
    k <- (n1 + n2) * (A + rho^4 * B) / (S2 + rho^2 * S1)^2
    abs(log(q * var(c) / (rho^2 * var(r)))) - z * sqrt((k - (n2 - 3) / n2) / (n2 - 1) + (k - (n1 - 3) / n1) / (n1 - 1))
  }
  centre <- log(sqrt(q) * sd(c) / sd(r))
  one <- function(s) { from <- centre; repeat { to <- from + s * 0.001; if (g(to) >= 0) return(uniroot(g, c(from, to), tol = 1e-15, maxiter = 1000)$root); from <- to } }
  exp(c(one(-1), one(1)))
}
for (name in names(sets)) {
  r <- sets[[name]]$ref; c <- sets[[name]]$cand
  for (lot in c("ref", "cand")) cat("readings", name, lot, sprintf("%.17g", sets[[name]][[lot]]), "\n", sep = " ")
  part <- function(x) {
    n <- length(x); g <- n %/% 5; s <- sort(x); h <- n - 2 * g
    w <- pmin(pmax(x, s[g + 1]), s[n - g])
    list(m = mean(x, trim = 0.2), d = (n - 1) * var(w) / (h * (h - 1)), h = h)
  }
  a <- part(r); b <- part(c); v <- a$d + b$d
  df <- v^2 / (a$d^2 / (a$h - 1) + b$d^2 / (b$h - 1))
  out(name, "yuen.value", b$m - a$m); out(name, "yuen.se", sqrt(v)); out(name, "yuen.df", df)
  out(name, "yuen.p", 2 * pt(-abs((b$m - a$m) / sqrt(v)), df)); out(name, "yuen.upper", b$m - a$m + qt(0.95, df) * sqrt(v))
  for (level in c(0.9, 0.95, 0.99)) {
    i <- bonett(r, c, level)
    out(name, paste0("bonett.", level, ".lower"), i[1]); out(name, paste0("bonett.", level, ".upper"), i[2])
  }
}
