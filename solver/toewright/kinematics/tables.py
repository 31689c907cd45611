"""Results along one list of positions: named columns with units and signs from the glossary."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, ClassVar

import numpy as np

from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.maps import quantity_attributes
from toewright.kinematics.status import STATUS_NAMES

if TYPE_CHECKING:
    import pandas as pd
    import xarray as xr


@dataclass(frozen=True)
class ResultTable:
    """Columns over N positions; NaN in every computed column where the status is not ok.

    Attributes:
        labels: word columns (N,), such as ``motion``.
        columns: quantity name to (N,), in the units of the glossary.
        status: (N,) numbers of toewright.kinematics.status.
        notes: what the reader must know of the definitions used, one sentence each.
    """

    labels: Mapping[str, np.ndarray[Any, np.dtype[np.str_]]]
    columns: Mapping[str, FloatArray]
    status: StatusArray
    notes: tuple[str, ...]

    dimension: ClassVar[str] = "position"
    order: ClassVar[tuple[str, ...]] = ()
    """Columns of the long table, ``status`` among them; what else there is follows."""

    def __getitem__(self, name: str) -> FloatArray:
        """A column (N,) by name.

        Raises:
            KeyError: if there is no such column; the message lists the names.
        """
        if name not in self.columns:
            raise KeyError(f"{name!r} is not a column; there are {', '.join(self.columns)}")
        return self.columns[name]

    def __len__(self) -> int:
        return int(self.status.size)

    @property
    def status_names(self) -> np.ndarray[Any, np.dtype[np.str_]]:
        """Status of each position as a word, (N,)."""
        return np.array(STATUS_NAMES)[self.status]

    @property
    def names(self) -> tuple[str, ...]:
        """All columns in the order of the long table."""
        return (*self.order, *(name for name in self.columns if name not in self.order))

    def column(self, name: str) -> np.ndarray[Any, np.dtype[Any]]:
        """Any column of the long table: a quantity, a label, or the status as a word."""
        if name == "status":
            return self.status_names
        return self.labels[name] if name in self.labels else self.columns[name]

    def to_dataframe(self) -> pd.DataFrame:
        """The long table, one row per position."""
        import pandas as pd

        return pd.DataFrame({name: self.column(name) for name in self.names})

    def to_xarray(self) -> xr.Dataset:
        """The columns as an xarray Dataset over one dimension, with units and sign sentences as attributes."""
        import xarray as xr

        data: dict[str, Any] = {
            name: (self.dimension, values, quantity_attributes(name)) for name, values in self.columns.items()
        }
        data |= {name: (self.dimension, [str(v) for v in values]) for name, values in self.labels.items()}
        flags = {"flag_values": list(range(len(STATUS_NAMES))), "flag_meanings": " ".join(STATUS_NAMES)}
        data["status"] = (self.dimension, self.status, flags)
        return xr.Dataset(data, attrs={"axes": "ISO 8855: x forward, y left, z up", "notes": " ".join(self.notes)})
