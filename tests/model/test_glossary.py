from __future__ import annotations

from pathlib import Path

import pytest

from toewright.model import GLOSSARY, Quantity, quantity
from toewright.model.glossary import GLOSSARY_HEADINGS, axis_label, explain, glossary_rows

SWEEP = (
    "side, rack_travel, wheel_travel, status, steer_angle, toe_in, camber, caster, kingpin_inclination, scrub_radius, mechanical_trail, "
    "wheel_centre_offset, wheel_centre_trail, bump_steer, bump_steer_rate, steer_rate, camber_gain, transmission_angle, wheel_centre_x, "
    "wheel_centre_y, wheel_centre_z, contact_x, contact_y, contact_z"
)
TURN = (
    "rack_travel, hand_wheel_angle, status, steer_left, steer_right, mean_steer, ideal_inner_steer, ackermann_error, ackermann_percent, "
    "normals_meet_x, normals_meet_y, centre_x, centre_y, slip_front_left, slip_front_right, slip_rear_left, slip_rear_right, turn_radius, "
    "kerb_circle, steering_ratio, camber_left, camber_right, scrub_radius_left, scrub_radius_right, mechanical_trail_left, "
    "mechanical_trail_right, wall_circle"
)
RIDE = (
    "motion, bump, roll_angle, status, wheel_travel_left, wheel_travel_right, toe_in_left, toe_in_right, axle_steer, camber_left, "
    "camber_right, camber_road_left, camber_road_right, track_change, recession_left, recession_right, roll_centre_y, roll_centre_z, "
    "swing_arm_left, swing_arm_right, bump_steer_rate_left, bump_steer_rate_right, anti_dive_left, anti_dive_right, anti_lift_left, "
    "anti_lift_right, anti_squat_left, anti_squat_right"
)
UNITS = {"mm", "deg", "deg/mm", "deg/deg", "mm/mm", "rad/mm", "%", "-"}


@pytest.mark.parametrize("columns", [SWEEP, TURN, RIDE], ids=["sweep", "turn", "ride"])
def test_every_column_is_there(columns: str) -> None:
    names = columns.split(", ")
    assert [quantity(name).name for name in names] == names


@pytest.mark.parametrize("entry", GLOSSARY.values(), ids=lambda entry: entry.name)
def test_every_entry_is_whole(entry: Quantity) -> None:
    assert GLOSSARY[entry.name] is entry
    assert entry.unit in UNITS
    assert entry.label
    assert entry.definition
    assert len(entry.sign) <= 48
    assert entry.sign or entry.unit == "-"  # words and states have no sign
    assert entry.label not in (
        other.label for other in GLOSSARY.values() if other is not entry and other.unit == entry.unit != "mm"
    )


def test_no_name_twice() -> None:
    assert len(glossary_rows()) == len(GLOSSARY)
    assert [row[0] for row in glossary_rows()] == list(GLOSSARY)


def test_toe_is_never_bare() -> None:
    for name, entry in GLOSSARY.items():
        if ("toe" in name or "bump_steer" in name) and entry.sign != "never negative":
            assert "toe-in" in entry.sign
            assert "toe-in" in axis_label(name)


def test_sides_share_unit_and_sign() -> None:
    for name, entry in GLOSSARY.items():
        if name.endswith("_left"):
            other = quantity(name.removesuffix("_left") + "_right")
            assert (other.unit, other.sign) == (entry.unit, entry.sign)
            assert other.label == entry.label.replace("left", "right")
        base = GLOSSARY.get(name.removesuffix("_left").removesuffix("_right"))
        if base is not None:
            assert base.unit == entry.unit
            assert base.sign == entry.sign


def test_labels() -> None:
    assert axis_label("toe_in") == "toe-in (deg, toe-in +)"
    assert axis_label("toe_in", "mm") == "toe-in (mm, toe-in +)"
    assert axis_label("status") == "status"
    assert axis_label("rack_travel") == "rack travel (mm, along the rack axis +)"


def test_rows_for_documents() -> None:
    rows = glossary_rows(["camber", "toe_in", "camber"])
    assert [row[0] for row in rows] == ["camber", "toe_in"]
    assert all(len(row) == len(GLOSSARY_HEADINGS) for row in rows)
    assert explain(["camber"]) == [("camber", "deg", "top outboard +", quantity("camber").definition)]


def test_unknown_name() -> None:
    with pytest.raises(KeyError, match="'toe_out' is not in the glossary"):
        quantity("toe_out")


def test_documents_do_not_repeat_it() -> None:
    root = Path(__file__).parents[2]
    for document in ("README.md", "DEVELOPERS.md"):
        text = " ".join((root / document).read_text(encoding="utf-8").split())
        repeated = [
            entry.name for entry in GLOSSARY.values() if len(entry.definition) > 60 and entry.definition in text
        ]
        assert repeated == [], document
