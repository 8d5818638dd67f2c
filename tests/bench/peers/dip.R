# Times diptest::dip of every column of a file of doubles, column after column: prints milliseconds.
arguments <- commandArgs(TRUE)
size <- file.info(arguments[1])$size / 8
data <- matrix(readBin(arguments[1], "double", size), ncol = as.integer(arguments[2]))
started <- proc.time()[["elapsed"]]
for (column in seq_len(ncol(data))) diptest::dip(data[, column])
cat(1000 * (proc.time()[["elapsed"]] - started))
