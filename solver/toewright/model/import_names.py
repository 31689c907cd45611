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

from toewright.model.axle import POINT_NAMES, AxleEnd, Kind, Side
from toewright.model.errors import InputError
from toewright.model.files import read_text

OUR_NAMES = tuple(dict.fromkeys(name for names in POINT_NAMES.values() for name in names))
"""Every point name of ours."""

_SIDE_WORDS: Mapping[str, Side] = {
    **dict.fromkeys(("left", "l", "lh", "lhs", "lt", "fl", "lf", "rl", "lr"), "left"),
    **dict.fromkeys(("right", "r", "rh", "rhs", "rt", "fr", "rf", "rr"), "right"),
}
"""Words for the side."""

_LETTERS = frozenset({"l", "r"})
"""Of these, the ones that may mean something else (R for rear): they count only where no point lacks a word for its side."""

_AXLE_WORDS: Mapping[str, AxleEnd] = {
    **dict.fromkeys(("fl", "lf", "fr", "rf"), "front"),
    **dict.fromkeys(("rl", "lr", "rr"), "rear"),
}
"""Words for the side that state the axle too."""

SEVERAL = 5
"""So many points that come with a like one (``ball joint 1``, ``ball joint 2``) make a table of several corners; arms numbered
1 and 2 within one corner are fewer."""

CLOSE = 0.6
"""Likeness of two names above which one is offered as a suggestion, never taken."""


def _word_list(name: str) -> list[str]:
    """A name as its words in turn: any case and any separators; ``center`` is ``centre``."""
    spaced = re.sub(r"(?<=[a-z])(?=[A-Z])", " ", name)
    return re.sub(r"[^a-z0-9]+", " ", spaced.lower()).replace("center", "centre").split()


def _words(name: str) -> frozenset[str]:
    """A name as its words, in any order."""
    return frozenset(_word_list(name))


def _letter_place(labels: Sequence[str]) -> int | None:
    """0 or -1 where every label begins or ends with L or R, and both occur: any other R in them means something else."""
    lists = [_word_list(label) for label in labels]
    for place in (0, -1):
        if {words[place] if len(words) > 1 else "" for words in lists} == _LETTERS:
            return place
    return None


def _mark(label: str, place: int | None) -> str:
    """The label with the letter at that place written out."""
    words = _word_list(label)
    if place is None or not words or words[place] not in _LETTERS:
        return label
    words[place] = _SIDE_WORDS[words[place]]
    return " ".join(words)


@dataclass(frozen=True)
class _Label:
    """A name in a table, taken apart.

    Attributes:
        words: what is left when the words for the side are taken away.
        side: the side stated; None where there is none.
        axle: the axle stated; None where there is none.
    """

    words: frozenset[str]
    side: Side | None
    axle: AxleEnd | None

    @property
    def twin(self) -> frozenset[str]:
        """The words less numbers and single letters, which tell like points of several corners apart."""
        return frozenset(word for word in self.words if len(word) > 1 and not word.isdigit())


def _take_apart(label: str, file: str, *, letters: bool) -> _Label:
    """A label's words and side; ``letters``: L and R alone mean the side."""
    words = _words(label)
    side_words = _SIDE_WORDS.keys() if letters else _SIDE_WORDS.keys() - _LETTERS
    sides = {_SIDE_WORDS[word] for word in words & side_words}
    axles = {_AXLE_WORDS[word] for word in words if word in _AXLE_WORDS}
    if len(sides) > 1 and words.difference(side_words) in _OURS:
        raise InputError(f"{file}: {label!r} states both sides; leave one of them in the name")
    return _Label(
        words.difference(side_words),
        sides.pop() if len(sides) == 1 else None,
        axles.pop() if len(axles) == 1 else None,
    )


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
            twins = {t for t, o in found.items() if o == ours}
            if found.get(theirs, ours) != ours or any(not alike(theirs, twin) for twin in twins):
                raise InputError(f"--names {entry}: {theirs} or {ours} is in two pairs; leave one")
            found[theirs] = ours
    return found


def alike(one: str, other: str) -> bool:
    """Do two names differ in no more than the side?"""
    return one == other or _words(one).difference(_SIDE_WORDS) == _words(other).difference(_SIDE_WORDS)


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
        axle: the axle that the names state; None where they state none.
    """

    kind: Kind
    rows: Mapping[Side | None, Mapping[str, int]]
    unused: tuple[int, ...]
    axle: AxleEnd | None = None


def match_names(
    labels: Sequence[str], names: Mapping[str, str], kind: str | None, side: str | None, file: str
) -> Matched:
    """Find our points among a table's names; words for the side in a name (left, LH, L, FL, ...) are heeded.

    Args:
        labels: names in the table, one a row.
        names: theirs to ours; these come before any likeness. One pair serves both sides where the names differ in the side only.
        kind: "double-wishbone" or "strut"; None to find it.
        side: the corner that is wanted; None for all that are there.
        file: name for messages.

    Raises:
        InputError: for a name map that does not fit, missing points, a point that comes twice, names that contradict the side, a
            table of several corners whose names do not say which is which.
    """
    absent = [theirs for theirs in names if not any(alike(theirs, label) for label in labels)]
    if absent:
        close = difflib.get_close_matches(absent[0], labels, n=1, cutoff=CLOSE)
        hint = f"did you mean {close[0]!r}?" if close else f"the table has {', '.join(labels)}"
        raise InputError(f"{file}: --names {absent[0]}={names[absent[0]]}: there is no such point; {hint}")
    found = _group(labels, names, file, letters=True)
    if None in found.rows and len(found.rows) > 1:
        found = _group(labels, names, file, letters=False)
    apart, rows, unused = found.apart, found.rows, found.unused
    axles = {apart[row].axle for group in rows.values() for row in group.values()} - {None}
    if len(axles) > 1:
        raise InputError(f"{file}: the names state front and rear; leave the rows of one axle")
    rows = _share_out(rows, side, labels, file)
    if None in rows:
        _refuse_two_corners(rows[None], unused, labels, apart, file)
    chosen = _kind(kind, rows, file)
    for which, group in rows.items():
        missing = [name for name in POINT_NAMES[chosen] if name not in group]
        if missing:
            unknown = [(labels[row], apart[row]) for row in unused]
            raise InputError(_missing_sentence(missing, unknown, chosen, which, file))
    wanted = {which: {name: group[name] for name in POINT_NAMES[chosen]} for which, group in rows.items()}
    taken = {row for group in wanted.values() for row in group.values()}
    left = tuple(row for row in range(len(labels)) if row not in taken)
    return Matched(chosen, wanted, left, next(iter(axles), None))


@dataclass(frozen=True)
class _Groups:
    """The table's names taken apart, our points by side stated, and the rows that are none of ours."""

    apart: list[_Label]
    rows: dict[Side | None, dict[str, int]]
    unused: list[int]


def _group(labels: Sequence[str], names: Mapping[str, str], file: str, *, letters: bool) -> _Groups:
    place = _letter_place(labels)
    apart = [_take_apart(_mark(label, place), file, letters=letters) for label in labels]
    mapped = {_take_apart(_mark(theirs, place), file, letters=letters).words: ours for theirs, ours in names.items()}
    rows: dict[Side | None, dict[str, int]] = {}
    unused = []
    for row, label in enumerate(labels):
        words = apart[row].words
        ours = names.get(label) or mapped.get(words) or _OURS.get(words)
        if ours is None:
            unused.append(row)
            continue
        group = rows.setdefault(apart[row].side, {})
        if ours in group:
            both = {apart[group[ours]].axle, apart[row].axle} == {"front", "rear"}
            remedy = "leave the rows of one axle" if both else "remove one, or write the side in the names"
            raise InputError(f"{file}: {ours} comes from both {labels[group[ours]]!r} and {label!r}; {remedy}")
        group[ours] = row
    return _Groups(apart, rows, unused)


def _refuse_two_corners(
    taken: Mapping[str, int], unused: Sequence[int], labels: Sequence[str], apart: Sequence[_Label], file: str
) -> None:
    """Refuse a table that holds a like row for many of the points taken: which corner is which can't be told."""
    among = [*taken.values(), *unused]
    pairs = _like_rows([(labels[row], apart[row]) for row in among])
    if len(pairs) >= SEVERAL:
        raise InputError(_two_corners_sentence(pairs[0], file))


def _like_rows(rows: Sequence[tuple[str, _Label]]) -> list[list[str]]:
    """Labels that differ by numbers and single letters only, in groups of two to four as the corners of a car."""
    groups: dict[frozenset[str], list[str]] = {}
    for label, like in rows:
        if like.side is None and like.twin:
            groups.setdefault(like.twin, []).append(label)
    return [group for group in groups.values() if 2 <= len(group) <= 4]


def _two_corners_sentence(examples: Sequence[str], file: str) -> str:
    shown = " and ".join(repr(example) for example in examples)
    return (
        f"{file}: the table seems to hold more than one corner ({shown}): write left or right in the names (or L and R), "
        "or leave the rows of one corner"
    )


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


def _missing_sentence(
    missing: Sequence[str], unknown: Sequence[tuple[str, _Label]], kind: str, which: str | None, file: str
) -> str:
    """What was not found, and how to name it; never advice that takes one corner's rows out of a table of several."""
    several = _like_rows(unknown)
    if len(several) >= SEVERAL:
        return _two_corners_sentence(several[0], file)
    place = f"the {which} {kind} corner" if which else f"a {kind} corner"
    pairs, both = [], False
    sided = {like.words for _, like in unknown if like.side == "left"} & {
        like.words for _, like in unknown if like.side == "right"
    }
    plain = {" ".join(sorted(like.words)): (label, like) for label, like in unknown}
    for name in missing:
        close = difflib.get_close_matches(" ".join(sorted(_words(name))), plain, n=1, cutoff=CLOSE)
        if close:
            label, like = plain[close[0]]
            both = both or like.words in sided
            pairs.append(f"--names {shlex.quote(f'{label}={name}')}")
    remedy = f"if they are these, add {' '.join(pairs)}" if pairs else "name them with --names theirs=ours"
    if both or (not pairs and sided):
        remedy += " (one pair serves both sides)"
    rest = f" (not understood: {', '.join(label for label, _ in unknown)})" if unknown else ""
    return f"{file}: {', '.join(missing)} not found for {place}{rest}; {remedy if unknown else 'add the missing rows'}"
