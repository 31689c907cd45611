"""Results along one list of positions, for files: the long table and the JSON document."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright_cli.outputs import Table, meanings, source_of

if TYPE_CHECKING:
    from toewright.kinematics.tables import ResultTable
    from toewright.model.axle import Axle


def long_table(result: ResultTable) -> Table:
    """Header and rows of the long table: one row per position, numbers as floats, NaN where not ok."""
    columns = [result.column(name).tolist() for name in result.names]
    return list(result.names), (list(row) for row in zip(*columns, strict=True))


def table_document(axle: Axle, result: ResultTable) -> dict[str, Any]:
    """Everything, for a JSON file: units, signs, notes and each column as a list."""
    return {
        **source_of(axle),
        "quantities": meanings(name for name in result.names if name not in result.labels),
        "notes": list(result.notes),
        **{name: result.column(name) for name in result.names},
    }
