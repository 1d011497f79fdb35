# R's own answers for ranks: exact without ties for few readings, normal for many.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_ranks.R > ranks_r.txt
#
# One line an answer: set, quantity, value, allowed relative error. R finds shift
# and limits of many or tied readings by a root search, so only those of the exact
# branch are here; its qwilcox gives the k of the interval.
cat("# Made by refdata_ranks.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
set.seed(20261202)
out <- function(set, what, value, tol = 1e-12) cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
both <- function(name, r, c, exact) {
  for (lot in c("ref", "cand")) cat("readings", name, lot, sprintf("%.17g", if (lot == "ref") r else c), "\n", sep = " ")
  w <- suppressWarnings(wilcox.test(c, r, exact = exact, correct = TRUE, conf.int = exact, conf.level = 0.9))
  out(name, "u.u", w$statistic); out(name, "u.p", w$p.value)
  if (exact) { out(name, "u.lower", w$conf.int[1]); out(name, "u.upper", w$conf.int[2]); out(name, "u.shift", w$estimate, 1e-11) }
  if (length(r) == length(c)) {
    d <- round(c - r, 3)
    cat("readings", paste0(name, "D"), "ref", rep(0, length(d)), "\n", sep = " ")
    cat("readings", paste0(name, "D"), "cand", sprintf("%.17g", d), "\n", sep = " ")
    name <- paste0(name, "D")
    tied <- any(duplicated(abs(d))) || any(d == 0)
    if (tied == exact) return(invisible())
    w <- suppressWarnings(wilcox.test(d, exact = exact, correct = TRUE, conf.int = exact, conf.level = 0.9))
    out(name, "v.v", w$statistic); out(name, "v.p", w$p.value)
    if (exact) { out(name, "v.lower", w$conf.int[1]); out(name, "v.upper", w$conf.int[2]); out(name, "v.shift", w$estimate) }
  }
}
for (n in c(5, 8, 12, 20, 30, 40)) {
  v <- sample(1:4000, 2 * n) / 1000 + 11
  both(paste0("E", n), sort(v[1:n]), v[-(1:n)], TRUE)
}
both("E9.15", sample(1:999, 9), sample(1000:1999, 15) - 500.5, TRUE)
both("T120", round(rnorm(120, 12, 0.02), 2), round(rnorm(120, 12.005, 0.03), 2), FALSE)
both("T60.90", round(rnorm(60, 12, 0.02), 3), round(rnorm(90, 12.005, 0.03), 2), FALSE)
both("N400.300", rnorm(400), rnorm(300, 0.2), FALSE)
both("N700", round(rnorm(700, 5), 3), round(rnorm(700, 5.1), 3), FALSE)
