"""Result files by extension: .csv (long table), .json, .nc (NetCDF)."""

from __future__ import annotations

import csv
import json
from collections.abc import Callable, Iterable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

from toewright_cli.console import finite

if TYPE_CHECKING:
    import xarray as xr

FORMATS = (".csv", ".json", ".nc")


def check_out(path: Path | None, force: bool, formats: Sequence[str] = FORMATS, option: str = "--out") -> None:
    """Refuse an output before any work is done.

    Raises:
        InputError: for an unknown extension, a file that exists (without force), or a folder that can't be written to.
    """
    from toewright.model.errors import InputError
    from toewright.model.writing import check_target

    if path is None:
        return
    if path.suffix.lower() not in formats:
        raise InputError(f"{option} {path}: unknown extension {path.suffix!r}; use {', '.join(formats)}")
    check_target(path, force)


def save_results(
    path: Path,
    force: bool,
    table: Callable[[], tuple[Sequence[str], Iterable[Sequence[Any]]]],
    document: Callable[[], Any],
    dataset: Callable[[], xr.Dataset],
) -> None:
    """Write one of the three formats; only the one asked for is built.

    Args:
        path: the file; its extension chooses.
        force: replace it when it exists.
        table: header and rows of the long table; None becomes an empty cell.
        document: what goes to JSON.
        dataset: what goes to NetCDF.
    """
    from toewright.model.writing import write_safely

    kind = path.suffix.lower()

    def write(place: Path) -> None:
        if kind == ".csv":
            header, rows = table()
            with place.open("w", encoding="utf-8", newline="") as stream:
                writer = csv.writer(stream, lineterminator="\n")
                writer.writerow(header)
                writer.writerows(rows)
        elif kind == ".json":
            place.write_text(json.dumps(finite(document()), indent=1, allow_nan=False) + "\n", encoding="utf-8")
        else:
            dataset().to_netcdf(place, engine="scipy")

    write_safely(path, write, force=force)


def cells(values: Iterable[float]) -> list[str]:
    """Numbers in full double precision; empty where not a number."""
    return ["" if v != v else repr(float(v)) for v in values]
