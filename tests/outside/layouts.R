# Analysis of variance (aov), REML (lme4) and Huber's proposal 2 (MASS) of every study of the batch.
# Usage: Rscript layouts.R INPUT OUTPUT; input rows: study,factors,f1,f2,f3,f4,value, each label whole, nested in no other.
suppressMessages({ library(lme4); library(MASS) })
args <- commandArgs(trailingOnly = TRUE)
rows <- read.csv(args[1], header = FALSE, colClasses = c(rep("character", 6), "numeric"))
names(rows) <- c("study", "factors", paste0("f", 1:4), "value")

# Iterated until nothing moves (MASS stops at thirty); and once with the standard's rounded factor in place of the exact one.
rewritten <- function(with) {
  text <- with(sub("1L:30L|1:30", "1:5000", deparse(body(hubers))))
  f <- hubers
  body(f) <- parse(text = paste(text, collapse = "\n"))[[1]]
  f
}
exact <- rewritten(identity)
rounded <- rewritten(function(text) { text[grepl("^ *beta <- ", text)] <- "    beta <- 1/1.134^2"; text })

out <- list()
say <- function(study, key, value) out[[length(out) + 1]] <<- data.frame(study, key, value = sprintf("%.17g", value))

for (study in unique(rows$study)) {
  d <- rows[rows$study == study, ]
  factors <- paste0("f", seq_len(as.integer(d$factors[1])))
  for (f in factors) d[[f]] <- factor(d[[f]], levels = unique(d[[f]]))
  # Centred for the sake of R's doubles; no variance hears of it, and the mean is put back.
  offset <- round(median(d$value)); d$y <- d$value - offset

  table <- summary(aov(as.formula(paste("y ~", paste(factors, collapse = " + "))), data = d))[[1]]
  for (i in seq_len(nrow(table))) {
    source <- trimws(rownames(table)[i])
    say(study, paste0("df ", source), table$Df[i]); say(study, paste0("ss ", source), table[["Sum Sq"]][i])
  }

  # A level that splits nothing has no component to estimate.
  groups <- sapply(factors, function(f) nlevels(d[[f]]))
  splits <- factors[groups > c(1, groups[-length(groups)]) & groups < nrow(d)]
  bars <- paste(sprintf("(1 | %s)", splits), collapse = " + ")
  control <- lmerControl(optimizer = "bobyqa", optCtrl = list(rhoend = 1e-12, maxfun = 1e5), calc.derivs = FALSE,
    check.nobs.vs.nlev = "ignore", check.nlev.gtr.1 = "ignore", check.nobs.vs.nRE = "ignore", check.conv.singular = "ignore")
  fit <- suppressMessages(lmer(as.formula(paste("y ~ 1 +", bars)), data = d, control = control))
  components <- as.data.frame(VarCorr(fit))
  for (i in seq_len(nrow(components))) say(study, paste0("reml ", components$grp[i]), components$vcov[i])
  say(study, "deviance", REMLcrit(fit))
  say(study, "reml mean", offset + fixef(fit)[[1]])

  means <- as.vector(tapply(d$y, d$f1, mean))
  if (length(means) >= 3) {
    robust <- rounded(means, tol = 1e-14); say(study, "huber mean", offset + robust$mu); say(study, "huber sd", robust$s)
    say(study, "huber exact sd", exact(means, tol = 1e-14)$s)
  }
  say(study, "mean", offset + mean(d$y)); say(study, "mean of means", offset + mean(means))
}
write.csv(do.call(rbind, out), args[2], row.names = FALSE, quote = FALSE)
