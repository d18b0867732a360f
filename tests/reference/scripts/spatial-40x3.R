# Two models of a field's trend by dense matrices: makes spatial/40x3/plots.csv and expected.json. Run from scripts/.
# 40 entries, three replicates of 10 x 4 plots as fixed blocks, AR1 x AR1 errors, two plots missing.
options(contrasts = c("contr.sum", "contr.poly"))
set.seed(5)
R <- 10; C <- 12; n <- R * C
d <- expand.grid(col = 1:C, row = 1:R)
d$rep <- rep(1:3, each = 40)
e <- c(sample(40), sample(40), sample(40))
d$entry <- sprintf("E%02d", e)
S <- kronecker(.7^abs(outer(1:R, 1:R, "-")), .5^abs(outer(1:C, 1:C, "-")))
d$yield <- round(7 + .4 * rnorm(40)[e] + as.vector(t(chol(S)) %*% rnorm(n)) * .6, 3)
d$plot <- 1:n
d$yield[c(17, 55)] <- NA
write.csv(d[, c("plot", "entry", "rep", "row", "col", "yield")], "../spatial/40x3/plots.csv", row.names = FALSE, na = "", quote = FALSE)

u <- d[!is.na(d$yield), ]
u$rep <- factor(u$rep); u$entry <- factor(u$entry)
X <- model.matrix(~ rep + entry, u); y <- u$yield
# restricted log-likelihood with half log|X'X| added; V known but for a factor (profiled) or wholly
restricted <- function(V, profile) {
  L <- chol(V); Xs <- backsolve(L, X, transpose = TRUE); ys <- backsolve(L, y, transpose = TRUE)
  q <- qr(Xs); rss <- sum(qr.resid(q, ys)^2); df <- nrow(X) - ncol(X)
  fit <- if (profile) df * (log(2 * pi * rss / df) + 1) else df * log(2 * pi) + rss
  -.5 * (fit + 2 * sum(log(diag(L))) + 2 * sum(log(abs(diag(qr.R(q))))) - as.numeric(determinant(crossprod(X))$modulus))
}
climb <- function(start, f) {
  g <- function(p) tryCatch(-f(p), error = function(e) 1e6)
  o <- optim(start, g, control = list(maxit = 5000, reltol = 1e-14))
  optim(o$par, g, method = "BFGS", control = list(reltol = 1e-16, maxit = 500))
}
correlation <- function(p) tanh(p[1])^abs(outer(u$row, u$row, "-")) * tanh(p[2])^abs(outer(u$col, u$col, "-"))
a <- climb(c(.5, .5), function(p) restricted(correlation(p), TRUE))
Vi <- solve(correlation(a$par)); Ph <- solve(t(X) %*% Vi %*% X); b <- Ph %*% t(X) %*% Vi %*% y
r <- y - X %*% b; s2 <- as.numeric(t(r) %*% Vi %*% r) / (nrow(X) - ncol(X))
cs <- contr.sum(40); l <- c(0, 0, 0, cs[1, ] - cs[2, ])

# random walks over rows and over columns by their cosine waves (12 longest; 5 x 5 for their product), mean variance 1
waves <- function(n, m) {
  W <- sapply(1:min(n - 1, m), function(k) sqrt(1 / (2 - 2 * cos(pi * k / n))) * sqrt(2 / n) * cos(pi * k * ((1:n) - .5) / n))
  W * sqrt(n / sum(W^2))
}
Zr <- waves(R, 12)[u$row, ]; Zc <- waves(C, 12)[u$col, ]
Zx <- do.call(cbind, lapply(1:5, function(i) sapply(1:5, function(j) Zr[, i] * Zc[, j])))
K <- list(Zr %*% t(Zr), Zc %*% t(Zc), Zx %*% t(Zx), diag(nrow(X)))
s <- climb(log(rep(.1, 4)), function(p) restricted(Reduce(`+`, Map(`*`, exp(p), K)), FALSE))
num <- function(x) sprintf("%.15g", x)
writeLines(sprintf('{
  "source": "simulated (set.seed(5)); dense REML in R %s, scripts/spatial-40x3.R",
  "autoregressive": { "row": %s, "col": %s, "logLik": %s, "residualMs": %s, "gap": { "a": "E01", "b": "E02", "estimate": %s, "se": %s } },
  "surface": { "row": %s, "col": %s, "row:col": %s, "residual": %s, "logLik": %s }
}', as.character(getRversion()), num(tanh(a$par[1])), num(tanh(a$par[2])), num(-a$value), num(s2), num(sum(l * b)), num(sqrt(s2 * sum(l * (Ph %*% l)))),
  num(exp(s$par[1])), num(exp(s$par[2])), num(exp(s$par[3])), num(exp(s$par[4])), num(-s$value)), "../spatial/40x3/expected.json")
