"""Laws that rainflow counting keeps, on random histories with ties and plateaus."""

from collections import Counter
from itertools import pairwise

import hypothesis.extra.numpy as hnp
import numpy as np
import pytest
import rainflow
from hypothesis import assume, example, given
from hypothesis import strategies as st

import spectra
from spectra import counting, long, nests
from spectra.counting import count_part, finish, join_parts

WHOLE = st.integers(-6, 6).map(float)  # few values: many ties and plateaus
ANY = st.floats(-1e3, 1e3)


def histories(least=0, most=120):
    return st.one_of(
        hnp.arrays(float, st.integers(least, most), elements=element) for element in (WHOLE, ANY)
    ) | st.lists(st.integers(1, 40), min_size=least, max_size=8).map(spirals)


def spirals(turns):
    """Return spirals in and out, one after the other: the deepest nests there are."""
    parts = [np.empty(0)]
    for k, turn in enumerate(turns):
        steps = np.arange(turn)
        parts.append((-1.0) ** steps * (steps if k % 2 else turn - steps))
    return np.concatenate(parts)


def table(cycles):
    found = Counter()
    for low, high, number in zip(cycles.low, cycles.high, cycles.count, strict=True):
        found[low, high] += number
    return found


def four_point(values):
    """Count with a stack, as published: full cycles of four points, then the ranges of the residue as halves."""
    stack, found = [], Counter()
    for value in spectra.turning_points(values):
        stack.append(value)
        while len(stack) > 3:
            a, b, c, d = stack[-4:]
            if min(b, c) < min(a, d) or max(b, c) > max(a, d):
                break
            found[min(b, c), max(b, c)] += 1
            del stack[-3:-1]
    for a, b in pairwise(stack):
        found[min(a, b), max(a, b)] += 0.5
    return found


@given(histories())
def test_open_count_is_four_point_cycles_and_residue_halves(x):
    assert table(spectra.count(x, close=False)) == four_point(x)


@given(histories())
def test_open_count_is_the_packages(x):
    x = np.round(x, 9)  # the package's differences underflow
    assume(spectra.turning_points(x).size > 2)
    found = Counter()
    for *_, number, start, end in rainflow.extract_cycles(x.tolist()):
        if x[start] != x[end]:  # the package counts a zero range where a history begins with a plateau
            found[min(x[start], x[end]), max(x[start], x[end])] += number
    assert table(spectra.count(x, close=False)) == found


@given(histories(1))
def test_closed_count_is_the_packages_from_the_top_to_the_top(x):
    x = np.round(x, 9)
    top = int(np.argmax(x))
    turned = np.concatenate([x[top:], x[: top + 1]])
    found = Counter()
    for *_, number, start, end in rainflow.extract_cycles(turned.tolist()):
        if turned[start] != turned[end]:
            found[min(turned[start], turned[end]), max(turned[start], turned[end])] += number
    assert table(spectra.count(x)) == found


@given(histories(1), st.data())
def test_any_cuts_joined_in_any_order_change_nothing(x, data):
    cuts = data.draw(st.lists(st.integers(0, x.size), max_size=6).map(sorted))
    parts = [count_part(piece) for piece in np.split(x, cuts)]
    while len(parts) > 1:
        at = data.draw(st.integers(0, len(parts) - 2))
        width = data.draw(st.integers(2, 3))
        parts[at : at + width] = [join_parts(parts[at : at + width])]
    whole = count_part(x)
    assert table(parts[0].cycles) == table(whole.cycles)
    assert np.array_equal(parts[0].residue, whole.residue)
    for close in (True, False):
        assert table(finish(parts[0], close)) == table(spectra.count(x, close))


@pytest.mark.parametrize("size", [1, 2, 3, 1000, 10**6])
@given(histories(0, 400))
def test_chunk_size_changes_nothing(size, x):
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(counting, "CHUNK", size)
        patch.setattr(counting, "FEW", 4)
        for close in (True, False):
            chunked = table(spectra.count(x, close))
            patch.setattr(counting, "CHUNK", 1 << 20)
            assert chunked == table(spectra.count(x, close))
            patch.setattr(counting, "CHUNK", size)


@given(histories(0, 300), st.integers(1, 50), st.integers(1, 3))
def test_blocks_and_threads_change_nothing(x, block, threads):
    assume(np.unique(x).size < 300)
    for close in (True, False):
        counted = long.count_long(x, close, short=0, block=block, threads=threads)
        assert counted.effect == 0.0
        assert table(counted.cycles) == table(spectra.count(x, close))


@pytest.mark.parametrize("few", [0, 3, 10**6])
@given(st.lists(st.integers(1, 60), min_size=2, max_size=12).map(spirals))
def test_nests_closed_one_by_one_or_together(few, x):
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(nests, "FEW_PITS", few)
        patch.setattr(counting, "FEW", 4)
        assert table(finish(count_part(x), close=False)) == four_point(x)


@given(histories(2), st.data())
def test_up_crossings_of_a_closed_history_are_the_cycles_that_span_the_level(x, data):
    level = data.draw(st.sampled_from(sorted(set(x.tolist()))) | ANY)
    closed = np.append(x, x[0])
    crossings = np.sum((closed[:-1] < level) & (closed[1:] >= level))
    cycles = spectra.count(x)
    assert np.sum(cycles.count[(cycles.low < level) & (level <= cycles.high)]) == crossings
    assert cycles.exceedances([level])[0] == crossings


@given(histories(2), st.data())
def test_rotating_and_reversing_a_repeating_block_change_nothing(x, data):
    by = data.draw(st.integers(0, x.size))
    assert table(spectra.count(np.roll(x, by))) == table(spectra.count(x))
    assert table(spectra.count(x[::-1])) == table(spectra.count(x))


@given(histories(), st.integers(2, 4))
def test_repeating_a_block_repeats_its_cycles(x, times):
    assert table(spectra.count(np.tile(x, times)).merged().per_flight(times)) == table(spectra.count(x))


@given(histories(), st.sampled_from([np.arctan, np.cbrt, lambda v: -3.0 * v - 2.0, lambda v: np.round(v / 4)]))
def test_cycles_of_a_monotone_function_are_the_function_of_the_cycles(x, f):
    """The third turns the history over, the fourth makes ties: what has no range left is no cycle."""
    cycles, mapped = spectra.count(x), spectra.count(f(x))
    ends = f(cycles.low), f(cycles.high)
    there = ends[0] != ends[1]
    expected = spectra.Cycles(np.minimum(*ends)[there], np.maximum(*ends)[there], cycles.count[there])
    assert table(mapped) == table(expected)


@given(histories(), st.floats(1e-3, 1e3))
def test_a_scaled_history_has_scaled_cycles(x, factor):
    x = np.round(x, 6)
    scaled = table(spectra.count(x).scaled(-factor))
    assert {pair: n for pair, n in scaled.items() if pair[0] != pair[1]} == table(spectra.count(-factor * x))


@pytest.mark.parametrize("largest", [1, 2, 3, 10, 600])
def test_residue_of_a_zigzag(largest):
    """Ranges 1 ... K-1, K-1 ... 1 keep 2K - 1 points."""
    steps = np.concatenate([np.arange(1, largest), np.arange(largest - 1, 0, -1)])
    x = np.concatenate([[0.0], np.cumsum(steps * (-1.0) ** np.arange(steps.size))])
    assert counting.residue(x).size == 2 * largest - 1


def test_a_large_history_is_counted_as_a_small_one():
    """Long enough for chunks, passes and nests of any size."""
    random = np.random.default_rng(5)
    x = np.concatenate([random.integers(0, 30, 300_000), spirals([50_000, 50_000]), random.normal(0, 9, 200_000)])
    expected = four_point(x)
    assert table(spectra.count(x, close=False)) == expected
    assert table(finish(count_part(x), close=False)) == expected


class TestPitfallsOfThePackage:
    """`rainflow` 3.2.0, as run: what the layer around it guards."""

    def test_two_points_have_a_cycle(self):
        assert not list(rainflow.extract_cycles([0.0, 5.0]))
        assert table(spectra.count([0.0, 5.0])) == {(0.0, 5.0): 1.0}
        assert table(spectra.count([0.0, 5.0], close=False)) == {(0.0, 5.0): 0.5}

    @pytest.mark.parametrize("kind", [np.int8, np.uint8, np.int16])
    def test_integers_do_not_wrap(self, kind):
        x = np.array([0, np.iinfo(kind).max, np.iinfo(kind).min, 100, 0], dtype=kind)
        assert spectra.count(x).range.max() == float(np.iinfo(kind).max) - float(np.iinfo(kind).min)

    @pytest.mark.parametrize("bad", [np.nan, np.inf, -np.inf])
    def test_what_is_not_finite_is_refused(self, bad):
        for count in (
            spectra.count,
            count_part,
            spectra.turning_points,
            lambda x: long.count_long(np.array(x), short=0),
        ):
            with pytest.raises(ValueError, match="finite"):
                count([0.0, 1.0, bad, 1.0])

    @pytest.mark.parametrize("x", [[], [3.0], [3.0, 3.0, 3.0]])
    @pytest.mark.parametrize("close", [True, False])
    def test_a_constant_has_no_cycle(self, x, close):
        assert len(spectra.count(x, close)) == 0
        assert len(long.count_long(np.array(x), close, short=0).cycles) == 0

    @example(1e-320)
    @given(st.floats(1e-323, 1e-300))
    def test_differences_do_not_underflow(self, tiny):
        cycles = spectra.count([0.0, tiny, 0.0, 1.0])
        assert table(cycles) == {(0.0, tiny): 1.0, (0.0, 1.0): 1.0}

    def test_the_widest_range_does_not_overflow(self):
        assert table(spectra.count([-8e307, 8e307])) == {(-8e307, 8e307): 1.0}
