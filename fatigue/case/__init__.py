"""The case file: read strictly, every fault at once."""
