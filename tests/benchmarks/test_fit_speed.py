from tests.benchmarks.fit_speed import measure_fit, measure_strain


def test_the_benchmark_runs_and_both_ways_agree():
    assert measure_fit(60) > 0
    assert measure_strain(50, 8)[2] < 1e-6
