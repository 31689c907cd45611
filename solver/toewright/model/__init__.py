"""The hardpoint file and what it describes: plain data, validation, units, words."""

from toewright.model.axle import POINT_NAMES, Axle, Corner, Rack, Setup, Vehicle, Wheel
from toewright.model.errors import InputError

__all__ = ["POINT_NAMES", "Axle", "Corner", "InputError", "Rack", "Setup", "Vehicle", "Wheel"]
