# Prints the seconds that survreg takes for one Weibull fit a set; reading and splitting are not counted.
suppressPackageStartupMessages(library(survival))
data <- read.csv(commandArgs(trailingOnly = TRUE)[1])
sets <- split(data, data$set)
cat(system.time(for (one in sets) survreg(Surv(time, failed) ~ 1, data = one, dist = "weibull"))[["elapsed"]])
