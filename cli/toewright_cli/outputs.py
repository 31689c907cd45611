"""Result files by extension: .csv (long table), .json, .nc (NetCDF)."""

from __future__ import annotations

import csv
import json
from collections.abc import Callable, Iterable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

from toewright_cli.console import finite, warn

if TYPE_CHECKING:
    import xarray as xr

    from toewright.model.axle import Axle

FORMATS = (".csv", ".json", ".nc")

Table = tuple[Sequence[str], Iterable[Sequence[Any]]]
"""Header and rows of a long table."""


def check_out(path: Path | None, force: bool, formats: Sequence[str] = FORMATS, option: str = "--out") -> None:
    """Refuse an output before any work is done.

    Raises:
        InputError: for an unknown extension, a file that exists (without force), or a folder that can't be written to.
    """
    from toewright.model.errors import InputError
    from toewright.model.writing import check_target

    if path is None:
        return
    if path.suffix.lower() in formats or path.is_dir():
        check_target(path, force)
        return
    known = f"{', '.join(formats[:-1])} or {formats[-1]}" if len(formats) > 1 else formats[0]
    got = f"the extension {path.suffix!r} is unknown" if path.suffix else "there is no extension"
    raise InputError(f"{option} {path}: {got}; use {known}")


def save_results(
    path: Path,
    force: bool,
    table: Callable[[], Table],
    document: Callable[[], Any],
    dataset: Callable[[], xr.Dataset],
) -> None:
    """Write one of the three formats, only the one asked for is built, and say so on stderr.

    Args:
        path: the file; its extension chooses.
        force: replace it when it exists.
        table: header and rows of the long table; a number that is NaN becomes an empty cell.
        document: what goes to JSON; see ``toewright_cli.console.finite``.
        dataset: what goes to NetCDF.

    Raises:
        InputError: if the file can't be written.
    """
    from toewright.model.writing import write_safely

    kind = path.suffix.lower()

    def write(place: Path) -> None:
        if kind == ".csv":
            write_csv(place, *table())
        elif kind == ".json":
            place.write_text(json.dumps(finite(document()), indent=1, allow_nan=False) + "\n", encoding="utf-8")
        else:
            dataset().to_netcdf(place, engine="scipy")

    write_safely(path, write, force=force)
    warn(f"wrote {path}")


def write_csv(place: Path, header: Sequence[str], rows: Iterable[Sequence[Any]]) -> None:
    """A table as CSV; numbers keep full double precision, NaN becomes an empty cell."""
    with place.open("w", encoding="utf-8", newline="") as stream:
        writer = csv.writer(stream, lineterminator="\n")
        writer.writerow(header)
        writer.writerows([["" if value != value else value for value in row] for row in rows])


def source_of(axle: Axle) -> dict[str, Any]:
    """What every JSON document begins with: where its numbers come from."""
    from toewright import __version__

    return {
        "toewright": __version__,
        "file": None if axle.path is None else str(axle.path),
        "sha256": axle.sha256,
        "title": axle.title,
        "axes": "ISO 8855: x forward, y left, z up",
    }


def meanings(names: Iterable[str]) -> dict[str, dict[str, str]]:
    """Unit and sign of quantities by name, for JSON documents."""
    from toewright.model.glossary import quantity

    return {name: {"unit": quantity(name).unit, "sign": quantity(name).sign} for name in names}
