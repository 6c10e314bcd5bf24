"""Edits of histories and tables, places of cycles, and the grid."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra import numpy as hnp

import spectra
from spectra import edits
from spectra.counting import count
from spectra.cycles import Cycles
from spectra.grid import grid_for, gridded, power_damage, table_of
from spectra.long import count_long
from spectra.places import count_places

HISTORIES = hnp.arrays(float, st.integers(0, 80), elements=st.integers(-9, 9).map(float))


def pairs(cycles):
    table = cycles.merged()
    return dict(zip(zip(table.low.tolist(), table.high.tolist(), strict=True), table.count.tolist(), strict=True))


TABLE = Cycles([0.0, 50.0, -20.0], [90.0, 53.0, 10.0], [1.0, 500.0, 2.0])


class TestGate:
    @given(HISTORIES, st.integers(0, 20))
    def test_gate_then_count_is_count_then_drop(self, x, width):
        expected = edits.omit_small(count(x), width).after
        assert pairs(count(edits.gate(x, width))) == pairs(expected)

    @given(HISTORIES, st.integers(0, 20))
    def test_an_open_history_keeps_all_others(self, x, width):
        """What is small and does not close stays, as halves."""

        def large(values):
            return {pair: n for pair, n in pairs(count(values, close=False)).items() if pair[1] - pair[0] >= width}

        assert large(edits.gate(x, width, close=False)) == large(x)


class TestPlaces:
    @given(HISTORIES, st.booleans())
    def test_places_hold_the_cycles(self, x, close):
        places = count_places(x, close)
        assert pairs(Cycles(x[places.low], x[places.high], places.count)) == pairs(count(x, close))

    def test_each_turning_point_of_a_closed_history_ends_one_cycle(self):
        x = np.random.default_rng(2).integers(0, 9, 500)
        places = count_places(x)
        ends = np.concatenate([places.low, places.high])
        assert np.unique(ends).size == ends.size


class TestTables:
    def test_omit(self):
        edited = edits.omit_small(TABLE, 5.0)
        assert pairs(edited.after) == {(0.0, 90.0): 1.0, (-20.0, 10.0): 2.0}
        small, whole = 500 * (3 * 53) ** 2.5, 90.0**5 + 500 * (3 * 53) ** 2.5 + 2 * (30 * 10) ** 2.5
        assert edited.removed() == pytest.approx(small / whole)
        assert edited.note() == (
            "ranges below 5 left out: 500 of 503 cycles go; "
            "takes away 2.63 % of the damage (power 5 of range x maximum)"
        )

    @given(HISTORIES, st.integers(-9, 0), st.integers(1, 9))
    def test_clip_is_the_count_of_the_clipped_history(self, x, bottom, top):
        assert pairs(edits.clip(count(x), bottom, top).after) == pairs(count(np.clip(x, bottom, top)))

    def test_clip_says_what_it_does(self):
        assert edits.clip(TABLE, top=80.0).words == "values above 80 clipped"
        assert edits.clip(TABLE, -10.0, 80.0).words == "values below -10 and above 80 clipped"
        assert edits.clip(TABLE).words == "nothing clipped"
        with pytest.raises(ValueError, match="bottom 5 must be below top 5"):
            edits.clip(TABLE, 5.0, 5.0)

    def test_scale_repeat_join(self):
        assert pairs(edits.scale(TABLE, -2.0).after) == {
            (-180.0, 0.0): 1.0,
            (-106.0, -100.0): 500.0,
            (-20.0, 40.0): 2.0,
        }
        assert edits.repeat(TABLE, 3.0).after.count.tolist() == [3.0, 1500.0, 6.0]
        assert edits.repeat(TABLE, 3.0).removed() == pytest.approx(-2.0)
        assert "adds 200 % of the damage" in edits.repeat(TABLE, 3.0).note()
        assert pairs(edits.join(TABLE, TABLE).after) == {pair: 2 * n for pair, n in pairs(TABLE).items()}
        with pytest.raises(ValueError, match="0 must be greater than 0"):
            edits.repeat(TABLE, 0.0)

    def test_nothing_is_changed_in_place(self):
        before = pairs(TABLE)
        for edit in (edits.omit_small(TABLE, 50), edits.clip(TABLE, 0, 50), edits.scale(TABLE, 2)):
            assert edit.before is TABLE
        assert pairs(TABLE) == before

    def test_damage_of_ones_own(self):
        assert edits.omit_small(TABLE, 50.0).removed(lambda cycles: cycles.total) == pytest.approx(502 / 503)


class TestGrid:
    @pytest.mark.parametrize("bound", [0.05, 0.01, 0.005])
    def test_effect_is_within_the_bound(self, bound):
        cycles = count(np.random.default_rng(8).normal(40.0, 12.0, 60_000))
        table = gridded(cycles, bound)
        given, exact = power_damage(table.cycles), power_damage(cycles)
        least, most = power_damage(table.narrowest), power_damage(table.widest)
        assert least <= exact <= most
        assert abs(given / exact - 1) <= table.effect() <= bound
        assert table.cycles.total == cycles.total

    def test_every_cycle_stays_within_its_cell(self):
        cycles = count(np.random.default_rng(8).normal(40.0, 12.0, 5000))
        grid = grid_for(cycles.low.min(), cycles.high.max(), 0.05)
        for i in range(0, len(cycles), 50):
            one = Cycles(cycles.low[[i]], cycles.high[[i]], [1.0])
            table = table_of(grid, np.bincount(grid.cell(one.low, one.high), minlength=grid.cells))
            assert table.narrowest.range[0] <= one.range[0] <= table.widest.range[0] * (1 + 1e-12)
            assert abs(table.cycles.mean[0] - one.mean[0]) <= grid.mean_width / 2 * (1 + 1e-9)

    def test_note(self):
        cycles = count(np.random.default_rng(8).normal(40.0, 12.0, 60_000))
        note = gridded(cycles, 0.05).note()
        assert note.startswith("cycles put in a grid of 692 ranges by 100 means: no range moved by more than 0.5 %, ")

    def test_a_bound_too_narrow_is_refused(self):
        with pytest.raises(spectra.InputFaults) as caught:
            gridded(TABLE, bound=1e-5)
        assert str(caught.value) == (
            "grid: one fault\n  bound: 0.001 % needs 3453879 ranges by 500000 means; 2e+07 cells are the most. "
            "Ask for a wider bound."
        )

    @pytest.mark.parametrize("bad", [{"bound": 0.0}, {"bound": 1.0}, {"power": 0.0}])
    def test_impossible_bounds(self, bad):
        with pytest.raises(ValueError, match="needs top > bottom"):
            grid_for(0.0, 1.0, **bad)

    def test_nothing_to_put_in(self):
        with pytest.raises(ValueError, match="no cycles"):
            gridded(count([]))


class TestLong:
    def test_a_long_history_goes_into_a_grid_within_its_bound(self):
        x = np.random.default_rng(4).normal(30.0, 10.0, 100_000)
        long = count_long(x, short=0, block=10_000, bound=0.02)
        exact = count(x)
        assert long.cycles.total == exact.total
        assert long.cycles.range.max() == exact.range.max()
        assert abs(power_damage(long.cycles) / power_damage(exact) - 1) < long.effect < 0.02
        assert long.notes[0].startswith("cycles put in a grid of")

    def test_few_levels_then_many(self):
        random = np.random.default_rng(4)
        x = np.concatenate([random.integers(0, 30, 50_000), random.normal(15.0, 5.0, 50_000)]).astype(float)
        long = count_long(x, short=0, block=10_000)
        assert long.cycles.total == count(x).total
        assert long.effect > 0

    def test_progress(self):
        told = []
        count_long(np.arange(100.0), short=0, block=30, on_progress=lambda done, total: told.append((done, total)))
        assert told[-1] == (200, 200)
        assert [done for done, _ in told] == sorted(done for done, _ in told)

    def test_a_map_is_counted_and_left_alone(self, tmp_path):
        x = np.random.default_rng(4).integers(0, 50, 200_000).astype(np.int16)
        np.save(tmp_path / "x.npy", x)
        mapped = np.load(tmp_path / "x.npy", mmap_mode="r")
        assert pairs(count_long(mapped, short=0, block=4096).cycles) == pairs(count(x))
        assert np.array_equal(mapped, x)
