"""The local page where a splice answers as it is changed: `faying try`."""
