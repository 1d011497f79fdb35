# Every number of a record's sheets Readings (column Value) and Results, as readxl reads it, hexadecimal, row by row.
# Usage: Rscript readback.R RECORD.xlsx
suppressMessages(library(readxl))
file <- commandArgs(trailingOnly = TRUE)[1]
numbers <- function(d) {
  for (i in seq_len(nrow(d))) for (j in seq_len(ncol(d))) {
    x <- d[[j]][i]
    if (is.numeric(x) && !is.na(x)) cat(sprintf("%a\n", x))
  }
}
numbers(as.data.frame(read_excel(file, sheet = "Readings", skip = 2)["Value"]))
numbers(as.data.frame(suppressMessages(read_excel(file, sheet = "Results", skip = 5, col_names = FALSE))))
