"""Results of elements, stored."""
