"""Build scatter: grammar, linear propagation, Sobol indices, yield intervals, reproducibility, interruption."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import scipy.stats
from corners import HARDPOINTS

import toewright as tw
from toewright.kinematics.design import coordinate_index
from toewright.model.errors import InputError
from toewright.studies.scatter import built_designs, displacement, frozen, read_scatter
from toewright.studies.shares import sobol_shares
from toewright.studies.tolerance import binomial_interval, tolerance

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
TRAVEL = [-20.0, 0.0, 20.0]


def with_tables(**tables):
    return replace(FRONT, extra=tables)


SMALL = {"points": {"tie_rod_inner": {"z": 0.03}, "tie_rod_outer": {"z": 0.02, "x": 0.05}}}


def test_small_scatter_is_linear_propagation():
    found = tolerance(with_tables(tolerance=SMALL), 32_768, travel=TRAVEL)
    slopes = tw.slopes(FRONT, [0.0], TRAVEL, columns=["bump_steer"])
    for s in range(2):
        for t in (0, 2):
            parts = [("tie_rod_inner.z", 0.01), ("tie_rod_outer.z", 0.02 / 3), ("tie_rod_outer.x", 0.05 / 3)]
            linear = np.sqrt(sum((slopes.of("bump_steer", name)[s, 0, t] * sigma) ** 2 for name, sigma in parts))
            assert found.deviation[s, t] == pytest.approx(linear, rel=2e-3)
            assert found.bands[s, t, 1] == pytest.approx(found.nominal[s, t], abs=3e-5)
            width = found.bands[s, t, 2] - found.bands[s, t, 0]
            assert width == pytest.approx(2 * scipy.stats.norm.ppf(0.95) * linear, rel=5e-3)
    assert found.lost == 0
    assert not found.stopped


def test_shares_are_those_of_the_linear_variance_when_scatter_is_small():
    found = tolerance(with_tables(tolerance=SMALL), 1024, travel=TRAVEL)
    assert sum(share.linear for share in found.shares) == pytest.approx(1.0)
    for share in found.shares:
        assert share.first == pytest.approx(share.linear, abs=0.03)
        assert share.total == pytest.approx(share.linear, abs=0.03)


def test_sobol_indices_of_the_ishigami_function():
    # f = sin x1 + 7 sin^2 x2 + 0.1 x3^4 sin x1 on (-pi, pi)^3. Analytic indices (A. Saltelli et al., Global Sensitivity Analysis. The
    # Primer, 2008; T. Ishigami, T. Homma 1990): first 0.3139, 0.4424, 0; total 0.5576, 0.4424, 0.2437
    def ishigami(x):
        return np.sin(x[0]) + 7.0 * np.sin(x[1]) ** 2 + 0.1 * x[2] ** 4 * np.sin(x[0])

    box = [scipy.stats.uniform(-np.pi, 2 * np.pi)] * 3
    first, total = sobol_shares(ishigami, box, seed=3, samples=4096)
    assert first == pytest.approx([0.3139, 0.4424, 0.0], abs=0.03)  # sampling error of 4096 points
    assert total == pytest.approx([0.5576, 0.4424, 0.2437], abs=0.03)


def test_what_is_shared_does_not_part_the_sides():
    shared = {"shared": {"rack_height": {"points": ["tie_rod_inner"], "axis": "z", "limit": 1.0}}}
    found = tolerance(with_tables(tolerance=shared), 2048, travel=TRAVEL)
    assert np.max(np.abs(found.difference)) < 1e-6  # single precision is kept of each build
    assert found.deviation[0, 2] > 0.01
    own = {"points": {"tie_rod_inner": {"z": 1.0}}}
    assert tolerance(with_tables(tolerance=own), 2048, travel=TRAVEL).difference[2, 2] > 0.01


def test_yield_against_the_normal_distribution():
    # one scatter, nearly linear: the yield is that of a normal distribution between two limits
    slope = tw.slopes(
        FRONT, [0.0], [20.0], sides=["left"], columns=["bump_steer"], parameters=["tie_rod_inner.z"]
    ).values.item()
    sigma = 0.3 / 3 * abs(slope)
    middle = float(tw.sweep(FRONT, [0.0], [20.0], sides=["left"])["bump_steer"][0, 0, 0])
    targets = {"bump_steer": {"at_travel": 20, "side": "left", "between": [middle - sigma, middle + 0.5 * sigma]}}
    table = {"points": {"tie_rod_inner": {"z": 0.3}}}
    found = tolerance(with_tables(tolerance=table, targets=targets), 65_536, travel=TRAVEL).yields[0]
    expected = scipy.stats.norm.cdf(0.5) - scipy.stats.norm.cdf(-1.0)
    assert found.kept / found.builds == pytest.approx(expected, abs=2e-3)
    assert found.low < found.kept / found.builds < found.high
    assert found.nominal
    assert found.band == pytest.approx(middle + scipy.stats.norm.ppf([0.05, 0.5, 0.95]) * sigma, abs=0.02 * sigma)


def test_yield_interval_is_the_exact_binomial():
    # Clopper and Pearson: 0 of n has the upper limit 1 - (alpha/2)^(1/n); n of n the mirror image
    low, high = binomial_interval(0, 50)
    assert low == 0.0
    assert high == pytest.approx(1.0 - 0.025 ** (1 / 50))
    assert binomial_interval(50, 50) == pytest.approx((0.025 ** (1 / 50), 1.0))
    low, high = binomial_interval(37, 100)
    assert scipy.stats.binom.sf(36, 100, low) == pytest.approx(0.025, abs=1e-9)
    assert scipy.stats.binom.cdf(37, 100, high) == pytest.approx(0.025, abs=1e-9)


def test_targets_of_the_whole_axle_are_judged_on_fewer_builds():
    targets = {"ackermann_percent": {"at_steer": 15, "at_least": -1000}, "roll_centre_z": {"at_least": 500}}
    found = tolerance(with_tables(tolerance={"default": 0.3}, targets=targets), 64, travel=TRAVEL).yields
    assert [y.kept for y in found] == [200, 0]
    assert [y.nominal for y in found] == [True, False]


def test_the_same_seed_gives_the_same_builds():
    one, two = (tolerance(with_tables(tolerance={"default": 0.3}), 5000, seed=7, travel=TRAVEL) for _ in range(2))
    other = tolerance(with_tables(tolerance={"default": 0.3}), 5000, seed=8, travel=TRAVEL)
    assert np.array_equal(one.bands, two.bands)
    assert not np.array_equal(one.bands, other.bands)


def test_an_interrupt_leaves_what_is_done():
    done = []

    def stop(count):
        done.append(count)
        if len(done) == 2:
            raise KeyboardInterrupt

    found = tolerance(with_tables(tolerance=SMALL), 200_000, travel=TRAVEL, progress=stop)
    assert found.stopped
    assert found.builds == sum(done)
    assert np.all(np.isfinite(found.bands))


@pytest.mark.parametrize("kind", ["normal", "truncated", "uniform"])
def test_distributions(kind):
    table = {"distribution": kind, "points": {"tie_rod_inner": {"z": 0.6}}}
    variable = read_scatter(with_tables(tolerance=table))[0]
    u = (np.arange(20_000) + 0.5) / 20_000
    moves = displacement(variable, u)
    assert moves == pytest.approx(frozen(variable).ppf(u), abs=1e-9)
    assert moves.std() == pytest.approx(variable.deviation, rel=2e-3)
    if kind != "normal":
        assert np.max(np.abs(moves)) <= 0.6 + 1e-12


def test_grammar_units_and_axes():
    table = {
        "default": 0.1,
        "points": {"wheel_centre": 0.0, "lower_ball_joint": {"x": 0.2, "distribution": "uniform"}},
        "shared": {"rack": {"points": ["tie_rod_inner"], "axis": "y", "limit": 0.5}},
    }
    found = {v.name: v for v in read_scatter(replace(with_tables(tolerance=table), length_unit="in"))}
    assert len(found) == 2 * 8 * 3 + 1
    assert found["left lower_ball_joint.x"].limit == pytest.approx(5.08)
    assert found["left lower_ball_joint.x"].distribution == "uniform"
    assert found["left lower_ball_joint.y"].limit == pytest.approx(2.54)
    assert not any("wheel_centre" in name for name in found)
    shared = found["shared rack"]
    index = coordinate_index("double-wishbone", "tie_rod_inner.y")
    assert shared.places == (("left", index), ("right", index))
    built = built_designs({"left": np.zeros(35), "right": np.zeros(35)}, (shared,), np.array([[1.5]]))
    assert (
        built["left"][0, index] == built["right"][0, index] == 1.5
    )  # the rack moves to one side of the car, not outward on both


@pytest.mark.parametrize(
    ("table", "words"),
    [
        ({"defalt": 0.1}, "did you mean 'default'"),
        ({"default": -1}, "0 or more"),
        ({"default": "wide"}, "0 or more"),
        ({"default": 0.0}, "nothing scatters"),
        ({"default": 0.1, "distribution": "gauss"}, "normal, truncated, uniform"),
        ({"points": {"tie_rod": 0.1}}, "no such point"),
        ({"points": {"tie_rod_inner": {"w": 0.1}}}, "is not known"),
        ({"points": 3}, "is no table"),
        ({"shared": {"rack": {"points": ["nothing"], "axis": "z", "limit": 1}}}, "is no point"),
        ({"shared": {"rack": {"points": [], "axis": "z", "limit": 1}}}, "list of points"),
        ({"shared": {"rack": {"points": ["tie_rod_inner"], "axis": "up", "limit": 1}}}, "axis"),
        ({"shared": {"rack": {"points": ["tie_rod_inner"], "axis": "z", "limit": 0}}}, "above 0"),
        ({"shared": {"rack": 1.0}}, "write {points"),
    ],
)
def test_bad_tables_are_one_sentence(table, words):
    with pytest.raises(InputError, match=words) as caught:
        read_scatter(with_tables(tolerance=table))
    assert "tolerance" in str(caught.value)


def test_impossible_requests():
    with pytest.raises(InputError, match=r"has no \[tolerance\]"):
        tolerance(with_tables(), 100)
    with pytest.raises(InputError, match="builds 3"):
        tolerance(with_tables(tolerance=SMALL), 3)
    with pytest.raises(InputError, match="no build reaches"):
        tolerance(with_tables(tolerance=SMALL), 64, travel=[-500.0, 500.0])
