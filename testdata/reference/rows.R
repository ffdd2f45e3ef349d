# Shared by ranks_rows.R, spread_rows.R and survival_rows.R: writes rows of
# numbers as JSON. Data are drawn there with a fixed seed, rounded, invented.
options(digits = 17, warn = 1)
program <- paste0("R ", R.version$major, ".", R.version$minor)
num <- function(x) ifelse(is.infinite(x), ifelse(x > 0, '1e999', '-1e999'), sprintf("%.17g", x))
arr <- function(x) paste0("[", paste(num(as.numeric(x)), collapse = ", "), "]")
txt <- function(s) sprintf('"%s"', s)
obj <- function(l) paste0("{", paste(sprintf('"%s": %s', names(l), unlist(l)), collapse = ", "), "}")
rows <- character()
add <- function(id, call, input, expected, digits, prog = program) {
  if (is.null(names(digits))) digits <- list(all = digits)
  rows[[length(rows) + 1]] <<- paste0("  ", obj(list(id = txt(id), program = txt(prog), call = txt(call), date = '"2026-12-01"',
    input = obj(input), expected = obj(lapply(expected, num)), digits = obj(digits))))
}
write_rows <- function() cat("[\n", paste(rows, collapse = ",\n"), "\n]\n", sep = "")
# root of a monotone function to the last digits
root <- function(f, lo, hi) uniroot(f, c(lo, hi), tol = 1e-14, maxiter = 10000)$root
