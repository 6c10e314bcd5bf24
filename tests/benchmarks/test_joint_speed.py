from tests.benchmarks.joint_speed import measure


def test_same_numbers():
    """The benchmark runs, small, and both ways agree."""
    _, _, difference = measure(128, 12)
    assert difference < 1e-10
