# R's own answers for sets of readings that are hard on arithmetic.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata.R > r.txt
#
# One line an answer: set, quantity, value, allowed relative error. The sets BIG,
# LITTLE, HUGE, TINY and ROUND are of the kind the StRD authors and SciPy's tests
# use. R sums means with extended precision and a second pass, so its answers are
# good to the allowed error given here, which for BIG, LITTLE and HUGE is that of
# one float64 rounding of the mean.
sets <- list(
  BIG = list(ref = 99999990 + 1:9, cand = 99999990 + c(3, 5, 1, 8, 9, 12, 2, 7)),
  LITTLE = list(ref = 0.99999990 + (1:9) * 1e-8, cand = 0.99999990 + c(3, 5, 1, 8, 9, 12, 2, 7) * 1e-8),
  HUGE = list(ref = 1e12 * (1:9), cand = 1e12 * c(4, 4.5, 2, 8, 11, 12, 3)),
  TINY = list(ref = 1e-12 * (1:9), cand = 1e-12 * c(4, 4.5, 2, 8, 11, 12, 3)),
  ROUND = list(ref = 0.5 + 1:9, cand = c(1, 1, 1, 2, 2, 5, 9)),
  ONECONSTANT = list(ref = rep(12.01, 12), cand = c(12.008, 12.013, 11.997, 12.019)),
  LONELY = list(ref = c(0, 0, 0, 0, 0, 0, 0, 0, 0, 1000), cand = c(-1, 1)),
  D1 = list(ref = c(12.003, 11.994, 12.011, 12.007, 11.998, 12.015, 12.002, 12.009, 11.989, 12.006, 12.012, 12.001),
            cand = c(12.008, 12.013, 11.997, 12.019, 12.004, 12.011, 11.992, 12.016, 12.006, 12.001, 12.022, 12.009))
)
allowed <- c(BIG = 1e-8, LITTLE = 1e-8, HUGE = 1e-13, TINY = 1e-13, ROUND = 1e-13, ONECONSTANT = 1e-9, LONELY = 1e-13, D1 = 1e-9)
out <- function(set, what, value, tol = allowed[[set]])
  cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
cat("# Made by refdata.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
for (name in names(sets)) {
  s <- sets[[name]]
  for (lot in c("ref", "cand")) {
    x <- s[[lot]]
    cat("readings", name, lot, sprintf("%.17g", x), "\n", sep = " ")
    out(name, paste0(lot, ".mean"), mean(x), 1e-15)
    if (sd(x) > 0) out(name, paste0(lot, ".sd"), sd(x))
    q <- quantile(x, c(0.25, 0.5, 0.75), type = 7)
    out(name, paste0(lot, ".q1"), q[[1]], 1e-15)
    out(name, paste0(lot, ".median"), q[[2]], 1e-15)
    out(name, paste0(lot, ".q3"), q[[3]], 1e-15)
    n <- length(x)
    if (n >= 3 && sd(x) > 0) {
      g <- max(abs(x - mean(x))) / sd(x)
      out(name, paste0(lot, ".grubbs.g"), g)
      if (name != "LONELY")
        out(name, paste0(lot, ".grubbs.p"), min(1, 2 * n * pt(sqrt(n * (n - 2) * g^2 / ((n - 1)^2 - n * g^2)), n - 2, lower.tail = FALSE)), 10 * allowed[[name]])
    }
  }
  for (h in c("two.sided", "greater", "less")) {
    w <- t.test(s$cand, s$ref, alternative = h)
    out(name, paste0("welch.p.", h), w$p.value)
  }
  w <- t.test(s$cand, s$ref, conf.level = 0.9)
  out(name, "welch.t", w$statistic)
  out(name, "welch.df", w$parameter)
  out(name, "welch.se", w$stderr)
  out(name, "welch.lower", w$conf.int[[1]])
  out(name, "welch.upper", w$conf.int[[2]])
  if (sd(s$ref) > 0) {
    f <- var.test(s$cand, s$ref, conf.level = 0.9)
    out(name, "f.f", f$statistic)
    out(name, "f.p", f$p.value)
    out(name, "f.lower", sqrt(f$conf.int[[1]]), max(1e-11, allowed[[name]])) # qf is good to about 1e-12
    out(name, "f.upper", sqrt(f$conf.int[[2]]), max(1e-11, allowed[[name]]))
  }
}
