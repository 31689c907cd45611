"""Starter files for `toewright new`."""

from __future__ import annotations

from importlib.resources import files

STARTERS = {"double-wishbone": "double_wishbone.toml", "strut": "strut.toml"}
"""Starter file of each corner kind."""


def starter_text(kind: str) -> str:
    """Text of the starter file of a corner kind."""
    return files(__name__).joinpath(STARTERS[kind]).read_text(encoding="utf-8")
