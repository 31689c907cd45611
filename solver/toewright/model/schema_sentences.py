"""What is wrong with a hardpoint file, in one sentence: file, key, value, remedy."""

from __future__ import annotations

import difflib
import re
from collections.abc import Mapping, Sequence
from typing import Any

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

from toewright.model import schema
from toewright.model.axle import POINT_NAMES

_TABLES: Mapping[str, type[BaseModel]] = {
    "vehicle": schema.VehicleTable,
    "wheel": schema.WheelTable,
    "setup": schema.SetupTable,
    "rack": schema.RackTable,
}

_DECIMAL_COMMA = re.compile(r"=\s*[+-]?\d+,\d+\s*(#.*)?$")

SHOWN = 60
"""Characters of a value or a line that are shown."""


def syntax_sentence(text: str, file: str, reason: str) -> str:
    """For text that is not TOML; ``reason`` is the parser's, which ends in ``(at line 3, column 7)`` or ``(at end of document)``."""
    what, _, where = reason.rpartition(" (at ")
    if where.startswith("line "):
        line, _, column = where.removeprefix("line ").rstrip(")").partition(", column ")
        shown = _line_at(text, int(line), int(column))
        remedy = "write a decimal point, not a comma" if _DECIMAL_COMMA.search(shown) else "mend that line"
        return f"{file}: line {line}, column {column} is not TOML: {shown!r} ({_lower(what)}); {remedy}"
    if where.startswith("end of document"):
        lines = text.rstrip().splitlines()
        shown = lines[-1].strip()[:SHOWN] if lines else ""
        return f"{file}: line {max(len(lines), 1)} is not TOML: {shown!r} ({_lower(what)} at the end); mend that line"
    if "digits" in reason:
        return f"{file}: has a number of thousands of digits; correct it"
    return f"{file}: is not TOML ({_lower(reason)}); mend that value"


def _line_at(text: str, line: int, column: int) -> str:
    lines = text.replace("\r\n", "\n").split("\n")
    whole = lines[line - 1] if 0 < line <= len(lines) else ""
    start = max(0, column - SHOWN) if len(whole) > SHOWN else 0
    return whole[start : start + SHOWN].strip()


def _lower(text: str) -> str:
    return text[:1].lower() + text[1:]


def schema_sentence(error: ValidationError, file: str) -> str:
    """For TOML that is no hardpoint file: the first fault, those that explain others before them."""
    problems = error.errors(include_url=False)
    first = min(problems, key=_rank)
    where = _keys(first)
    missing = [_keys(p)[-1] for p in problems if p["type"] == "missing" and _keys(p)[:-1] == where[:-1]]
    told = len(missing) if first["type"] == "missing" else 1
    more = len(problems) - told
    rest = f" (and {more} more {'fault' if more == 1 else 'faults'})" if more else ""
    return f"{file}: {_what(first, where, missing)}{rest}"


def _keys(problem: ErrorDetails) -> list[str]:
    return [str(part) for part in problem["loc"] if part not in POINT_NAMES]


def _key(where: Sequence[str]) -> str:
    """A key as people write it; the number of a coordinate becomes its letter."""
    if where[-1:] and where[-1] in ("0", "1", "2") and len(where) > 1:
        return f"{'.'.join(where[:-1])}, {'xyz'[int(where[-1])]}"
    return ".".join(where)


def _rank(problem: ErrorDetails) -> int:
    return {"extra_forbidden": 0, "missing": 2}.get(problem["type"], 1)


def _what(problem: ErrorDetails, where: list[str], missing: Sequence[str]) -> str:
    key, kind, value = _key(where), problem["type"], problem.get("input")
    shown = _shown(value)
    context = problem.get("ctx", {})
    if kind == "extra_forbidden":
        return f"{key}{shown}: unknown key; {_unknown_hint(where, problem['loc'])}"
    if kind == "missing":
        table = ".".join(where[:-1])
        return _missing(table, list(missing))
    if kind == "union_tag_not_found":
        return f'{key}.type: is missing; add type = "double-wishbone" or type = "strut"'
    if kind == "union_tag_invalid":
        tag = value.get("type") if isinstance(value, Mapping) else value
        return f"{key}.type{_shown(tag)}: there is no such corner; {_choice(tag, list(POINT_NAMES))}"
    if kind == "literal_error":
        if where == ["schema"]:
            return f"schema{shown}: this version reads schema = 1; write that, or take the version of toewright it was made for"
        allowed = re.findall(r"'([^']*)'", str(context.get("expected")))
        return f"{key}{shown}: is not known; {_choice(value, allowed)}"
    if kind == "finite_number":
        return f"{key}{shown}: is not a finite number; write a number"
    if kind == "float_type" and type(value) is int:
        return f"{key}{shown}: must be at most {schema.LARGEST:.0f}; correct the number or its unit"
    if kind in ("float_type", "float_parsing", "int_type"):
        return f"{key}{shown}: is {_kind_of(value)} where a number is wanted; write a number, without quotes"
    if kind == "string_type":
        return f"{key}{shown}: is {_kind_of(value)} where text is wanted; write it in quotes"
    if kind == "list_type":
        return f"{key}{shown}: is {_kind_of(value)} where a point is wanted; write [x, y, z]"
    if kind in ("too_short", "too_long"):
        count = len(value) if isinstance(value, Sequence) else 0
        comma = ", with decimal points, not commas" if count > 4 else ""
        return f"{key} = {str(value)[:SHOWN]}: has {count} numbers; write three, [x, y, z]{comma}"
    if kind in ("model_type", "model_attributes_type", "dict_type"):
        return f"{key}{shown}: is {_kind_of(value)} where a table is wanted; write [{key}] and its keys below"
    limits = {"greater_than": ("above", "gt"), "less_than": ("below", "lt")}
    limits |= {"greater_than_equal": ("at least", "ge"), "less_than_equal": ("at most", "le")}
    if kind in limits:
        word, limit = limits[kind]
        return f"{key}{shown}: must be {word} {_plain(context.get(limit))}; correct the number or its unit"
    if kind == "value_error":
        return f"{key}{shown}: {context.get('error')}"
    return f"{key}{shown}: {_lower(problem['msg'])}; correct it"


def _plain(limit: object) -> str:
    return f"{limit:.0f}" if isinstance(limit, float) and limit == round(limit) else str(limit)


def _shown(value: object) -> str:
    if not isinstance(value, str | int | float | bool):
        return ""
    if isinstance(value, bool):
        return f" = {str(value).lower()}"
    try:
        text = f'"{value}"' if isinstance(value, str) else str(value)
    except ValueError:
        return " = a number of thousands of digits"
    text = text.encode("unicode_escape").decode("ascii") if not text.isprintable() else text
    return f" = {text if len(text) <= SHOWN else text[:SHOWN] + '...'}"


def _kind_of(value: object) -> str:
    names = {
        str: "text",
        bool: "true or false",
        int: "a whole number",
        float: "a number",
        list: "a list",
        dict: "a table",
    }
    return names.get(type(value), "a date or time")


def _choice(value: object, allowed: Sequence[str]) -> str:
    close = difflib.get_close_matches(str(value).lower(), allowed, n=1, cutoff=0.5)
    if close and len(close[0]) > 3:
        return f'did you mean "{close[0]}"?'
    return f"write {' or '.join(chr(34) + word + chr(34) for word in allowed)}"


def _missing(table: str, names: list[str]) -> str:
    verb = "is" if len(names) == 1 else "are"
    if table.endswith(".points"):
        remedy = f"{names[0]} = [x, y, z]" if len(names) == 1 else "each as name = [x, y, z]"
        return f"{table}: {', '.join(names)} {verb} missing; add {remedy}"
    if not table and names[0] in ("left", "wheel"):
        example = {"left": 'type = "double-wishbone" and [left.points]', "wheel": "loaded_radius"}[names[0]]
        return f"{', '.join(names)}: {verb} missing; add [{names[0]}] with {example}"
    where = f" under [{table}]" if table else ""
    return f"{', '.join(f'{table}.{name}'.lstrip('.') for name in names)}: {verb} missing; add {names[0]}{where}"


def _unknown_hint(where: list[str], location: tuple[Any, ...]) -> str:
    name, known = where[-1], _known_keys(where[:-1], location)
    if where[-2:-1] == ["points"]:
        other = next((kind for kind, names in POINT_NAMES.items() if kind not in location and name in names), None)
        if other is not None:
            return f'it belongs to type = "{other}"; correct the type or the point'
    close = difflib.get_close_matches(name.lower(), known, n=1, cutoff=0.55)
    if close:
        return f"did you mean {close[0]!r}?"
    home = next(
        (f"[{table}]" for table, model in _TABLES.items() if name in model.model_fields and where[:-1] != [table]), None
    )
    if home is not None:
        return f"it belongs under {home}"
    return f"remove it; allowed here: {', '.join(known)}"


def _known_keys(path: Sequence[str], location: tuple[Any, ...]) -> list[str]:
    if not path:
        return [entry.alias or name for name, entry in schema.HardpointFile.model_fields.items()]
    if path[0] in _TABLES:
        return list(_TABLES[path[0]].model_fields)
    if list(path[1:]) == ["points"]:
        return list(next(names for kind, names in POINT_NAMES.items() if kind in location))
    return ["type", "points"]
