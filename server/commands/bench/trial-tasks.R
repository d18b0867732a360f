# The same work in R, packages loaded and one warm-up call first: prints "key median-seconds".
suppressWarnings(suppressMessages({
  library(lme4)
  library(lmerTest)
  library(pbkrtest)
  library(emmeans)
}))
options(warn = -1)
emm_options(msg.interaction = FALSE, msg.nesting = FALSE, pbkrtest.limit = 20000)
folder <- commandArgs(TRUE)[1]
read <- function(name, factors) {
  d <- read.csv(file.path(folder, paste0(name, ".csv")))
  for (f in factors) d[[f]] <- factor(d[[f]])
  d
}
time <- function(key, f, runs) {
  f()
  seconds <- replicate(runs, system.time(f())[["elapsed"]])
  cat(key, sprintf("%.6g", median(seconds)), "\n")
}
rcbd <- read("rcbd-30x4", c("entry", "block"))
time("rcbd-30x4", function() {
  f <- lm(yield ~ block + entry, rcbd)
  anova(f)
  as.data.frame(summary(pairs(emmeans(f, "entry"), adjust = "none")))
}, 21)
time("rcbd-30x4-tukey", function() {
  f <- lm(yield ~ block + entry, rcbd)
  as.data.frame(summary(pairs(emmeans(f, "entry"), adjust = "tukey")))
}, 11)
alpha <- read("alpha-24x3", c("entry", "rep", "block"))
time("alpha-24x3", function() {
  f <- lme4::lmer(yield ~ rep + entry + (1 | rep:block), alpha)
  as.data.frame(summary(pairs(emmeans(f, "entry", lmer.df = "kenward-roger"), adjust = "none")))
}, 7)
# 100 entries row-column are left out: lmer with pbkrtest takes nearly three minutes for them
