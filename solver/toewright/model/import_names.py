"""Names of points in foreign tables, and which of ours they are."""

from __future__ import annotations

import csv
import difflib
import re
import shlex
import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

from toewright.model.axle import POINT_NAMES, Kind, Side
from toewright.model.errors import InputError
from toewright.model.files import read_text

OUR_NAMES = tuple(dict.fromkeys(name for names in POINT_NAMES.values() for name in names))
"""Every point name of ours."""

_SIDE_WORDS: Mapping[str, Side] = {
    "left": "left", "lh": "left", "lhs": "left",
    "right": "right", "rh": "right", "rhs": "right",
}  # fmt: skip

CLOSE = 0.6
"""Likeness of two names above which one is offered as a suggestion, never taken."""


def _words(name: str) -> frozenset[str]:
    """A name as its words: any order, any case and any separators; ``center`` is ``centre``."""
    spaced = re.sub(r"(?<=[a-z])(?=[A-Z])", " ", name)
    return frozenset(re.sub(r"[^a-z0-9]+", " ", spaced.lower()).replace("center", "centre").split())


_OURS = {_words(name): name for name in OUR_NAMES}


def parse_names(entries: Sequence[str]) -> dict[str, str]:
    """A name map, theirs to ours, from ``theirs=ours`` entries and from files of such pairs.

    A file is .csv (columns theirs, ours) or .toml (``"theirs" = "ours"``).

    Raises:
        InputError: if an entry is no pair, ours is no point name, or two entries name the same point.
    """
    found: dict[str, str] = {}
    for entry in entries:
        if Path(entry).suffix.lower() in (".csv", ".toml") and "=" not in entry:
            pairs = _pairs_of_file(Path(entry))
        else:
            theirs, separator, ours = (part.strip() for part in entry.partition("="))
            if not separator or not theirs or not ours:
                raise InputError(f"--names {entry}: is no pair; write theirs=ours, or a .csv or .toml file of pairs")
            pairs = [(theirs, ours)]
        for theirs, ours in pairs:
            if ours not in OUR_NAMES:
                close = difflib.get_close_matches(ours, OUR_NAMES, n=1, cutoff=CLOSE)
                hint = f"did you mean {close[0]!r}?" if close else f"ours are {', '.join(OUR_NAMES)}"
                if theirs in OUR_NAMES:
                    hint = f"write theirs first: {ours}={theirs}"
                raise InputError(f"--names {entry}: {ours!r} is none of our points; {hint}")
            if found.get(theirs, ours) != ours or ours in (o for t, o in found.items() if t != theirs):
                raise InputError(f"--names {entry}: {theirs} or {ours} is in two pairs; leave one")
            found[theirs] = ours
    return found


def _pairs_of_file(path: Path) -> list[tuple[str, str]]:
    text = read_text(path)
    if path.suffix.lower() == ".toml":
        try:
            table = tomllib.loads(text)
        except ValueError as error:
            raise InputError(f'{path}: is not TOML ({error}); write lines such as "theirs" = "ours"') from error
        for key, value in table.items():
            if not isinstance(value, str):
                raise InputError(f'{path}: {key} = {value!r}: is no name; write "{key}" = "ours"')
        return [(key, str(value)) for key, value in table.items()]
    pairs = []
    for number, line in enumerate(text.splitlines(), start=1):
        if not line.strip() or line.lstrip().startswith("#"):
            continue
        cells = [cell.strip() for cell in next(csv.reader([line], delimiter=";" if ";" in line else ","), [])]
        if [cell.lower() for cell in cells] == ["theirs", "ours"]:
            continue
        if len(cells) != 2 or not all(cells):
            raise InputError(f"{path}: line {number} is no pair: {line[:60]!r}; write theirs,ours")
        pairs.append((cells[0], cells[1]))
    return pairs


@dataclass(frozen=True)
class Matched:
    """Which row of a table is which point.

    Attributes:
        kind: corner kind.
        rows: for each side found, our point name to row; the side is None where neither names nor options state it.
        unused: rows that are none of our points.
    """

    kind: Kind
    rows: Mapping[Side | None, Mapping[str, int]]
    unused: tuple[int, ...]


def match_names(
    labels: Sequence[str], names: Mapping[str, str], kind: str | None, side: str | None, file: str
) -> Matched:
    """Find our points among a table's names; words for the side in a name (left, LH, ...) are heeded.

    Args:
        labels: names in the table, one a row.
        names: theirs to ours; these come before any likeness.
        kind: "double-wishbone" or "strut"; None to find it.
        side: the corner that is wanted; None for all that are there.
        file: name for messages.

    Raises:
        InputError: for a name map that does not fit, missing points, a point that comes twice, names that contradict the side.
    """
    absent = [theirs for theirs in names if theirs not in labels]
    if absent:
        close = difflib.get_close_matches(absent[0], labels, n=1, cutoff=CLOSE)
        hint = f"did you mean {close[0]!r}?" if close else f"the table has {', '.join(labels)}"
        raise InputError(f"{file}: --names {absent[0]}={names[absent[0]]}: there is no such point; {hint}")
    rows: dict[Side | None, dict[str, int]] = {}
    unused = []
    for row, label in enumerate(labels):
        words = _words(label)
        sides = {_SIDE_WORDS[word] for word in words if word in _SIDE_WORDS}
        stated = next(iter(sides)) if len(sides) == 1 else None
        ours = names.get(label) or _OURS.get(words.difference(_SIDE_WORDS))
        if ours is None:
            unused.append(row)
            continue
        group = rows.setdefault(stated, {})
        if ours in group:
            raise InputError(
                f"{file}: {ours} comes from both {labels[group[ours]]!r} and {label!r}; remove one, or write the side in the names"
            )
        group[ours] = row
    rows = _share_out(rows, side, labels, file)
    chosen = _kind(kind, rows, file)
    for which, group in rows.items():
        missing = [name for name in POINT_NAMES[chosen] if name not in group]
        if missing:
            raise InputError(_missing_sentence(missing, [labels[row] for row in unused], chosen, which, file))
    wanted = {which: {name: group[name] for name in POINT_NAMES[chosen]} for which, group in rows.items()}
    taken = {row for group in wanted.values() for row in group.values()}
    return Matched(chosen, wanted, tuple(row for row in range(len(labels)) if row not in taken))


def _share_out(
    rows: dict[Side | None, dict[str, int]], side: str | None, labels: Sequence[str], file: str
) -> dict[Side | None, dict[str, int]]:
    """Points without a side go to the one side there is."""
    stated: list[Side] = [which for which in ("left", "right") if which in rows]
    bare = rows.get(None, {})
    if side is not None and stated and side not in stated:
        example = labels[next(iter(rows[stated[0]].values()))]
        raise InputError(f"{file}: --side {side}: but the names say {stated[0]} ({example!r}); correct one of them")
    if side is not None:
        stated = ["left" if side == "left" else "right"]
    if not stated:
        return {None: bare} if bare else {None: {}}
    if len(stated) > 1 and bare:
        example = labels[next(iter(bare.values()))]
        raise InputError(f"{file}: {example!r} states no side but others do; write left or right in its name")
    which = stated[0]
    if len(stated) > 1:
        return {key: rows[key] for key in stated}
    group = dict(rows.get(which, {}))
    for name, row in bare.items():
        if name in group:
            raise InputError(
                f"{file}: {name} comes from both {labels[group[name]]!r} and {labels[row]!r}; remove one of the two rows"
            )
        group[name] = row
    return {which: group}


def _kind(kind: str | None, rows: Mapping[Side | None, Mapping[str, int]], file: str) -> Kind:
    if kind is None:
        whole = [k for k, names in POINT_NAMES.items() if all(set(names) <= group.keys() for group in rows.values())]
        if len(whole) > 1:
            raise InputError(
                f"{file}: has the points of more than one corner type; give --type {' or --type '.join(whole)}"
            )
        strut_only = set(POINT_NAMES["strut"]) - set(POINT_NAMES["double-wishbone"])
        looks_strut = any(strut_only & group.keys() for group in rows.values())
        kind = whole[0] if whole else "strut" if looks_strut else "double-wishbone"
    if kind not in POINT_NAMES:
        raise InputError(f"--type {kind}: there is no such corner; write {' or '.join(POINT_NAMES)}")
    return "strut" if kind == "strut" else "double-wishbone"


def _missing_sentence(missing: Sequence[str], unknown: Sequence[str], kind: str, side: str | None, file: str) -> str:
    which = f"the {side} {kind} corner" if side else f"a {kind} corner"
    pairs = []
    for name in missing:
        close = difflib.get_close_matches(name, [u.lower() for u in unknown], n=1, cutoff=CLOSE)
        theirs = next((u for u in unknown if close and u.lower() == close[0]), None)
        if theirs is not None:
            pairs.append(f"--names {shlex.quote(f'{theirs}={name}')}")
    remedy = f"if they are these, add {' '.join(pairs)}" if pairs else "name them with --names theirs=ours"
    rest = f" (not understood: {', '.join(unknown)})" if unknown else ""
    return f"{file}: {', '.join(missing)} not found for {which}{rest}; {remedy if unknown else 'add the missing rows'}"
