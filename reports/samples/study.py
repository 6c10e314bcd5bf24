# %%
"""A study in notebook cells: what row spacing does to a lap (an invented example)."""

import matplotlib.pyplot as plt

import fatigue
import reports

# %% Read a case; the demo's text is as good as any file.
text = fatigue.demo_case().read_text(encoding="utf-8")
case = fatigue.parse_case(text, "crown-lap.toml", fatigue.demo_case().parent)
estimate = fatigue.estimate(case)
estimate.rows[["rank", "row", "sheet", "life_flights", "life_no_credit_flights"]]

# %% Why the first row goes first: the section and what its stress is made of.
figure, (section, makeup) = plt.subplots(2, 1, figsize=(9, 6), layout="constrained")
reports.draw_section(section, estimate)
reports.draw_makeup(makeup, estimate)

# %% Other spacings share the counted loads: a variant costs a map, not a count.
lives = {}
for spacing in (16.0, 20.0, 24.0, 28.0):
    other = fatigue.parse_case(
        text.replace("row_spacing_mm = 20.0", f"row_spacing_mm = {spacing}"), case.source, case.folder
    )
    lives[spacing] = fatigue.estimate(other, estimate.loads).rows["life_flights"].min()
print(lives)

# %% Longer overlaps bend less and live longer.
figure, ax = plt.subplots()
ax.plot(list(lives), list(lives.values()), marker="o")
ax.set(xlabel="row spacing [mm]", ylabel="life of the first row [flights]")

# %% The report, in a folder.
written = reports.write(estimate, "faying-out")
