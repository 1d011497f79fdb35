# R's own answers for groups: analysis of variance and stratified differences.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_groups.R > groups.txt
#
# One line an answer: set, quantity, value, allowed relative error. Readings are
# listed with the sizes of their groups: k, n[1..k], then the readings. The
# stratified difference has no function in base R; with equal standard deviations
# it is the coefficient of lm(y ~ group + lot), which gives the value, and its
# standard error is written out here.
cat("# Made by refdata_groups.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
set.seed(20261206)
out <- function(set, what, value, tol = 1e-11) cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
lists <- function(name, lot, g) cat("readings", name, lot, length(g), lengths(g), sprintf("%.17g", unlist(g)), "\n", sep = " ")
draw <- function(sizes, between, within, at = 12) lapply(sizes, function(n) round(at + rnorm(1, 0, between) + rnorm(n, 0, within), 3))
sets <- list(
  A = list(draw(c(4, 7, 5), 0.02, 0.01), draw(c(6, 3, 8), 0.02, 0.02)),
  B = list(draw(c(2, 1, 3, 10, 4), 0, 0.01), draw(c(1, 5, 2, 2, 9), 0.01, 0.01)),
  C = list(draw(c(20, 30), 5, 1, 1000), draw(c(25, 15), 5, 2, 1000))
)
for (name in names(sets)) {
  r <- sets[[name]][[1]]; c <- sets[[name]][[2]]
  lists(name, "ref", r); lists(name, "cand", c)
  f <- function(g) factor(rep(seq_along(g), lengths(g)))
  for (lot in c("ref", "cand")) {
    g <- if (lot == "ref") r else c
    y <- unlist(g) - mean(unlist(g))
    a <- anova(lm(y ~ f(g)))
    out(name, paste0(lot, ".ssbetween"), a[1, 2]); out(name, paste0(lot, ".sswithin"), a[2, 2])
    out(name, paste0(lot, ".f"), a[1, 4]); out(name, paste0(lot, ".p"), a[1, 5])
    n <- lengths(g); n0 <- (sum(n) - sum(n^2) / sum(n)) / (length(n) - 1)
    out(name, paste0(lot, ".sdwithin"), sqrt(a[2, 3]))
    out(name, paste0(lot, ".sdbetween"), sqrt(max(0, (a[1, 3] - a[2, 3]) / n0)), 1e-9)
  }
  lot <- factor(c(rep(0, length(unlist(r))), rep(1, length(unlist(c)))))
  m <- lm(c(unlist(r), unlist(c)) ~ factor(c(f(r), f(c))) + lot)
  out(name, "strata.value", coef(m)[["lot1"]], 1e-9)
  n1 <- lengths(r); n2 <- lengths(c); w <- n1 * n2 / (n1 + n2)
  ss <- function(g) sum(sapply(g, function(x) sum((x - mean(x))^2))) / sum(lengths(g) - 1)
  v1 <- ss(r) * sum(w^2 / n1) / sum(w)^2; v2 <- ss(c) * sum(w^2 / n2) / sum(w)^2
  out(name, "strata.se", sqrt(v1 + v2)); out(name, "strata.df", (v1 + v2)^2 / (v1^2 / sum(n1 - 1) + v2^2 / sum(n2 - 1)))
}
