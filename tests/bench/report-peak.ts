/*
 * Loaded before a command (node --import), it has the command's process say at its end how many MiB it took at most, as
 * the last line of its standard error.
 */
process.on('exit', () => process.stderr.write(`${process.resourceUsage().maxRSS / 1024}\n`))
