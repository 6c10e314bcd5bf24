"""One `draw_...(ax, estimate)` per figure; each draws on the axes it is given and returns them."""
