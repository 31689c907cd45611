from __future__ import annotations

import math
from dataclasses import replace

import pytest
from corners import PLAIN, make_axle
from hypothesis import given
from hypothesis import strategies as st

from toewright.model.axle import Wheel
from toewright.model.errors import InputError
from toewright.views.toe import ToeScale, ToeUnit
from toewright_cli.toe import toe_scale, workshop_scale

AXLE = make_axle(PLAIN["double-wishbone"])
RIMMED = replace(AXLE, wheel=Wheel(228.0, rim_diameter=254.0))


@pytest.mark.parametrize(
    ("scale", "degrees", "text"),
    [
        (ToeScale(ToeUnit.DEG), (0.1234,), "0.123 deg toe-in per wheel"),
        (ToeScale(ToeUnit.DEG), (-0.1234,), "0.123 deg toe-out per wheel"),
        (ToeScale(ToeUnit.DEG), (0.0001,), "0.000 deg toe per wheel"),
        (ToeScale(ToeUnit.MIN), (0.25,), "15.0 min of arc toe-in per wheel"),
        (ToeScale(ToeUnit.MM, 254.0, rim=True), (-0.1,), "0.44 mm toe-out per wheel across the 254 mm rim"),
        (ToeScale(ToeUnit.MM, 600.0), (0.5,), "5.24 mm toe-in per wheel across 600 mm"),
        (
            ToeScale(ToeUnit.MM, 254.0, rim=True, total=True),
            (-0.1, -0.1),
            "0.89 mm toe-out total of both wheels across the 254 mm rim",
        ),
        (ToeScale(ToeUnit.DEG, total=True), (0.2, -0.3), "0.100 deg toe-out total of both wheels"),
        (ToeScale(ToeUnit.IN, 254.0, rim=True), (0.1,), "0.0175 inch toe-in per wheel across the 254 mm rim"),
    ],
)
def test_toe_in_full_has_unit_direction_wheel_and_diameter(
    scale: ToeScale, degrees: tuple[float, ...], text: str
) -> None:
    assert scale.text(*degrees) == text


def test_a_table_cell_says_in_or_out_and_columns_line_up() -> None:
    scale = ToeScale(ToeUnit.DEG)
    cells = [scale.cell(angle) for angle in (0.1, -0.1, 0.0, 1e-9)]
    assert cells == ["0.100 in ", "0.100 out", "0.000    ", "0.000    "]


def test_inches_are_not_confused_with_toe_in() -> None:
    assert ToeScale(ToeUnit.IN, 254.0).cell(0.1) == "0.0175 toe-in "


def test_no_pose_is_a_dash() -> None:
    assert ToeScale(ToeUnit.MM, 254.0).cell(math.nan) == "-"
    assert ToeScale(ToeUnit.DEG).text(math.nan) == "unknown"


@given(st.floats(-5, 5), st.floats(100, 900))
def test_a_length_is_the_difference_of_both_ends_of_the_diameter(degrees: float, diameter: float) -> None:
    """Front and rear end of a wheel's diameter turned by toe: the front one is nearer the centre plane by that much."""
    half = diameter / 2
    front = -half * math.sin(math.radians(degrees))
    rear = half * math.sin(math.radians(degrees))
    scale = ToeScale(ToeUnit.MM, diameter)
    assert scale.value(degrees) == pytest.approx(rear - front, abs=1e-12)
    assert ToeScale(ToeUnit.IN, diameter).value(degrees) == pytest.approx((rear - front) / 25.4, abs=1e-12)


@given(st.sampled_from(list(ToeUnit)), st.floats(-5, 5), st.floats(-5, 5))
def test_the_total_is_the_sum_of_the_wheels(unit: ToeUnit, left: float, right: float) -> None:
    scale = ToeScale(unit, 300.0, total=True)
    assert scale.value(left, right) == pytest.approx(scale.value(left) + scale.value(right), abs=1e-12)


def test_the_rim_is_the_default_diameter_and_is_named() -> None:
    assert toe_scale(RIMMED, ToeUnit.MM, None, False).words == "mm per wheel across the 254 mm rim"
    assert toe_scale(RIMMED, ToeUnit.MM, 500.0, True).words == "mm total of both wheels across 500 mm"
    assert toe_scale(AXLE, ToeUnit.DEG, None, False).words == "deg per wheel"


@pytest.mark.parametrize("unit", [ToeUnit.MM, ToeUnit.IN])
def test_a_length_without_a_diameter_is_refused(unit: ToeUnit) -> None:
    with pytest.raises(InputError, match=r"wheel\.rim_diameter is missing.*--toe-diameter"):
        toe_scale(AXLE, unit, None, False)


@pytest.mark.parametrize("diameter", [0.0, -3.0, math.nan, math.inf])
def test_a_diameter_must_be_a_length(diameter: float) -> None:
    with pytest.raises(InputError, match="--toe-diameter"):
        toe_scale(RIMMED, ToeUnit.DEG, diameter, False)


def test_the_workshop_measures_mm_where_a_diameter_is_known_and_minutes_elsewhere() -> None:
    assert workshop_scale(RIMMED, None, None, False).unit is ToeUnit.MM
    assert workshop_scale(AXLE, None, 330.0, False).words == "mm per wheel across 330 mm"
    assert workshop_scale(AXLE, None, None, False).unit is ToeUnit.MIN
    assert workshop_scale(RIMMED, ToeUnit.DEG, None, False).unit is ToeUnit.DEG
