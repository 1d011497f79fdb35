# What R gives for the points of a reference table: Rscript accuracy.R TABLE
# prints a line a point: a number, or - where R has no such function.
suppressWarnings({
  lines <- readLines(commandArgs(trailingOnly = TRUE)[1])
  fields <- strsplit(lines[!grepl("^#", lines) & nzchar(lines)], " +")
  of <- list(
    NormalLower = function(a) pnorm(a[1]), NormalUpper = function(a) pnorm(a[1], lower.tail = FALSE), NormalQuantile = function(a) qnorm(a[1]),
    StudentLower = function(a) pt(a[1], a[2]), StudentUpper = function(a) pt(a[1], a[2], lower.tail = FALSE),
    StudentTwoSided = function(a) 2 * pt(-abs(a[1]), a[2]), StudentQuantile = function(a) qt(a[1], a[2]),
    FLower = function(a) pf(a[1], a[2], a[3]), FUpper = function(a) pf(a[1], a[2], a[3], lower.tail = FALSE), FQuantile = function(a) qf(a[1], a[2], a[3]),
    ChiSquareLower = function(a) pchisq(a[1], a[2]), ChiSquareUpper = function(a) pchisq(a[1], a[2], lower.tail = FALSE), ChiSquareQuantile = function(a) qchisq(a[1], a[2]),
    NoncentralTLower = function(a) pt(a[1], a[2], a[3]), NoncentralTUpper = function(a) pt(a[1], a[2], a[3], lower.tail = FALSE),
    # qt inverts pt, whose absolute error is about 1e-12: for less it searches for minutes and finds nothing.
    NoncentralTQuantile = function(a) if (a[1] < 1e-13) NaN else qt(a[1], a[2], a[3]),
    # From tables of three decimals on people used this one; the exact factor is not in R itself.
    ToleranceFactorOneSided = function(a) qt(a[3], a[1] - 1, qnorm(a[2]) * sqrt(a[1])) / sqrt(a[1]))
  for (f in fields) {
    do <- of[[f[1]]]
    if (is.null(do)) cat("-\n") else {
      v <- do(as.numeric(f[2:(length(f) - 2)]))
      cat(if (is.nan(v) || is.na(v)) "NaN" else sprintf("%.17g", v), "\n")
    }
  }
})
