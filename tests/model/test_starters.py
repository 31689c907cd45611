from __future__ import annotations

import re

import pytest

from toewright.model import POINT_NAMES, loads
from toewright.model.schema import RackTable, SetupTable, VehicleTable, WheelTable
from toewright.model.starters import STARTERS, starter_text


def test_one_for_each_kind() -> None:
    assert set(STARTERS) == set(POINT_NAMES)


@pytest.mark.parametrize("kind", STARTERS)
def test_loads_without_remarks_and_is_of_its_kind(kind: str) -> None:
    axle = loads(starter_text(kind))
    assert axle.left.kind == kind
    assert axle.remarks == ()
    assert axle.symmetric
    assert axle.rack is not None


@pytest.mark.parametrize("kind", STARTERS)
def test_shows_every_key_set_or_in_a_comment(kind: str) -> None:
    text = starter_text(kind)
    for table in (VehicleTable, WheelTable, SetupTable, RackTable):
        for key in table.model_fields:
            assert re.search(rf"^(# )?{key} = ", text, re.MULTILINE), key


@pytest.mark.parametrize("kind", STARTERS)
def test_commented_keys_are_valid_when_taken(kind: str) -> None:
    text = starter_text(kind).split("# [right]")[0]
    taken = re.sub(r"^# (\w+ = )", r"\1", text, flags=re.MULTILINE)
    assert taken != text
    axle = loads(taken)
    assert axle.vehicle.brakes is not None
    assert axle.vehicle.cg_height is not None
    assert [remark for remark in axle.remarks if "other_axle" not in remark] == []


@pytest.mark.parametrize("kind", STARTERS)
def test_comments_stand_in_one_column(kind: str) -> None:
    text = starter_text(kind)
    columns = {line.index(" # ") for line in text.splitlines() if " # " in line and "= [" not in line}
    assert len(columns) == 1, columns
