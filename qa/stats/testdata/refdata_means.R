# R's own answers for pooled, paired and ratio questions on two means.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_means.R > means.txt
#
# One line an answer: set, quantity, value, allowed relative error. The interval
# of a ratio of means has no function in base R: its ends are found here as the
# first change of sign of |c - theta r| - qt(0.95, df(theta)) se(theta) outward
# from the estimate, on a fine grid, then uniroot to 1e-15.
cat("# Made by refdata_means.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
set.seed(20261201)
sets <- list(
  D1 = list(ref = c(12.003, 11.994, 12.011, 12.007, 11.998, 12.015, 12.002, 12.009, 11.989, 12.006, 12.012, 12.001),
            cand = c(12.008, 12.013, 11.997, 12.019, 12.004, 12.011, 11.992, 12.016, 12.006, 12.001, 12.022, 12.009)),
  LOAD = list(ref = round(rnorm(20, 250, 12), 1), cand = round(rnorm(20, 244, 17), 1)),
  WIDE = list(ref = round(rnorm(6, 3, 1), 2), cand = round(rnorm(6, 3.5, 2), 2)),
  LOW = list(ref = round(rnorm(8, 5, 1), 2), cand = round(rnorm(8, -1, 2), 2)),
  PAIRS = local({ p <- rnorm(15, 40, 3); list(ref = round(p + rnorm(15, 0, 0.2), 2), cand = round(1.01 * p + rnorm(15, 0, 0.3), 2)) }),
  TWO = list(ref = c(10, 11), cand = c(12, 12.5)),
  UNEVEN = list(ref = round(rnorm(5, 100, 8), 2), cand = round(rnorm(50, 104, 3), 2))
)
out <- function(set, what, value, tol = 1e-11) cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
roots <- function(g, centre, step) { # g below 0 at the centre
  one <- function(s) {
    from <- centre; h <- step
    repeat {
      to <- from + s * h
      if (g(to) >= 0) return(uniroot(g, c(from, to), tol = 1e-15, maxiter = 1000)$root)
      from <- to; h <- h * 1.02
    }
  }
  c(one(-1), one(1))
}
ratio <- function(name, kind, m1, m2, se2, df, se_ref, df_ref) {
  g <- function(th) abs(m2 - th * m1) - qt(0.95, df(th)) * sqrt(se2(th))
  out(name, paste0(kind, ".value"), m2 / m1)
  for (th in c(0.9, 1.1)) {
    e <- paste0(kind, ".", th)
    out(name, paste0(e, ".se"), sqrt(se2(th)))
    out(name, paste0(e, ".df"), df(th))
    out(name, paste0(e, ".p.above"), pt((m2 - th * m1) / sqrt(se2(th)), df(th), lower.tail = FALSE))
    out(name, paste0(e, ".p.below"), pt((m2 - th * m1) / sqrt(se2(th)), df(th)))
  }
  if (abs(m1) / se_ref > qt(0.95, df_ref)) {
    r <- roots(g, m2 / m1, sqrt(se2(m2 / m1)) / abs(m1) / 50)
    out(name, paste0(kind, ".lower"), r[1])
    out(name, paste0(kind, ".upper"), r[2])
  }
}
for (name in names(sets)) {
  s <- sets[[name]]
  r <- s$ref; c <- s$cand
  for (lot in c("ref", "cand")) cat("readings", name, lot, sprintf("%.17g", s[[lot]]), "\n", sep = " ")
  w <- t.test(c, r, var.equal = TRUE, conf.level = 0.9)
  out(name, "pooled.t", w$statistic); out(name, "pooled.df", w$parameter); out(name, "pooled.se", w$stderr)
  out(name, "pooled.p", w$p.value); out(name, "pooled.lower", w$conf.int[1]); out(name, "pooled.upper", w$conf.int[2])
  n1 <- length(r); n2 <- length(c); m1 <- mean(r); m2 <- mean(c); v1 <- var(r) / n1; v2 <- var(c) / n2
  ratio(name, "ratio.welch", m1, m2, function(th) v2 + th^2 * v1,
        function(th) (v2 + th^2 * v1)^2 / (v2^2 / (n2 - 1) + th^4 * v1^2 / (n1 - 1)), sqrt(v1), n1 - 1)
  sp2 <- ((n1 - 1) * var(r) + (n2 - 1) * var(c)) / (n1 + n2 - 2)
  ratio(name, "ratio.pooled", m1, m2, function(th) sp2 * (1 / n2 + th^2 / n1), function(th) n1 + n2 - 2, sqrt(sp2 / n1), n1 + n2 - 2)
  if (n1 == n2 && n1 > 2) {
    w <- t.test(c, r, paired = TRUE, conf.level = 0.9)
    out(name, "paired.t", w$statistic, 1e-10); out(name, "paired.df", w$parameter); out(name, "paired.se", w$stderr)
    out(name, "paired.p", w$p.value); out(name, "paired.lower", w$conf.int[1], 1e-10); out(name, "paired.upper", w$conf.int[2], 1e-10)
    ratio(name, "ratio.paired", m1, m2, function(th) var(c - th * r) / n1, function(th) n1 - 1, sqrt(v1), n1 - 1)
    p <- cor.test(c - r, c + r) # Pitman-Morgan is this test
    out(name, "spread.t", p$statistic, 1e-10); out(name, "spread.df", p$parameter); out(name, "spread.p", p$p.value, 1e-10)
    # Its interval: every k for which c and k r show no correlation of difference and sum.
    g <- function(u) abs(cor.test(c - exp(u) * r, c + exp(u) * r)$statistic) - qt(0.95, n1 - 2)
    u <- roots(g, log(sd(c) / sd(r)), 0.002)
    out(name, "spread.lower", exp(u[1]), 1e-10); out(name, "spread.upper", exp(u[2]), 1e-10)
  }
}
