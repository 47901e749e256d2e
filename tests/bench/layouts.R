# The same list of statistics by R, as a statistician would script it without loops over cells, timed part by part.
# Usage: Rscript layouts.R FILE LEVEL|- TURNS; columns lab, material, value and, where given, the inner level.
# All is done TURNS times in one process, and each part prints the seconds of every turn.
args <- commandArgs(trailingOnly = TRUE)
level <- if (args[2] != "-") args[2] else NULL
columns <- c(lab = "character", material = "character", value = "numeric")
if (!is.null(level)) columns[level] <- "character"
clock <- function() as.numeric(Sys.time())
parts <- list()
lap <- function(name) { now <- clock(); parts[[name]] <<- c(parts[[name]], now - last); last <<- clock() }
alphas <- c(.005, .01, .05)

for (turn in seq_len(as.integer(args[3]))) {
  last <- clock()
  d <- read.csv(args[1], colClasses = columns)
  if (anyNA(d$value)) d <- d[!is.na(d$value), ]
  lap("reading")

  m <- match(d$material, unique(d$material)); l <- match(d$lab, unique(d$lab)); labs <- max(l)
  code <- (m - 1) * labs + l
  n.all <- tabulate(code, max(m) * labs); used <- which(n.all > 0)
  cell <- match(code, used); n <- n.all[used]; of <- (used - 1) %/% labs + 1
  total <- function(x, g) as.vector(rowsum(x, g))
  y <- total(d$value, cell) / n
  ss <- total((d$value - y[cell])^2, cell); nu <- n - 1; s <- sqrt(ss / nu)
  p <- tabulate(of); N <- total(n, of); NU <- total(nu, of)
  grand <- total(n * y, of) / N; plain <- total(y, of) / p
  sr2 <- total(ss, of) / NU; msl <- total(n * (y - grand[of])^2, of) / (p - 1)
  nbar <- (N - total(n^2, of) / N) / (p - 1); raw <- (msl - sr2) / nbar; sR2 <- pmax(0, raw) + sr2
  limits <- 2.8 * sqrt(cbind(sr2, sR2))
  sy <- sqrt(total((y - plain[of])^2, of) / (p - 1)); h <- (y - plain[of]) / sy[of]; k <- s / sqrt(sr2)[of]
  h.critical <- sapply(alphas, function(a) { t <- qt(a / 2, p - 2, lower.tail = FALSE); (p - 1) * t / sqrt(p * (t^2 + p - 2)) })
  # One quantile for each pair of degrees of freedom, not one a cell.
  key <- nu + NU[of] * (max(nu) + 1); known <- !duplicated(key); place <- match(key, key[known]); pairs <- cbind(nu, NU[of])[known, , drop = FALSE]
  k.critical <- sapply(alphas, function(a) {
    f <- qf(a, pairs[, 1], pairs[, 2] - pairs[, 1], lower.tail = FALSE); sqrt(f * pairs[, 2] / (pairs[, 1] * f + pairs[, 2] - pairs[, 1]))[place] })
  sorted <- order(of, s^2); top <- sorted[cumsum(p)]; C <- s[top]^2 / total(s^2, of); nt <- nu[top]
  C.critical <- sapply(c(.05, .01), function(a) { f <- qf(a / p, nt, (p - 1) * nt, lower.tail = FALSE); f / (f + p - 1) })
  C.p <- pmin(1, p * pf((p - 1) * C / (1 - C), nt, (p - 1) * nt, lower.tail = FALSE))
  o <- order(of, y); ends <- cumsum(p); starts <- ends - p + 1; z <- y[o]; sq <- (p - 1) * sy^2
  G <- cbind(z[ends] - plain, plain - z[starts]) / sy
  G.critical <- sapply(c(.05, .01), function(a) { t <- qt(a / (2 * p), p - 2, lower.tail = FALSE); (p - 1) / sqrt(p) * sqrt(t^2 / (p - 2 + t^2)) })
  G.p <- pmin(1, 2 * p * pt(sqrt(p * (p - 2) * G^2 / ((p - 1)^2 - p * G^2)), p - 2, lower.tail = FALSE))
  without <- function(i, j) { a <- z[i] - plain; b <- z[j] - plain; (sq - a^2 - b^2 - (a + b)^2 / (p - 2)) / sq }
  GG <- cbind(without(ends, ends - 1), without(starts, starts + 1))
  F <- msl / sr2; F.p <- pf(F, p - 1, NU, lower.tail = FALSE)
  interval <- sqrt(cbind(NU * sr2 / qchisq(.025, NU, lower.tail = FALSE), NU * sr2 / qchisq(.025, NU)))
  lap("tests")

  means <- split(y, of); spreads <- split(s, of); dfs <- split(nu, of)
  for (j in seq_along(means)) {
    x <- means[[j]]; a <- median(x); b <- 1.483 * median(abs(x - a))
    if (b > 0) repeat {
      clipped <- pmin(pmax(x, a - 1.5 * b), a + 1.5 * b); a2 <- mean(clipped); b2 <- 1.134 * sd(clipped)
      still <- max(abs(a2 - a), abs(b2 - b)) < 1e-12 * b; a <- a2; b <- b2; if (still) break
    }
    w <- spreads[[j]]; v <- dfs[[j]][1]; eta <- sqrt(qchisq(.9, v) / v)
    xi <- 1 / sqrt(pchisq(v * eta^2, v + 2) + .1 * eta^2); g <- median(w)
    if (g > 0) repeat { g2 <- xi * sqrt(mean(pmin(w, eta * g)^2)); still <- abs(g2 - g) < 1e-12 * g; g <- g2; if (still) break }
  }
  lap("robust")

  suppressMessages(library(lme4)); last <- clock()
  form <- if (is.null(level)) value ~ 1 + (1 | lab) else as.formula(sprintf("value ~ 1 + (1 | lab/%s)", level))
  fits <- lapply(split(d, m), function(x) suppressMessages(lmer(form, data = x)))
  deviance <- sum(sapply(fits, REMLcrit))
  lap("reml")
}
peak <- as.numeric(sub("[^0-9]*([0-9]+).*", "\\1", grep("VmHWM", readLines("/proc/self/status"), value = TRUE))) / 1024
for (name in names(parts)) cat(name, sprintf("%.5f", parts[[name]]), "\n")
cat(sprintf("peak %.0f", peak), sprintf("deviance %.10f", deviance), sprintf("check %.12g", sum(sR2) + sum(C) + sum(G)), sep = "\n")
