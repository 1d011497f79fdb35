# Values of R for package dist, a second outside witness beside exact.txt.
# Made 2026-12-01 with R 4.2.2:  Rscript refdata.R > r.txt
#
# The allowed error is R's own: its tails are good to about 1e-12, qt to 1e-11, qf
# to 1e-10 (60-digit values decide the cases in exact.txt), and qf for p = 1e-300 with 1e6 and 1e6 degrees of freedom is wrong in
# the second digit (0.9485; the 60-digit value is 0.9286), so such corners
# are left to exact.txt.
out <- function(name, value, allowed, ...) {
  args <- sapply(list(...), function(a) sprintf("%.17g", a))
  cat(name, args, sprintf("%.17g", value), allowed, sep = " ")
  cat("\n")
}
cat("# Made by refdata.R (2026-12-01, ", R.version.string, ").\n", sep = "")
cat("# function, arguments, value, allowed relative error\n")
dfs <- c(0.5, 1, 2, 3.8149, 7.03055995988, 9, 14.164598953, 21.5630439, 26.7484787582315, 136.874976673, 478, 12345.6, 1e6)
for (df in dfs) {
  for (t in c(1e-9, 1e-4, 0.3, 1, 1.25716199, 2, 4, 9, 25)) {
    p <- pt(t, df, lower.tail = FALSE)
    if (p > 1e-290) out("StudentUpper", p, "1e-12", t, df)
    out("StudentLower", pt(t, df), "1e-14", t, df)
  }
  for (p in c(1e-12, 1e-5, 0.001, 0.025, 0.05, 0.25, 0.45, 0.9, 0.95, 0.99))
    out("StudentQuantile", qt(p, df), "1e-11", p, df)
}
pairs <- list(c(1, 1), c(2, 9), c(11, 11), c(8, 10), c(19, 19), c(14, 14), c(239, 239), c(1e5, 3), c(3, 1e5))
for (d in pairs) {
  for (f in c(0.01, 0.3, 0.9, 1, 1.1, 2.5, 7, 40)) {
    lower <- pf(f, d[1], d[2])
    upper <- pf(f, d[1], d[2], lower.tail = FALSE)
    if (lower > 1e-290) out("FLower", lower, "1e-11", f, d[1], d[2])
    if (upper > 1e-290) out("FUpper", upper, "1e-11", f, d[1], d[2])
  }
  for (p in c(0.001, 0.025, 0.05, 0.5, 0.95, 0.975, 0.999))
    out("FQuantile", qf(p, d[1], d[2]), "2e-10", p, d[1], d[2])
}
for (z in c(-37, -20, -8, -3, -1, -0.1, 0, 0.5, 2, 6)) {
  out("NormalLower", pnorm(z), "1e-13", z)
  out("NormalUpper", pnorm(z), "1e-13", -z)
}
for (p in c(1e-300, 1e-50, 1e-9, 0.005, 0.05, 0.1, 0.45, 0.5, 0.8, 0.9, 0.95, 0.99, 0.9999))
  out("NormalQuantile", qnorm(p), "1e-14", p)
