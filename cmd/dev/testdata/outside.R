# R's answer for one file of readings (columns characteristic, lot, value): Welch and the ratio of standard deviations.
# usage: Rscript outside.R READINGS.csv ; prints characteristic, quantity, value with 17 digits, a tab between.
d <- read.csv(commandArgs(TRUE)[[1]], colClasses = c("character", "character", "numeric"))
say <- function(name, quantity, value) cat(name, "\t", quantity, "\t", sprintf("%.17g", value), "\n", sep = "")
for (name in unique(d$characteristic)) {
  one <- d[d$characteristic == name, ]
  r <- one$value[one$lot == "reference"]
  c <- one$value[one$lot == "candidate"]
  w <- t.test(c, r, conf.level = 0.90)
  say(name, "reference mean", mean(r))
  say(name, "reference sd", sd(r))
  say(name, "candidate mean", mean(c))
  say(name, "candidate sd", sd(c))
  say(name, "df", w$parameter)
  say(name, "p two-sided", w$p.value)
  say(name, "decision lower", w$conf.int[[1]])
  say(name, "decision upper", w$conf.int[[2]])
  w95 <- t.test(c, r)
  say(name, "difference lower", w95$conf.int[[1]])
  say(name, "difference upper", w95$conf.int[[2]])
  f <- var.test(c, r, conf.level = 0.90)
  say(name, "sd ratio lower", sqrt(f$conf.int[[1]]))
  say(name, "sd ratio upper", sqrt(f$conf.int[[2]]))
}
