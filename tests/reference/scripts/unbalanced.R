# Small trials with missing plots: makes unbalanced/*.csv and unbalanced/expected.json. Run from scripts/.
# Random effects: lmerTest::lmer, pbkrtest through emmeans and contestMD. Fixed effects: lm, car::Anova type III, emmeans.
# lmer's optimiser leaves relative errors of about 1e-7 in the variances and what follows from them.
suppressWarnings(suppressMessages({ library(lme4); library(lmerTest); library(pbkrtest); library(emmeans); library(jsonlite); library(car) }))
options(contrasts = c("contr.sum", "contr.poly"), warn = -1)
emm_options(msg.interaction = FALSE, msg.nesting = FALSE)
out <- list()
prepare <- function(name, d) {
  d <- cbind(plot = seq_len(nrow(d)), d); d$yield <- round(d$yield, 3)
  write.csv(d, paste0("../unbalanced/", name, ".csv"), row.names = FALSE, na = "", quote = FALSE)
  for (v in setdiff(names(d), c("plot", "yield"))) d[[v]] <- factor(as.character(d[[v]]))
  droplevels(d[!is.na(d$yield), ])
}
family <- function(m, by, ...) {
  e <- emmeans(m, by, ...); a <- as.data.frame(summary(e)); p <- as.data.frame(summary(pairs(e, adjust = "none")))
  label <- do.call(paste, c(lapply(by, function(v) as.character(a[[v]])), sep = ":")); ix <- t(combn(length(label), 2))
  list(means = data.frame(entry = label, mean = a$emmean, se = a$SE, df = a$df),
       gaps = data.frame(a = label[ix[, 1]], b = label[ix[, 2]], estimate = p$estimate, se = p$SE, df = p$df, p = p$p.value))
}
mixed <- function(name, kind, d, f, families) {
  u <- prepare(name, d); assign("u", u, envir = .GlobalEnv)
  m <- eval(bquote(lmerTest::lmer(.(f), data = u, control = lmerControl(optimizer = "nloptwrap", optCtrl = list(xtol_rel = 1e-14, ftol_rel = 1e-16, xtol_abs = 1e-13, ftol_abs = 1e-14, maxeval = 1e5)))))
  A <- attr(getME(m, "X"), "assign"); labels <- attr(terms(m), "term.labels")
  tests <- do.call(rbind, lapply(seq_along(labels), function(j) {
    w <- which(A == j); if (!length(w)) return(NULL)
    t <- contestMD(m, diag(length(A))[w, , drop = FALSE], ddf = "Kenward-Roger")
    data.frame(term = labels[j], df = t$NumDF, denDf = t$DenDF, f = t[["F value"]], p = t[["Pr(>F)"]])
  }))
  vc <- as.data.frame(VarCorr(m))
  out[[name]] <<- list(kind = kind, components = data.frame(name = vc$grp, variance = vc$vcov), anova = tests,
    families = lapply(families, function(by) family(m, by, lmer.df = "kenward-roger")))
}
fixed <- function(name, kind, d, f, families) {
  m <- lm(f, prepare(name, d)); a <- as.data.frame(car::Anova(m, type = 3)); a <- a[rownames(a) != "(Intercept)", ]
  out[[name]] <<- list(kind = kind, anova = data.frame(term = rownames(a), df = a$Df, ss = a[["Sum Sq"]], f = a[["F value"]], p = a[["Pr(>F)"]]),
    families = lapply(families, function(by) family(m, by)))
}
set.seed(11)
alpha <- function(missing) {
  d <- do.call(rbind, lapply(1:3, function(r) data.frame(rep = r, block = rep(1:4, each = 3), entry = sprintf("V%02d", sample(12)))))
  d$yield <- 6 + .5 * rnorm(12)[as.integer(substr(d$entry, 2, 3))] + .6 * rnorm(12)[(d$rep - 1) * 4 + d$block] + .4 * rnorm(36)
  d$yield[sample(36, missing)] <- NA; d
}
mixed("alpha-2-missing", "incomplete-blocks", alpha(2), yield ~ rep + entry + (1 | rep:block), list(own = "entry"))
mixed("alpha-4-missing", "incomplete-blocks", alpha(4), yield ~ rep + entry + (1 | rep:block), list(own = "entry"))
field <- function(spread) {
  d <- do.call(rbind, lapply(1:3, function(r) data.frame(rep = r, row = rep(1:4, each = 4), col = rep(1:4, 4), entry = sprintf("V%02d", sample(16)))))
  d$yield <- 6 + .5 * rnorm(16)[as.integer(substr(d$entry, 2, 3))] + .6 * rnorm(12)[(d$rep - 1) * 4 + d$row] + spread * rnorm(12)[(d$rep - 1) * 4 + d$col] + .4 * rnorm(48)
  d$yield[sample(48, 3)] <- NA; d
}
mixed("rowcol-3-missing", "row-column", field(.5), yield ~ rep + entry + (1 | rep:row) + (1 | rep:col), list(own = "entry"))
split <- function(spread, missing) {
  d <- expand.grid(sow = c("s1", "s2", "s3"), harvest = c("h1", "h2", "h3"), block = 1:4)
  d$yield <- 5 + .5 * as.integer(d$sow) + .3 * as.integer(d$harvest) + rnorm(4)[d$block] * .4 + spread * rnorm(12)[as.integer(interaction(d$block, d$harvest))] + .3 * rnorm(36)
  d$yield[sample(36, missing)] <- NA; d
}
three <- list(own = "sow", harvest = "harvest", "harvest:sow" = c("harvest", "sow"))
mixed("split-2-missing", "split-plot", split(.5, 2), yield ~ block + harvest * sow + (1 | block:harvest), three)
mixed("split-3-missing", "split-plot", split(.005, 3), yield ~ block + harvest * sow + (1 | block:harvest), three)
d <- expand.grid(a = c("x", "y", "z"), b = 1:3, block = 1:3)
d$yield <- 5 + as.integer(d$a) * .2 + d$b * .3 + rnorm(27) * .4; d$yield[c(3, 11, 20, 25)] <- NA
fixed("factorial-4-missing", "factorial", d, yield ~ block + a * b, list(own = c("a", "b"), a = "a", b = "b"))
d <- expand.grid(row = 1:5, col = 1:5); d$entry <- LETTERS[(d$row + d$col) %% 5 + 1]
d$yield <- 10 + rnorm(25) + d$row * .3; d$yield[c(4, 17)] <- NA
fixed("latin-2-missing", "latin-square", d, yield ~ row + col + entry, list(own = "entry"))
versions <- sapply(c("lme4", "lmerTest", "pbkrtest", "emmeans", "car"), function(p) as.character(packageVersion(p)))
source <- list(data = "simulated (set.seed(11))", versions = as.list(c(R = as.character(getRversion()), versions)), script = "scripts/unbalanced.R")
write_json(list(source = source, cases = out), "../unbalanced/expected.json", digits = NA, dataframe = "rows", auto_unbox = TRUE)
