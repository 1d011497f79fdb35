# Writes data sets that come with R (package datasets) as R's own functions write them. Run in this directory: Rscript public.R
# sleep: Student (1908), Biometrika 6, 20. ToothGrowth: Crampton (1947). InsectSprays: Beall (1942). chickwts: McNeil (1977).
write.csv(sleep, "sleep.csv")
write.csv2(ToothGrowth, "toothgrowth.csv", row.names = FALSE)
if (requireNamespace("openxlsx", quietly = TRUE)) openxlsx::write.xlsx(sleep, "sleep-openxlsx.xlsx")
write.table(InsectSprays, "insectsprays.txt", row.names = FALSE, quote = FALSE)
write.table(chickwts, "chickwts.tsv", row.names = FALSE, sep = "\t")
capture.output(print(warpbreaks, row.names = FALSE), file = "warpbreaks.txt")
show <- function(name, x, y) {
  t <- t.test(y, x)
  cat(sprintf("%s %d %.15g %.15g %d %.15g %.15g %.15g %.15g %.15g\n", name, length(x), mean(x), sd(x), length(y), mean(y), sd(y), unname(t$statistic), unname(t$parameter), t$p.value))
}
sink("expected.txt")
cat("# by public.R in", R.version.string, ": file, then n, mean, sd of the reference and of the candidate, Welch's t, df, two-sided p\n")
show("sleep.csv", sleep$extra[sleep$group == 1], sleep$extra[sleep$group == 2])
show("toothgrowth.csv", ToothGrowth$len[ToothGrowth$supp == "OJ"], ToothGrowth$len[ToothGrowth$supp == "VC"])
show("insectsprays.txt", InsectSprays$count[InsectSprays$spray == "A"], InsectSprays$count[InsectSprays$spray == "F"])
show("chickwts.tsv", chickwts$weight[chickwts$feed == "soybean"], chickwts$weight[chickwts$feed == "sunflower"])
show("warpbreaks.txt", warpbreaks$breaks[warpbreaks$wool == "A"], warpbreaks$breaks[warpbreaks$wool == "B"])
sink()
