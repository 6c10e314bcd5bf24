"""One module per command of `faying`, imported when the command runs."""
