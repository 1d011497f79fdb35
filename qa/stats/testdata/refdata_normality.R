# R's own answers for the Shapiro-Wilk test.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_normality.R > normality.txt
#
# One line an answer: set, quantity, value, allowed relative error.
cat("# Made by refdata_normality.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
set.seed(20261204)
one <- function(name, x, tol = c("1e-13", "1e-10")) {
  cat("readings", name, "ref", sprintf("%.17g", x), "\n", sep = " ")
  s <- shapiro.test(x)
  cat(name, "w", sprintf("%.17g", s$statistic), tol[1], "\n")
  cat(name, "p", sprintf("%.17g", s$p.value), tol[2], "\n")
}
for (n in c(3, 4, 5, 6, 7, 9, 10, 11, 12, 13, 20, 49, 50, 200, 1000)) {
  one(paste0("N", n), round(rnorm(n, 12, 0.02), 3))
  one(paste0("E", n), round(rexp(n), 2))
}
for (n in c(3, 5, 8, 11, 12, 30)) one(paste0("T", n), round(rt(n, 1.2), 2)) # wild
one("TIES", c(1, 1, 1, 1, 2, 2, 3))
one("ONE", c(rep(0, 20), 1))
one("BASE", 1e6 + round(rnorm(40), 2), c("1e-11", "1e-9")) # R does not take the base off first
one("N5000", round(rnorm(5000, 0, 100)))
