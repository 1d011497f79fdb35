# The work of the rows of `go run ./cmd/dev bench` as one would do it in R.
#   Rscript bench.R "NAME OF A ROW"
# prints a line a way and run: name, what was used, seconds of processor time a thing. A row that R has nothing for prints nothing.
row <- commandArgs(trailingOnly = TRUE)[1]
out <- function(what, seconds) cat(row, "\t", what, "\t", format(seconds, digits = 6), "\n", sep = "")
processor <- function(do) sum(system.time(do(), gcFirst = TRUE)[c("user.self", "sys.self")])
timed <- function(what, do, things = 1, runs = 3) {
  do() # warm
  one <- processor(do)
  calls <- max(1, min(1e6, ceiling(0.1 / max(one, 1e-6))))
  for (run in seq_len(runs)) {
    took <- processor(function() for (i in seq_len(calls)) do())
    out(what, max(took, 1e-4) / calls / things)
  }
}
once <- function(what, do, things = 1) out(what, processor(do) / things)
set.seed(1)
lot <- function(n, mean = 12, decimals = 6) round(rnorm(n, mean, 0.01), decimals)
n_in <- function() as.integer(gsub(",", "", sub(".*2 x ([0-9,]+).*", "\\1", row)))

points <- 240
df <- rep_len(c(3, 9, 22, 57.3, 198, 1987.4), points)
p <- rep_len(rep(c(0.0005, 0.005, 0.025, 0.05, 0.1, 0.3, 0.7, 0.975), each = 6), points)
i <- seq_len(points) - 1
t <- 0.1 + (i %% 17) / 3

welch_all <- function(x, y) { # columns are characteristics
  n <- nrow(x)
  a <- colSums((x - rep(colMeans(x), each = n))^2) / (n - 1) / n
  b <- colSums((y - rep(colMeans(y), each = n))^2) / (n - 1) / n
  dof <- (a + b)^2 / (a^2 / (n - 1) + b^2 / (n - 1))
  2 * pt(-abs(colMeans(y) - colMeans(x)) / sqrt(a + b), dof)
}

# The exact power of two one-sided tests, by R's own quadrature over the standard deviation.
tost_power <- function(n, sd, shift, margin, alpha = 0.05) {
  dof <- 2 * n - 2
  se <- sd * sqrt(2 / n)
  crit <- qt(1 - alpha, dof)
  integrate(function(s) {
    (pnorm((margin - shift) / se - crit * s) - pnorm((-margin - shift) / se + crit * s)) * 2 * dof * s * dchisq(dof * s^2, dof)
  }, 0, margin / se / crit, rel.tol = 1e-10)$value
}

# Of each characteristic the main figures of a comparison: means, spread, ranks, normality.
figures <- function(k, n) {
  x <- matrix(round(rnorm(k * n, 100, 2), 3), n)
  y <- matrix(round(rnorm(k * n, 100.5, 2), 3), n)
  function() for (j in seq_len(k)) {
    t.test(y[, j], x[, j], conf.level = 0.9)
    var.test(y[, j], x[, j], conf.level = 0.9)
    suppressWarnings(wilcox.test(y[, j], x[, j], conf.int = TRUE, conf.level = 0.9))
    shapiro.test(x[, j])
    shapiro.test(y[, j])
  }
}

if (row == "Welch, two-sided p, 1,000 characteristics x 2 x 1,000 readings") {
  x <- matrix(lot(1e6), 1000)
  y <- matrix(lot(1e6, 12.001), 1000)
  timed("colSums and pt", function() welch_all(x, y))
  timed("t.test", function() for (j in 1:1000) t.test(y[, j], x[, j]))
} else if (row == "Welch, both tests, p and interval, one pair of lots, 2 x 30") {
  x <- lot(30); y <- lot(30, 12.001)
  timed("t.test", function() t.test(y, x, conf.level = 0.9))
} else if (grepl("^Shapiro", row)) {
  x <- lot(if (grepl("5,000", row)) 5000 else 100)
  timed("shapiro.test", function() shapiro.test(x))
} else if (row == "t CDF") {
  timed("pt", function() pt(t, df, lower.tail = FALSE), points)
} else if (row == "t quantile") {
  timed("qt", function() qt(p, df), points)
} else if (row == "F quantile") {
  timed("qf", function() qf(p, df, 7 + i), points)
} else if (row == "chi-square quantile") {
  timed("qchisq", function() qchisq(p, df), points)
} else if (row == "noncentral t CDF") {
  timed("pt, to 1e-10", function() pt(t, df, 2 + t / 3), points)
} else if (row == "noncentral t quantile") {
  timed("qt", function() qt(p, df, 2 + t / 3), points)
} else if (row == "TOST power, 2 x 50") {
  timed("integrate", function() tost_power(50, 0.01, 0.001, 0.006))
} else if (row == "TOST size, 71 a lot") {
  timed("uniroot and integrate", function() ceiling(uniroot(function(n) tost_power(n, 0.01, 0.001, 0.006) - 0.9, c(5, 1000), tol = 1e-3)$root))
} else if (row == "power curve, 200 shifts, 2 x 50") {
  timed("integrate", function() for (s in 0:199) tost_power(50, 0.01, 0.006 * s / 200, 0.006))
} else if (row == "tolerance factor, two-sided, 30 readings") {
  half <- function(x) uniroot(function(r) pnorm(x + r) - pnorm(x - r) - 0.95, c(0, 20), tol = 1e-12)$root
  sure <- function(k) integrate(function(z) 2 * dnorm(z) * pchisq(29 * sapply(z / sqrt(30), half)^2 / k^2, 29, lower.tail = FALSE), 0, 8, rel.tol = 1e-8)$value
  timed("uniroot and integrate", function() uniroot(function(k) sure(k) - 0.95, c(2, 4), tol = 1e-8)$root, runs = 1)
} else if (grepl("^BCa of medians", row)) {
  x <- lot(1000); y <- lot(1000, 12.001)
  once("loop of sample.int, no interval", function() replicate(10000, median(y[sample.int(1000, replace = TRUE)]) - median(x[sample.int(1000, replace = TRUE)])))
} else if (grepl("^BCa of means.*one core", row)) {
  x <- lot(1000); y <- lot(1000, 12.001)
  once("loop of sample.int, no interval", function() replicate(10000, mean(y[sample.int(1000, replace = TRUE)]) - mean(x[sample.int(1000, replace = TRUE)])))
} else if (grepl("^permutation", row)) {
  all <- c(lot(100), lot(100, 12.001))
  once("loop of sample.int", function() for (k in 1:100000) sum(all[sample.int(200, 100)]))
} else if (grepl("^Mann", row)) {
  n <- n_in()
  if (n > 20000) {
    cat(row, "\tnot run\t10^12 differences\n", sep = "")
  } else {
    x <- lot(n, 12, 15); y <- lot(n, 12.001, 15)
    once("wilcox.test, to 1e-4", function() wilcox.test(y, x, conf.int = TRUE, conf.level = 0.9))
    if (n <= 2000) once("wilcox.test, to 1e-9", function() wilcox.test(y, x, conf.int = TRUE, conf.level = 0.9, tol.root = 1e-9))
  }
} else if (grepl("^exact U", row)) {
  n <- as.integer(sub(".*2 x ([0-9]+) .*", "\\1", row))
  if (n > 100) {
    cat(row, "\tnot run\tover ", if (n > 200) "2 min, 2.9 GiB" else "14 s, 0.6 GiB", "\n", sep = "")
  } else {
    x <- lot(n, 12, 15); y <- lot(n, 12.001, 15)
    once("wilcox.test(exact)", function() wilcox.test(y, x, exact = TRUE, conf.int = TRUE, conf.level = 0.9))
  }
} else if (grepl("^Compare.* 200 ", row)) {
  once("t, F, Wilcoxon, Shapiro alone", figures(200, 100))
} else if (grepl("^Compare.* 2,000 ", row)) {
  once("t, F, Wilcoxon, Shapiro alone, of 20, times 100", figures(20, 1000), 1 / 100)
} else if (grepl("^start to exit", row)) {
  r <- file.path(R.home("bin"), "Rscript")
  for (run in 1:5) out("Rscript -e 1", system.time(system2(r, c("-e", "1"), stdout = FALSE))[["elapsed"]])
}
