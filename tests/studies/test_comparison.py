from __future__ import annotations

import dataclasses
from pathlib import Path

import numpy as np
import pytest
from corners import HARDPOINTS, PLAIN, make_axle

import toewright as tw
from toewright.kinematics.maps import SWEEP_COLUMNS
from toewright.model.axle import Axle, Rack, Setup, Vehicle
from toewright.studies.comparison import check_comparable, compare, largest_change, moved_points, sheet_rows
from toewright.views.comparison_rows import change_sentences, point_rows, row_cells, sheet_headings
from toewright.views.plots_comparison import comparison_figure

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
VAN = tw.load(HARDPOINTS / "linnet_front.toml")
REAR = tw.load(HARDPOINTS / "marten_rear.toml")
UNEQUAL = tw.load(HARDPOINTS / "ibex_front.toml")
SHIFT = np.array([1.0, -2.0, 2.0])


def shifted(axle: Axle, side: str = "left") -> Axle:
    return axle.with_points({(side, "tie_rod_outer"): axle.corner(side).points["tie_rod_outer"] + SHIFT})


def test_a_moved_point_is_told_by_axis_and_distance() -> None:
    (moved,) = moved_points(FRONT, shifted(FRONT))
    assert (moved.side, moved.point) == ("left", "tie_rod_outer")
    assert np.allclose(moved.shift, SHIFT)
    assert moved.distance == pytest.approx(3.0)
    assert point_rows([moved]) == [["left", "tie_rod_outer", "+1.00", "-2.00", "+2.00", "3.00"]]
    (right,) = moved_points(UNEQUAL, shifted(UNEQUAL, "right"))
    assert right.side == "right"
    assert moved_points(FRONT, FRONT) == ()


def test_a_file_against_itself_changes_nothing() -> None:
    compared = compare([FRONT, FRONT], [-10.0, 0.0, 10.0], [-10.0, 0.0, 10.0])
    assert compared.moved == ((),)
    assert compared.settings == ()
    for name in SWEEP_COLUMNS:
        assert np.all(compared.change(1, name) == 0.0)
    for row in (*compared.rest, *compared.lock, *sheet_rows(compared, "left")):
        assert row.values[0] == row.values[1]
    assert change_sentences(compared) == ["Bump steer of B is A's over the whole map."]


def test_changes_are_those_of_two_sweeps() -> None:
    other = shifted(FRONT)
    compared = compare([FRONT, other])
    rack, travel = compared.maps[0].rack_travel, compared.maps[0].wheel_travel
    expected = tw.sweep(other, rack, travel)["bump_steer"] - tw.sweep(FRONT, rack, travel)["bump_steer"]
    assert np.allclose(compared.change(1, "bump_steer"), expected, atol=1e-12)
    largest = largest_change(compared, 1)
    assert largest is not None
    assert abs(largest[3]) == pytest.approx(np.abs(expected).max())
    place = expected[0, rack.tolist().index(largest[1]), travel.tolist().index(largest[2])]
    assert largest[0] == "left"
    assert place == pytest.approx(largest[3])
    turned = tw.turn(other, [30.0])
    assert next(row for row in compared.lock if row.name == "ackermann_percent").values[1] == pytest.approx(
        float(turned["ackermann_percent"][0])
    )
    assert compared.lock_rack == 30.0


def test_settings_that_differ_are_listed_with_their_values() -> None:
    assert FRONT.rack is not None
    other = dataclasses.replace(
        FRONT,
        setup=Setup(0.2, FRONT.setup.camber),
        rack=Rack(np.array([0.0, 0.8, 0.6]), FRONT.rack.stroke, None),
    )
    rows = {row.name: row.values for row in compare([FRONT, other], [0.0], [0.0]).settings}
    assert rows["setup.toe_in"] == (-0.1, 0.2)
    assert rows["rack.travel_per_turn"] == (86.0, None)
    assert rows["rack.axis"] == ("(0.0000, 1.0000, 0.0000)", "(0.0000, 0.8000, 0.6000)")
    assert set(rows) == {"setup.toe_in", "rack.travel_per_turn", "rack.axis"}


def test_positions_suit_all_files() -> None:
    compared = compare([VAN, FRONT])
    assert compared.maps[0].rack_travel[-1] == 30.0
    assert compared.maps[1].wheel_travel[-1] == 25.0
    assert [m.point for m in compared.moved[0]].count("lower_ball_joint") == 1
    assert compared.kinds == (
        "A and B, left and right: strut against double-wishbone; only points that both have are compared one by one.",
    )
    assert all((maps.status == 0).all() for maps in compared.maps)


def test_what_cannot_be_turned_is_said() -> None:
    rear = compare([FRONT, REAR])
    assert rear.turns == ()
    assert rear.lock == ()
    assert "turning is not compared: Marten 04, rear axle has no rack" in rear.notes
    assert any("front and rear axles" in note for note in rear.notes)
    bare = make_axle(PLAIN["double-wishbone"], vehicle=Vehicle())
    assert any("wheelbase" in note for note in compare([bare, bare], None, [0.0]).notes)


def test_rows_give_values_and_changes() -> None:
    compared = compare([FRONT, shifted(FRONT), VAN], [0.0], [0.0])
    rows = {row.name: row_cells(row) for row in sheet_rows(compared, "left")}
    assert sheet_headings(3) == ["", "A", "B", "C", "B - A", "C - A", "unit, sign"]
    assert rows["toe_in"] == ["toe-in", "-0.10", "-0.10", "+0.08", "0.00", "+0.18", "deg per wheel, toe-in +"]
    assert rows["transmission_angle"][5].startswith("+")
    assert sheet_headings(4)[1:5] == ["A", "B - A", "C - A", "D - A"]
    assert len(row_cells(sheet_rows(compare([FRONT] * 4, [0.0], [0.0]), "left")[0])) == len(sheet_headings(4))


def test_labelled_arrays_and_tables_hold_the_changes(tmp_path: Path) -> None:
    compared = compare([FRONT, shifted(FRONT)], [0.0, 10.0], [-10.0, 0.0, 10.0])
    dataset = compared.to_xarray()
    assert dataset["bump_steer_change"].dims == ("file", "side", "rack_travel", "wheel_travel")
    assert np.allclose(dataset["bump_steer_change"][1], compared.change(1, "bump_steer"))
    frame = compared.to_dataframe()
    assert len(frame) == 2 * 2 * 2 * 3
    assert list(frame.columns[:5]) == ["file", "side", "rack_travel", "wheel_travel", "status"]
    assert np.allclose(frame["camber_change"][12:], compared.change(1, "camber").ravel())


@pytest.mark.parametrize("pair", [(FRONT, VAN), (REAR, REAR), (UNEQUAL, FRONT)])
def test_every_pair_is_drawn(pair: tuple[Axle, Axle]) -> None:
    figure = comparison_figure(compare(pair))
    titles = [axes.get_title(loc="left") for axes in figure.axes]
    assert "Roll steer" in titles
    assert any("Toe change" in title for title in titles)


def test_one_file_is_no_comparison() -> None:
    with pytest.raises(ValueError, match="two axles"):
        compare([FRONT])
    with pytest.raises(tw.InputError, match="got 1 file; give 2 to 6"):
        check_comparable([FRONT], 6)
    with pytest.raises(tw.InputError, match="got 7 files"):
        check_comparable([FRONT] * 7, 6)
