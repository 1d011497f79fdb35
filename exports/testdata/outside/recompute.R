# Welch's test on each characteristic of a record's sheet Readings, as LibreOffice converts it to csv.
# Usage: Rscript recompute.R READINGS.csv. Prints name, difference, 95 % interval, 90 % interval, df, p; tab separated.
options(digits = 15)
lines <- readLines(commandArgs(trailingOnly = TRUE)[1], encoding = "UTF-8")
start <- grep("^\"?Side\"?,", lines)[1]
d <- read.csv(text = lines[start:length(lines)], check.names = FALSE, stringsAsFactors = FALSE)
d <- d[d$State == "used", ]
for (name in unique(d$Characteristic)) {
  one <- d[d$Characteristic == name, ]
  x <- one$Value[one$Side == "reference"]
  y <- one$Value[one$Side == "candidate"]
  wide <- t.test(y, x)
  narrow <- t.test(y, x, conf.level = 0.9)
  cat(name, mean(y) - mean(x), wide$conf.int, narrow$conf.int, wide$parameter, wide$p.value, sep = "\t")
  cat("\n")
}
