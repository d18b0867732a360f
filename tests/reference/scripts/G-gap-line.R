# The gap A - B of case E-meta-k20 as a line over the trials' mean yields: mixed-effects meta-regression by REML.
# Writes ../open/G-gap-line/{effects.csv,expected.json}. Run from this folder; needs metafor and jsonlite.
suppressMessages(library(metafor)); options(digits = 17)
plots <- read.csv("../open/E-meta-k20/plots.csv"); effects <- read.csv("../open/E-meta-k20/effects.csv")
effects$trial_mean <- tapply(plots$yield, plots$env, mean)[effects$env]
fit <- function(d, test) { f <- rma(y, v, mods = ~ trial_mean, data = d, method = "REML", test = test, control = list(threshold = 1e-14, maxiter = 10000))
  p <- predict(f, newmods = c(6, 7, 8.5)); list(intercept = f$beta[1], slope = f$beta[2], slope_se = f$se[2], slope_p = f$pval[2], tau2 = f$tau2, at = c(6, 7, 8.5), gap = p$pred, gap_se = p$se) }
dir.create("../open/G-gap-line", showWarnings = FALSE)
write.csv(effects[c("env", "trial_mean", "y", "v")], "../open/G-gap-line/effects.csv", row.names = FALSE, quote = FALSE)
d <- read.csv("../open/G-gap-line/effects.csv")
out <- list(case = "G-gap-line", source = list(data = "effects of case E-meta-k20, trial_mean = plain mean of its plots", functions = "metafor::rma(y, v, mods = ~ trial_mean, method = 'REML'), test z and knha; predict.rma", versions = list(R = paste(R.version$major, R.version$minor, sep = "."), metafor = as.character(packageVersion("metafor"))), script = "scripts/G-gap-line.R"),
  z = fit(d, "z"), knapp_hartung = fit(d, "knha"), last_eight = list(z = fit(d[13:20, ], "z"), knapp_hartung = fit(d[13:20, ], "knha")))
writeLines(jsonlite::toJSON(out, auto_unbox = TRUE, digits = NA, pretty = TRUE), "../open/G-gap-line/expected.json")
