# R's answers for generated readings. usage: Rscript outside.R LOTS.tsv
# Each line of LOTS.tsv: id, kind, decimals, lower limit, upper limit, margin, alpha, reference, candidate (readings parted by spaces;
# of an attribute parts and failed parts). Prints id, quantity, value with 17 digits, a tab between. What R refuses is left out.
say <- function(id, quantity, value) if (length(value) == 1 && is.finite(value)) cat(id, "\t", quantity, "\t", sprintf("%.17g", value), "\n", sep = "")
quiet <- function(e) tryCatch(suppressWarnings(e), error = function(e) NULL)
numbers <- function(text) as.numeric(strsplit(text, " ", fixed = TRUE)[[1]])

means <- function(id, name, r, c, m, alpha, ...) {
  two <- quiet(t.test(c, r, conf.level = 1 - alpha, ...))
  if (is.null(two)) return()
  low <- t.test(c, r, mu = -m, alternative = "greater", ...)
  high <- t.test(c, r, mu = m, alternative = "less", ...)
  narrow <- t.test(c, r, conf.level = 1 - 2 * alpha, ...)
  say(id, paste(name, "se"), two$stderr)
  say(id, paste(name, "df"), two$parameter)
  say(id, paste(name, "t"), two$statistic)
  say(id, paste(name, "p two-sided"), two$p.value)
  say(id, paste(name, "difference lower"), two$conf.int[[1]])
  say(id, paste(name, "difference upper"), two$conf.int[[2]])
  say(id, paste(name, "p lower"), low$p.value)
  say(id, paste(name, "p upper"), high$p.value)
  say(id, paste(name, "t lower"), low$statistic)
  say(id, paste(name, "t upper"), high$statistic)
  say(id, paste(name, "interval lower"), narrow$conf.int[[1]])
  say(id, paste(name, "interval upper"), narrow$conf.int[[2]])
}

sample <- function(id, side, x) {
  q <- quantile(x, c(0, 0.25, 0.5, 0.75, 1), type = 7, names = FALSE)
  for (i in 1:5) say(id, paste(side, c("min", "q1", "median", "q3", "max")[[i]]), q[[i]])
  say(id, paste(side, "mean"), mean(x))
  if (length(x) > 1 && any(x != x[[1]])) say(id, paste(side, "sd"), sd(x))
  w <- quiet(shapiro.test(x))
  if (!is.null(w)) {
    say(id, paste(side, "shapiro w"), w$statistic)
    if (w$p.value > 1e-12) say(id, paste(side, "shapiro p"), w$p.value) # of 3 readings it is a difference of angles
  }
  n <- length(x)
  g <- max(abs(x - mean(x))) / sd(x)
  if (n > 2 && is.finite(g) && any(x != x[[1]])) {
    rest <- (n - 1)^2 - n * g^2
    say(id, paste(side, "grubbs g"), g)
    if (rest > 0.02 * (n - 1)^2) say(id, paste(side, "grubbs p"), min(1, 2 * n * pt(sqrt(n * (n - 2) * g^2 / rest), n - 2, lower.tail = FALSE)))
  }
}

ranks <- function(id, r, c, alpha) {
  if (any(duplicated(c(r, c)))) return()
  if (length(r) * length(c) > 2500) return()
  w <- quiet(wilcox.test(c, r, exact = TRUE, conf.int = TRUE, conf.level = 1 - 2 * alpha))
  if (is.null(w)) return()
  say(id, "ranks u", w$statistic)
  say(id, "ranks p", w$p.value)
  say(id, "ranks shift", w$estimate)
  # Where no interval has the level R gives the widest; where a tail is alpha itself, rounding decides.
  tails <- pwilcox(0:(length(r) * length(c)), length(c), length(r))
  if (tails[[1]] < alpha && min(abs(tails - alpha)) > 1e-9) {
    say(id, "ranks lower", w$conf.int[[1]])
    say(id, "ranks upper", w$conf.int[[2]])
  }
}

signed <- function(id, r, c, alpha, decimals) {
  d <- c - r
  if (decimals <= 12) d <- round(d, decimals)
  if (any(d == 0) || any(duplicated(abs(d))) || length(d) > 45) return()
  w <- quiet(wilcox.test(d, exact = TRUE, conf.int = TRUE, conf.level = 1 - 2 * alpha))
  if (is.null(w)) return()
  say(id, "signed v", w$statistic)
  say(id, "signed p", w$p.value)
  say(id, "signed shift", w$estimate)
  tails <- psignrank(0:(length(d) * (length(d) + 1) / 2), length(d))
  if (tails[[1]] < alpha && min(abs(tails - alpha)) > 1e-9) {
    say(id, "signed lower", w$conf.int[[1]])
    say(id, "signed upper", w$conf.int[[2]])
  }
}

for (line in readLines(commandArgs(TRUE)[[1]])) {
  f <- strsplit(line, "\t", fixed = TRUE)[[1]]
  id <- f[[1]]
  decimals <- as.integer(f[[3]])
  m <- as.numeric(f[[6]])
  alpha <- as.numeric(f[[7]])
  r <- numbers(f[[8]])
  c <- numbers(f[[9]])
  if (f[[2]] == "attribute") {
    say(id, "fisher", fisher.test(matrix(c(r[[2]], r[[1]] - r[[2]], c[[2]], c[[1]] - c[[2]]), 2))$p.value)
    next
  }
  sample(id, "reference", r)
  sample(id, "candidate", c)
  means(id, "welch", r, c, m, alpha)
  means(id, "pooled", r, c, m, alpha, var.equal = TRUE)
  if (all(c(r, c) > 0)) {
    w <- quiet(t.test(log(c), log(r), conf.level = 1 - 2 * alpha))
    if (!is.null(w)) {
      say(id, "log estimate", exp(w$estimate[[1]] - w$estimate[[2]]))
      say(id, "log df", w$parameter)
      say(id, "log lower", exp(w$conf.int[[1]]))
      say(id, "log upper", exp(w$conf.int[[2]]))
      say(id, "log p lower", t.test(log(c), log(r), mu = log(0.8), alternative = "greater")$p.value)
      say(id, "log p upper", t.test(log(c), log(r), mu = log(1.25), alternative = "less")$p.value)
    }
  }
  if (length(r) == length(c) && decimals > 12) means(id, "paired", r, c, m, alpha, paired = TRUE)
  if (length(r) == length(c)) signed(id, r, c, alpha, decimals)
  if (any(r != r[[1]]) && any(c != c[[1]])) {
    v <- var.test(c, r, conf.level = 1 - 2 * alpha)
    say(id, "spread f", v$statistic)
    # var.test forms the upper tail as 1 - the lower one
    say(id, "spread p", min(1, 2 * min(pf(v$statistic, length(c) - 1, length(r) - 1), pf(v$statistic, length(c) - 1, length(r) - 1, lower.tail = FALSE))))
    say(id, "spread lower", sqrt(v$conf.int[[1]]))
    say(id, "spread upper", sqrt(v$conf.int[[2]]))
  }
  ranks(id, r, c, alpha)
}
