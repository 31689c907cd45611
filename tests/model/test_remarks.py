from __future__ import annotations

import re

import pytest
from files_for_tests import changed, file_text

from toewright.model import loads

LEFT, STRUT, BOTH = file_text(), file_text("strut"), file_text(right=True)

CASES: list[tuple[str, str, str]] = [
    (
        "near the ground",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 602, 100]"),
        r"wheel_centre .* 100\.0 mm .*nearer the ground",
    ),
    (
        "below the ground",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 602, -3]"),
        "wheel_centre .* below the ground",
    ),
    (
        "in the air",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 602, 300]"),
        "wheel_centre .* too high .*loaded_radius",
    ),
    (
        "pivots exchanged",
        changed(LEFT, "lower_pivot_front", "lower_pivot_front = [-200, 214, 124]"),
        "lower_pivot_front is behind",
    ),
    (
        "ball joint inboard",
        changed(LEFT, "upper_pivot_front", "upper_pivot_front = [118, 540, 291]"),
        "upper_ball_joint is inboard",
    ),
    (
        "wheel inboard",
        changed(LEFT, "wheel_centre", "wheel_centre = [0, 540, 228]"),
        "wheel_centre is inboard of lower_ball_joint",
    ),
    ("tie rod across", changed(LEFT, "tie_rod_inner", "tie_rod_inner = [62, -20, 148]"), "tie_rod_inner lies beyond"),
    (
        "tie rod exchanged",
        changed(
            changed(LEFT, "tie_rod_inner", "tie_rod_inner = [71, 548, 152]"),
            "tie_rod_outer",
            "tie_rod_outer = [62, 228, 148]",
        ),
        "tie_rod_outer is inboard of tie_rod_inner",
    ),
    (
        "full droop",
        changed(LEFT, "lower_pivot_front", "lower_pivot_front = [131, 214, 424]"),
        r"falls 24 deg outward, as at full droop.*design",
    ),
    (
        "full bump",
        changed(LEFT, "lower_pivot_front", "lower_pivot_front = [131, 214, -170]"),
        r"rises 22 deg outward, as at full bump",
    ),
    ("strut leans", changed(STRUT, "strut_axis_point", "strut_axis_point = [-9, 222, 602]"), "strut leans by 59 deg"),
    (
        "rim larger than tyre",
        changed(LEFT, "rim_diameter", "rim_diameter = 460"),
        "rim_diameter = 460 mm is larger than the tyre",
    ),
    ("rim radius", changed(LEFT, "rim_diameter", "rim_diameter = 127"), "rim_diameter = 127 mm .* no radius"),
    ("rim wide", changed(LEFT, "rim_width", "rim_width = 300"), "rim_width = 300 mm is wider"),
    ("toe in minutes", changed(LEFT, "toe_in", "toe_in = -6"), r"toe_in = -6 means 6 deg toe-out of each wheel"),
    ("camber", changed(LEFT, "camber", "camber = 9"), r"setup.camber = \+9 deg \(top outboard \+\)"),
    ("rack axis", changed(LEFT, "axis", "axis = [1, 1, 0]"), "rack.axis is more than 25 deg"),
    ("turns", changed(LEFT, "travel_per_turn", "travel_per_turn = 4000"), "0.015 turns of the hand wheel"),
    (
        "sides differ",
        BOTH.replace("wheel_centre = [0.0, -602.0", "wheel_centre = [0.0, -702.0"),
        r"right\.points\.wheel_centre differs by up to 100 mm",
    ),
]


@pytest.mark.parametrize(("what", "text", "pattern"), CASES, ids=[case[0] for case in CASES])
def test_odd_but_possible_is_a_remark(what: str, text: str, pattern: str) -> None:
    remarks = loads(text).remarks
    assert len(remarks) == 1, remarks
    assert "\n" not in remarks[0]
    assert re.search(pattern, remarks[0]), remarks[0]


def test_remarks_name_the_side() -> None:
    text = BOTH.replace("lower_pivot_front = [131.0, -214.0, 124.0]", "lower_pivot_front = [-200, -214, 124]")
    (remark,) = loads(text).remarks
    assert remark.startswith("right.points.lower_pivot_front")
