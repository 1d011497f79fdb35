# Powers of R for package stats: power.t.test, its tails both counted (strict).
# Made 2026-12-01 with R 4.2.2:  Rscript refpower.R > power_r.txt
cat("# Made by refpower.R (2026-12-01, R 4.2.2).\n")
cat("# aim, type, n, shift, sd, alpha, power, allowed relative error\n")
for (type in c("two.sample", "paired"))
  for (n in c(2, 3, 5, 10, 20, 57, 400))
    for (shift in c(0.05, 0.4, 1, 2.5))
      for (alpha in c(0.001, 0.05, 0.2)) {
        for (alt in c("one.sided", "two.sided")) {
          p <- power.t.test(n = n, delta = shift, sd = 1.3, sig.level = alpha, type = type, alternative = alt, strict = TRUE)$power
          cat(if (alt == "one.sided") "higher" else "difference", type, n, shift, 1.3, alpha, sprintf("%.17g", p), "2e-9\n")
        }
      }
