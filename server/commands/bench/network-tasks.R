# The same networks in R, packages loaded and one warm-up call first: prints "key median-seconds".
suppressWarnings(suppressMessages({
  library(lme4)
  library(metafor)
}))
options(warn = -1)
folder <- commandArgs(TRUE)[1]
read <- function(name) {
  d <- read.csv(file.path(folder, paste0(name, ".csv")))
  for (f in c("entry", "site", "year")) d[[f]] <- factor(d[[f]])
  d$env <- interaction(d$site, d$year, drop = TRUE)
  d
}
time <- function(key, f, runs) {
  f()
  seconds <- replicate(runs, system.time(f())[["elapsed"]])
  cat(key, sprintf("%.6g", median(seconds)), "\n")
}
weighted <- function(d) suppressMessages(lmer(mean ~ entry + env + (1 | entry:site) + (1 | entry:year), d, weights = 1 / variance, control = lmerControl(calc.derivs = FALSE)))
table <- read("table-12x20")
time("table-12x20", function() weighted(table), 7)
sparse <- read("sparse-30x24")
sparse$es <- interaction(sparse$entry, sparse$site)
sparse$ey <- interaction(sparse$entry, sparse$year)
sparse$cell <- interaction(sparse$entry, sparse$env)
X <- cbind(model.matrix(~ entry - 1, sparse), model.matrix(~ env, sparse)[, -1])
time("sparse-30x24", function() rma.mv(mean, variance, mods = X, intercept = FALSE, random = list(~ 1 | es, ~ 1 | ey, ~ 1 | cell), data = sparse, sparse = TRUE), 3)
big <- read("big-60x200")
time("big-60x200", function() weighted(big), 1)
