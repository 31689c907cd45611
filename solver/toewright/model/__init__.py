"""The hardpoint file and what it describes: plain data, validation, units, words. Names are loaded when first used."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from toewright.model.axle import POINT_NAMES, Axle, Corner, Rack, Setup, Vehicle, Wheel
    from toewright.model.csvfiles import points_from_csv, points_to_csv
    from toewright.model.editing import dumps, save, save_points, set_points
    from toewright.model.errors import InputError
    from toewright.model.files import load, loads
    from toewright.model.glossary import GLOSSARY, Quantity, quantity
    from toewright.model.schema import json_schema

_HOMES = {
    "GLOSSARY": "glossary",
    "POINT_NAMES": "axle",
    "Axle": "axle",
    "Corner": "axle",
    "InputError": "errors",
    "Quantity": "glossary",
    "Rack": "axle",
    "Setup": "axle",
    "Vehicle": "axle",
    "Wheel": "axle",
    "dumps": "editing",
    "json_schema": "schema",
    "load": "files",
    "loads": "files",
    "points_from_csv": "csvfiles",
    "points_to_csv": "csvfiles",
    "quantity": "glossary",
    "save": "editing",
    "save_points": "editing",
    "set_points": "editing",
}

__all__ = [
    "GLOSSARY",
    "POINT_NAMES",
    "Axle",
    "Corner",
    "InputError",
    "Quantity",
    "Rack",
    "Setup",
    "Vehicle",
    "Wheel",
    "dumps",
    "json_schema",
    "load",
    "loads",
    "points_from_csv",
    "points_to_csv",
    "quantity",
    "save",
    "save_points",
    "set_points",
]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'toewright.model' has no attribute {name!r}")
    return getattr(import_module(f"toewright.model.{_HOMES[name]}"), name)
