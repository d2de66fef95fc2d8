# The invented loan history behind the practice branch's working capital loan,
# and the coefficients that its workbook has from it. Base R 4, no packages:
#
#   Rscript history.R DIR
#
# writes into DIR history.csv (a row a loan), coefficients.csv, covariance.csv
# and averages.csv. Nothing in it was ever anybody's loan.
dir <- commandArgs(TRUE)[1]
set.seed(20260209)
n <- 2400

# Answers, loosely tied together by how well the business goes.
well <- rnorm(n)
draw <- function(p) factor(sample(names(p), n, TRUE, p), names(p))
paid_out <- as.Date("2022-01-03") + sort(sample(0:1090, n, TRUE))
line_of_work <- draw(c(stall = .38, smallholding = .27, workshop = .2, carrier = .136, other = .014))
premises <- draw(c(own = .3, rented = .45, no_place = .25))
years <- pmin(floor(rexp(n, 1 / (7 * exp(.25 * well)))), 40)
days <- pmin(pmax(round(4.6 + .9 * well + rnorm(n, 0, 1.3)), 0), 7)
books <- factor(ifelse(runif(n) < plogis(.7 * well - .5), "yes", "no"), c("no", "yes"))
again <- runif(n) < .58
delay <- ifelse(runif(n) < plogis(.3 + .5 * well), 0, pmin(ceiling(rexp(n, 1 / 13)), 95))
surplus <- exp(6 + .4 * well + .4 * rnorm(n))
surplus[runif(n) < .03] <- 0 # lent against wages to come
amount <- pmin(pmax(50 * round(pmax(surplus, 150) * exp(rnorm(n, .95, .5)) / 50), 200), 6000)
term <- pmin(pmax(round(7 + amount / 400 + rnorm(n, 0, 3)), 3), 24)
debts <- ifelse(runif(n) < .45, 0, pmin(10 * round(exp(rnorm(n, 6.2 - .2 * well, 1)) / 10), 6000))
debts[runif(n) < .055] <- NA
payment <- ceiling(2 * amount * .02 / (1 - 1.02^-term)) / 2 # 2 % a month, to the half crown above
share <- round(payment / surplus, 3)

# The attributes, the first of each being the reference.
band <- function(x, from, codes, first, besides = list()) {
  b <- codes[findInterval(x, from)]
  for (code in names(besides)) b[besides[[code]]] <- code
  relevel(factor(b, c(codes, names(besides))), first)
}
x <- data.frame(line_of_work, premises, books,
  trade_years = band(years, c(-Inf, 1, 3, 10), c("first_year", "to_2", "to_9", "from_10"), "to_9"),
  work_days = band(days, c(-Inf, 3, 5), c("to_2", "to_4", "from_5"), "from_5"),
  worst_delay = band(delay, c(-Inf, 1), c("on_time", "late"), "on_time", list(not_applicable = !again)),
  debts = band(debts, c(-Inf, 500, 1500), c("to_500", "to_1500", "from_1500"), "to_500",
    list(unknown = is.na(debts))),
  payment_share = band(share, c(-Inf, .2, .35, .5, .75), c("to_20", "to_35", "to_50", "to_75", "from_75"), "to_35",
    list(nothing_left = surplus <= 0)))
slopes <- data.frame(term, worst_delay = ifelse(again, pmin(delay, 60), 0))

# Who defaulted: the truth that the estimate is after.
truth <- list(line_of_work = c(0, .3, -.25, .5, .2), premises = c(0, .25, .5), books = c(0, -.55),
  trade_years = c(0, .9, .45, -.4), work_days = c(0, .75, .3), worst_delay = c(0, .25, .45),
  debts = c(0, .5, .95, .75), payment_share = c(0, -.4, .4, .9, 1.5, 2.4))
log_odds <- -4.32 + .035 * slopes$term + .034 * slopes$worst_delay
for (code in names(truth)) log_odds <- log_odds + truth[[code]][x[[code]]]
default <- as.integer(runif(n) < plogis(log_odds))

# The estimate, with the information rebuilt at its end.
fit <- glm(default ~ ., binomial, cbind(x, slope = slopes), control = glm.control(epsilon = 1e-14, maxit = 50))
X <- model.matrix(fit)
inverse <- chol2inv(chol(crossprod(X * sqrt(fitted(fit) * (1 - fitted(fit))))))
attribute <- unlist(lapply(names(x), function(c) paste0(c, ".", levels(x[[c]]))))
name <- c("base", unlist(lapply(names(x), function(c) paste0(c, ".", levels(x[[c]])[-1]))), names(slopes))
estimate <- setNames(round(coef(fit), ifelse(name %in% names(slopes), 9, 6)), name)
covariance <- signif(inverse, 12)
dimnames(covariance) <- list(name, name)

# What the workbook tells of each attribute and characteristic.
rows <- union(name, attribute)
count <- function(what) what[match(rows, attribute)]
coefficients <- data.frame(name = rows, estimate = ifelse(rows %in% name, estimate[rows], 0),
  error = round(sqrt(diag(inverse))[match(rows, name)], 12),
  loans = count(unlist(lapply(x, table))), defaults = count(unlist(lapply(x, function(c) tapply(default, c, sum)))))
codes <- union(names(x), "term")
average <- sapply(codes, function(c) {
  e <- estimate[paste0(c, ".", x[[c]])]
  mean(ifelse(is.na(e), 0, e) + if (c %in% names(slopes)) estimate[c] * slopes[[c]] else 0)
})
numbers <- list(term = term, worst_delay = delay[again], trade_years = years, work_days = days, debts = debts,
  payment_share = share[surplus > 0])
seen <- function(limit) sapply(codes, function(c) if (c %in% names(numbers)) limit(numbers[[c]], na.rm = TRUE) else NA)

put <- function(table, file) write.csv(table, file.path(dir, file), quote = FALSE, row.names = FALSE)
put(format(coefficients, digits = 12, scientific = FALSE, trim = TRUE), "coefficients.csv")
put(format(as.data.frame(covariance), digits = 12, trim = TRUE), "covariance.csv")
put(data.frame(name = codes, average = round(average, 6), from = seen(min), to = seen(max)), "averages.csv")
put(data.frame(paid_out, default, amount, term, line_of_work, premises, years, days, books, again,
  delay = ifelse(again, delay, NA), debts, surplus = round(surplus, 2)), "history.csv")
cat(n, "loans,", sum(default), "defaults, log-likelihood", format(as.numeric(logLik(fit)), digits = 12), "\n")
