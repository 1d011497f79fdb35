# Two proportions: R's fisher.test and prop.test, and the score interval by
# maximising the likelihood.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata_proportions.R > proportions.txt
#
# One line an answer: set, quantity, value, allowed relative error. The readings
# are n and failed of the two lots. Score, interval: Miettinen & Nurminen 1985, the
# likely fractions by optimize and Newton's steps, the ends by uniroot.
cat("# Made by refdata_proportions.R (2026-12-01, ", R.version.string, ").\n# set, quantity, value, allowed relative error\n", sep = "")
out <- function(set, what, value, tol) cat(set, what, sprintf("%.17g", value), format(tol), "\n", sep = " ")
score <- function(x1, n1, x2, n2, d) {
  lo <- max(0, -d); hi <- min(1, 1 - d)
  ll <- function(r) { t <- function(k, s) if (k == 0) 0 else k * log(s); t(x1, r) + t(n1 - x1, 1 - r) + t(x2, r + d) + t(n2 - x2, 1 - r - d) }
  r <- optimize(ll, c(lo, hi), maximum = TRUE, tol = 1e-12)$maximum
  t <- function(k, s) if (k == 0) 0 else k / s
  s2 <- function(k, s) if (k == 0) 0 else k / s^2
  for (i in 1:20) {
    g <- t(x1, r) - t(n1 - x1, 1 - r) + t(x2, r + d) - t(n2 - x2, 1 - r - d)
    h <- -(s2(x1, r) + s2(n1 - x1, 1 - r) + s2(x2, r + d) + s2(n2 - x2, 1 - r - d))
    new <- r - g / h
    if (!is.finite(new) || new <= lo || new >= hi) break
    r <- new
  }
  ends <- c(lo, hi)[is.finite(c(ll(lo), ll(hi)))]
  for (e in ends) if (ll(e) >= ll(r)) r <- e
  cc <- r + d; n <- n1 + n2
  (x2 / n2 - x1 / n1 - d) / sqrt((r * (1 - r) / n1 + cc * (1 - cc) / n2) * n / (n - 1))
}
cases <- rbind(c(80, 48, 70, 56), c(10, 3, 10, 9), c(34, 1, 34, 7), c(29, 0, 56, 5), c(200, 4, 150, 6),
               c(20, 0, 10, 0), c(500, 1, 500, 0), c(12, 6, 17, 6), c(1000, 30, 800, 41), c(5, 5, 6, 2), c(3000, 1500, 2500, 1300))
for (i in seq_len(nrow(cases))) {
  n1 <- cases[i, 1]; x1 <- cases[i, 2]; n2 <- cases[i, 3]; x2 <- cases[i, 4]; name <- paste0("P", i)
  cat("readings", name, "ref", n1, x1, "\n"); cat("readings", name, "cand", n2, x2, "\n")
  out(name, "fisher", fisher.test(rbind(c(x1, n1 - x1), c(x2, n2 - x2)))$p.value, 1e-11)
  for (d in c(-0.3, -0.1, -0.02, 0.02, 0.1, 0.3)) out(name, paste0("score.", d), score(x1, n1, x2, n2, d), 1e-12)
  for (level in c(0.9, 0.95)) {
    w <- function(x, n) prop.test(x, n, conf.level = level, correct = FALSE)$conf.int
    a <- suppressWarnings(w(x1, n1)); b <- suppressWarnings(w(x2, n2)); d <- x2 / n2 - x1 / n1
    out(name, paste0("newcombe.", level, ".lower"), d - sqrt((x2 / n2 - b[1])^2 + (a[2] - x1 / n1)^2), 1e-11)
    out(name, paste0("newcombe.", level, ".upper"), d + sqrt((b[2] - x2 / n2)^2 + (x1 / n1 - a[1])^2), 1e-11)
    z <- qnorm((1 + level) / 2)
    out(name, paste0("mn.", level, ".lower"), uniroot(function(e) score(x1, n1, x2, n2, e) - z, c(-1 + 1e-9, d - 1e-9), tol = 1e-13)$root, 1e-10)
    out(name, paste0("mn.", level, ".upper"), uniroot(function(e) score(x1, n1, x2, n2, e) + z, c(d + 1e-9, 1 - 1e-9), tol = 1e-13)$root, 1e-10)
  }
}
