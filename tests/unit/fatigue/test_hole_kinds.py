from fatigue.hole.installed import LARGEST_FIT, SMALLEST_FIT
from fatigue.hole.kinds import COMPARED_FITS, CONDITIONS, fastener_kinds, shank_strengths
from fatigue.hole.practice import FILLINGS


def test_every_kind_of_the_case_file_is_known():
    assert set(fastener_kinds()) == set(FILLINGS) - {"open"}


def test_every_entry_says_where_it_comes_from():
    for kind in fastener_kinds().values():
        assert kind.source
        assert kind.fit_source
        assert kind.usual_fit[0] < kind.usual_fit[1]
    assert {kind.relative_cost for kind in fastener_kinds().values()} == {1, 2, 3, 4, 5}
    for strength in shank_strengths().values():
        assert strength.source
        assert strength.how
        assert 150 < strength.driven_shear < 800


def test_interference_kinds_fit_tighter_than_clearance_kinds():
    kinds = fastener_kinds()
    assert kinds["clearance-bolt"].usual_fit[1] < kinds["close-fit-bolt"].usual_fit[1]
    assert kinds["close-fit-bolt"].usual_fit[1] < kinds["interference-pin"].usual_fit[1]


def test_conditions_lie_within_what_was_checked():
    assert len({condition.name for condition in CONDITIONS}) == len(CONDITIONS)
    for condition in CONDITIONS:
        assert SMALLEST_FIT <= condition.fit <= LARGEST_FIT
        assert 0 <= condition.cold_expansion <= 0.06
    assert SMALLEST_FIT <= COMPARED_FITS[0] < COMPARED_FITS[1] <= LARGEST_FIT
