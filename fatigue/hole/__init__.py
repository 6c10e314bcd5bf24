"""The stress at the edge of a hole: concentrations, their superposition and what a treated hole is worth."""
