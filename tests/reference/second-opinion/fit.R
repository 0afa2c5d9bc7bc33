# Fits a Weibull life to each set of lives in data-sets.csv by maximum likelihood, in ways that share nothing
# with the application: survreg where no life enters late, and for all sets the full two-parameter
# likelihood, maximised from several starts (optim) and polished by Newton's steps on its exact derivatives.
# Needs R with the package survival (Debian: r-base-core, r-cran-survival).
# Run from this folder: Rscript fit.R  (rerun.mjs does).

suppressPackageStartupMessages(library(survival))

rows <- read.csv("data-sets.csv")

# Log-likelihood and derivatives by a = ln(shape), b = ln(scale), times relative to the largest.
likelihood <- function(p, d) {
  beta <- exp(p[1])
  power <- function(t) ifelse(t > 0, exp(beta * (log(t) - p[2])), 0)
  lnt <- log(d$exit[d$failed == 1])
  n <- length(lnt)
  n * p[1] - n * beta * p[2] + (beta - 1) * sum(lnt) - sum(power(d$exit) - power(d$entry))
}

derivatives <- function(p, d) {
  beta <- exp(p[1])
  z <- function(t) ifelse(t > 0, log(ifelse(t > 0, t, 1)) - p[2], 0)
  w <- function(t) ifelse(t > 0, exp(beta * z(t)), 0)
  lnt <- log(d$exit[d$failed == 1])
  n <- length(lnt)
  z1 <- z(d$exit); z0 <- z(d$entry); w1 <- w(d$exit); w0 <- w(d$entry)
  s0 <- sum(w1 - w0); s1 <- sum(w1 * z1 - w0 * z0); s2 <- sum(w1 * z1^2 - w0 * z0^2)
  z_failed <- sum(lnt - p[2])
  gradient <- c(n + beta * z_failed - beta * s1, beta * (s0 - n))
  aa <- beta * z_failed - beta * s1 - beta^2 * s2
  ab <- -n * beta + beta * s0 + beta^2 * s1
  bb <- -beta^2 * s0
  list(gradient = gradient, hessian = matrix(c(aa, ab, ab, bb), 2))
}

maximise <- function(d) {
  best <- NULL
  for (shape in c(0.5, 1, 2, 4)) for (scale in c(0.3, 1)) {
    found <- tryCatch(
      optim(log(c(shape, scale)), function(p) -likelihood(p, d), method = "Nelder-Mead",
            control = list(maxit = 5000, reltol = 1e-14)),
      error = function(e) NULL)
    if (!is.null(found) && (is.null(best) || found$value < best$value)) best <- found
  }
  p <- best$par
  for (i in 1:100) {
    dv <- derivatives(p, d)
    step <- solve(dv$hessian, dv$gradient)
    p <- p - step
    if (max(abs(step)) < 1e-14) break
  }
  if (max(abs(step)) > 1e-10) stop("Newton's steps did not settle")
  p
}

out <- data.frame()
worst <- c(shape = 0, scale = 0, logLikelihood = 0)
for (set in unique(rows$set)) {
  d <- rows[rows$set == set, ]
  largest <- max(d$exit)
  relative <- data.frame(entry = d$entry / largest, exit = d$exit / largest, failed = d$failed)
  failures <- sum(d$failed)
  p <- maximise(relative)
  shape <- exp(p[1]); scale <- exp(p[2]) * largest
  log_likelihood <- likelihood(p, relative) - failures * log(largest)
  method <- "newton"
  if (all(d$entry == 0)) {
    fit <- survreg(Surv(exit, failed) ~ 1, data = relative, dist = "weibull",
                   control = list(rel.tolerance = 1e-14, iter.max = 500))
    other <- c(1 / fit$scale, exp(unname(coef(fit))) * largest, fit$loglik[2] - failures * log(largest))
    apart <- abs(other / c(shape, scale, log_likelihood) - 1)
    worst <- pmax(worst, apart)
    shape <- other[1]; scale <- other[2]; log_likelihood <- other[3]
    method <- "survreg"
  }
  out <- rbind(out, data.frame(set = set, method = method, failures = failures,
                               shape = sprintf("%.17g", shape), scale = sprintf("%.17g", scale),
                               logLikelihood = sprintf("%.17g", log_likelihood)))
}
write.csv(out, "fits.csv", row.names = FALSE, quote = FALSE)
cat(R.version.string, "with survival", as.character(packageVersion("survival")), "\n")
cat(nrow(out), "sets;", sum(out$method == "survreg"), "by survreg, apart from Newton's by at most",
    format(worst, digits = 3), "(shape, scale, log-likelihood)\n")
