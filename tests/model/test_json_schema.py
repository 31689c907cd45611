from __future__ import annotations

import json
from typing import Any

from toewright.model import POINT_NAMES, json_schema
from toewright.model.files import EXTRA_TABLES
from toewright.model.starters import STARTERS

SCHEMA = json_schema()


def resolve(part: dict[str, Any]) -> dict[str, Any]:
    return SCHEMA["$defs"][part["$ref"].rsplit("/", 1)[1]] if "$ref" in part else part


def test_is_json_and_says_which_schema_it_is() -> None:
    assert json.loads(json.dumps(SCHEMA)) == SCHEMA
    assert SCHEMA["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert SCHEMA["title"] == "toewright hardpoint file"


def test_every_table_is_closed_and_names_what_it_needs() -> None:
    assert SCHEMA["additionalProperties"] is False
    assert set(SCHEMA["required"]) == {"wheel", "left"}
    assert set(SCHEMA["properties"]) == {
        "schema", "title", "axes", "length_unit", "vehicle", "wheel", "setup", "rack", "left", "right", *EXTRA_TABLES,
    }  # fmt: skip
    for definition in SCHEMA["$defs"].values():
        assert definition["additionalProperties"] is False


def test_points_of_each_kind() -> None:
    left = SCHEMA["properties"]["left"]
    assert set(left["discriminator"]["mapping"]) == set(POINT_NAMES) == set(STARTERS)
    for kind, reference in left["discriminator"]["mapping"].items():
        corner = resolve({"$ref": reference})
        points = resolve(corner["properties"]["points"])
        assert tuple(points["required"]) == POINT_NAMES[kind]
        for point in points["properties"].values():
            assert (point["type"], point["minItems"], point["maxItems"]) == ("array", 3, 3)
            assert point["items"]["type"] == "number"


def test_what_people_fill_in_is_described() -> None:
    for name in ("WheelTable", "SetupTable", "RackTable", "VehicleTable"):
        for key, entry in SCHEMA["$defs"][name]["properties"].items():
            assert entry.get("description"), (name, key)
