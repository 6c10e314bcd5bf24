"""Case files that ship."""
