# R's p*, q* and ptukey at every point of the batch. Usage: Rscript distributions.R INPUT OUTPUT; input rows:
# function,side,argument,df1,df2 (df 0 where there is none); output: the same order, one value a row.
args <- commandArgs(trailingOnly = TRUE)
x <- read.csv(args[1], header = FALSE, col.names = c("what", "side", "at", "df1", "df2"))
lower <- x$side == "lower"
value <- numeric(nrow(x))
for (what in unique(x$what)) for (low in c(TRUE, FALSE)) {
  i <- x$what == what & lower == low
  value[i] <- switch(what,
    pnorm = pnorm(x$at[i], lower.tail = low), qnorm = qnorm(x$at[i], lower.tail = low),
    pt = pt(x$at[i], x$df1[i], lower.tail = low), qt = qt(x$at[i], x$df1[i], lower.tail = low),
    pchisq = pchisq(x$at[i], x$df1[i], lower.tail = low), qchisq = qchisq(x$at[i], x$df1[i], lower.tail = low),
    pf = pf(x$at[i], x$df1[i], x$df2[i], lower.tail = low), qf = qf(x$at[i], x$df1[i], x$df2[i], lower.tail = low),
    ptukey = ptukey(x$at[i], x$df1[i], x$df2[i], lower.tail = low))
}
write.csv(data.frame(value = sprintf("%.17g", value)), args[2], row.names = FALSE, quote = FALSE)
