"""Materials, fasteners and their curves."""
