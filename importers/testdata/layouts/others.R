# Writes openxlsx.xlsx from openpyxl.xlsx of some cases, here and in ../cells: the same cells as R's openxlsx writes them. (It
# does not read the texts of own.xlsx as they stand: it keeps the attribute of the white space in them.)
#
# Run in this directory: Rscript others.R   (needs the package openxlsx)
library(openxlsx)
cases <- c("l1", "l2", "l3", "l5-5", "l6", "l7-d2", "l9", "l10", "n01", "n02-wide", "n09", "n16", "n22", "n25", "n32", "tidy", "tidy-limits", "tidy-merged",
           "../cells/n05", "../cells/n06", "../cells/n11-2", "../cells/n12", "../cells/n23", "../cells/n35")
for (case in cases) {
  saveWorkbook(loadWorkbook(file.path(case, "openpyxl.xlsx")), file.path(case, "openxlsx.xlsx"), overwrite = TRUE)
}
