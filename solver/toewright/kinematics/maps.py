"""The result of a sweep: every corner quantity over side, rack travel and wheel travel."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from toewright.core.types import FloatArray, IntArray, StatusArray
from toewright.kinematics.status import STATUS_NAMES, STOP_CAUSES
from toewright.model.glossary import GLOSSARY

if TYPE_CHECKING:
    import pandas as pd
    import xarray as xr

SWEEP_COLUMNS = (
    "steer_angle",
    "toe_in",
    "camber",
    "caster",
    "kingpin_inclination",
    "scrub_radius",
    "mechanical_trail",
    "wheel_centre_offset",
    "wheel_centre_trail",
    "bump_steer",
    "bump_steer_rate",
    "steer_rate",
    "camber_gain",
    "transmission_angle",
    "wheel_centre_x",
    "wheel_centre_y",
    "wheel_centre_z",
    "contact_x",
    "contact_y",
    "contact_z",
)
"""Quantities of the long table, in its order, after side, rack_travel, wheel_travel and status."""

VECTORS = {
    "wheel_centre": "wheel_centre",
    "contact_point": "contact",
    "kingpin_ground_point": "kingpin_ground",
    "spin_axis": "spin_axis",
    "steering_axis": "steering_axis",
    "contact_travel_slope": "contact_travel",
    "wheel_centre_travel_slope": "wheel_centre_travel",
    "twist_travel": "twist_travel",
    "contact_rack_slope": "contact_rack",
    "wheel_centre_rack_slope": "wheel_centre_rack",
    "twist_rack": "twist_rack",
}
"""Vector results and the stem of their three columns."""


@dataclass(frozen=True)
class Stop:
    """Where the linkage stops on the way through the requested range.

    Attributes:
        side: "left" or "right".
        status: "locked" or "out-of-reach".
        along: what was being moved, "rack_travel" or "wheel_travel".
        rack_travel, wheel_travel: the last place that was reached, mm.
        requested: how far the request went along that line, mm.
    """

    side: str
    status: str
    along: str
    rack_travel: float
    wheel_travel: float
    requested: float

    @property
    def cause(self) -> str:
        """Why, in words."""
        return STOP_CAUSES[self.status]

    @property
    def place(self) -> str:
        """Where, in words with units: ``rack travel -55.99 mm (wheel travel 0 mm)``."""
        words = {
            "rack_travel": f"rack travel {self.rack_travel:+.2f} mm",
            "wheel_travel": f"wheel travel {self.wheel_travel:+.2f} mm",
        }
        held = "wheel_travel" if self.along == "rack_travel" else "rack_travel"
        return f"{words[self.along]} ({words[held].replace('+0.00', '0')})"

    @property
    def sentence(self) -> str:
        """What happens there, in one sentence with units."""
        return f"{self.side}: stops at {self.place[:-1]}; {self.requested:+.2f} mm was asked for): {self.cause}"


@dataclass(frozen=True)
class CornerMaps:
    """Corner results over axes (side, rack_travel, wheel_travel); NaN in every quantity where the status is not ok.

    Attributes:
        sides: names along the first axis.
        rack_travel: (R,) mm, + to the left.
        wheel_travel: (T,) mm, + bump.
        travel_at: "wheel-centre" or "contact-point".
        status: (S, R, T), numbers of toewright.kinematics.status.
        iterations: (S, R, T) Newton iterations of the pose.
        residual: (S, R, T) largest error of a link's length, mm.
        scalars: quantity name to (S, R, T).
        vectors: names of VECTORS to (S, R, T, 3).
        joints: per side, point name to (R, T, 3) mm.
        link_angles: per side, names of toewright.kinematics.joints.LINK_ANGLES to (R, T).
        poses: (S, R, T, 6), see toewright.kinematics.batch.Batch.
        stops: where the linkage stops within the requested range; empty when it does not.
    """

    sides: tuple[str, ...]
    rack_travel: FloatArray
    wheel_travel: FloatArray
    travel_at: str
    status: StatusArray
    iterations: IntArray
    residual: FloatArray
    scalars: Mapping[str, FloatArray]
    vectors: Mapping[str, FloatArray]
    joints: tuple[Mapping[str, FloatArray], ...]
    link_angles: tuple[Mapping[str, FloatArray], ...]
    poses: FloatArray
    stops: tuple[Stop, ...]

    def __getitem__(self, name: str) -> FloatArray:
        """A quantity (S, R, T) or a vector (S, R, T, 3) by name.

        Raises:
            KeyError: if there is no such quantity; the message lists the names.
        """
        if name in self.scalars:
            return self.scalars[name]
        if name in self.vectors:
            return self.vectors[name]
        raise KeyError(f"{name!r} is not a result; there are {', '.join([*self.scalars, *self.vectors])}")

    def side_index(self, side: str) -> int:
        """Place of a side on the first axis.

        Raises:
            ValueError: if that side was not swept.
        """
        return self.sides.index(side)

    @property
    def status_names(self) -> np.ndarray[tuple[int, ...], np.dtype[np.str_]]:
        """Status of each pose as a word, (S, R, T)."""
        return np.array(STATUS_NAMES)[self.status]

    def to_xarray(self) -> xr.Dataset:
        """All scalar quantities and vectors as an xarray Dataset with named dims, units and sign sentences."""
        import xarray as xr

        dims = ("side", "rack_travel", "wheel_travel")
        data: dict[str, object] = {
            "status": (dims, self.status, {"flag_values": [0, 1, 2], "flag_meanings": " ".join(STATUS_NAMES)}),
            "iterations": (dims, self.iterations.astype(np.int32), {"long_name": "Newton iterations"}),
            "residual": (dims, self.residual, {"units": "mm", "long_name": "largest error of a link's length"}),
        }
        for name, values in self.scalars.items():
            data[name] = (dims, values, quantity_attributes(name))
        for name, values in self.vectors.items():
            data[name] = ((*dims, "axis"), values, quantity_attributes(name))
        coords = {
            "side": list(self.sides),
            "rack_travel": ("rack_travel", self.rack_travel, quantity_attributes("rack_travel")),
            "wheel_travel": ("wheel_travel", self.wheel_travel, quantity_attributes("wheel_travel")),
            "axis": ["x", "y", "z"],
        }
        attributes = {"travel_at": self.travel_at, "axes": "ISO 8855: x forward, y left, z up"}
        return xr.Dataset(data, coords=coords, attrs=attributes)

    def to_dataframe(self) -> pd.DataFrame:
        """The long table, one row per pose: side, rack_travel, wheel_travel, status, then SWEEP_COLUMNS."""
        import pandas as pd

        side, rack, travel = np.meshgrid(np.array(self.sides), self.rack_travel, self.wheel_travel, indexing="ij")
        table: dict[str, object] = {
            "side": side.ravel(),
            "rack_travel": rack.ravel(),
            "wheel_travel": travel.ravel(),
            "status": self.status_names.ravel(),
        }
        table.update({name: self.scalars[name].ravel() for name in SWEEP_COLUMNS})
        return pd.DataFrame(table)


def quantity_attributes(name: str) -> dict[str, str]:
    """Attributes of a quantity for a labelled array: units, long name, sign, definition; from the glossary."""
    quantity = GLOSSARY.get(name)
    if quantity is None:
        return {}
    return {
        "units": quantity.unit,
        "long_name": quantity.label,
        "sign": quantity.sign,
        "definition": quantity.definition,
    }
