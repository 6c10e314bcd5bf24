"""The stress at the edge of a hole: concentrations, their superposition and what a treated hole is worth.

Route `none` (`concentration`, `countersink`, `superposition`) and route `practice` (`practice`) are formulas. Route
`contact` is solved: `sheet` says how the hole's edge answers in a strip, in a row or near an end, `contact` puts a pin
in it (`complementarity` finds where it touches), `edge` maps load to hoop stress at fixed points of the edge.
`installed` turns the hole's making (`expansion`, `ring`, `squeeze`) into a retained fit and a residual stress,
`relaxation` says what the largest loads leave of the latter, `summary` looks into one hole, `kinds` holds facts of the
trade. All are pure functions on floats and arrays, N, mm, MPa, angles from the load axis on the pin-load side.
"""
