from __future__ import annotations

import csv
import json
import os
from pathlib import Path

import numpy as np
import pytest
import xarray as xr
from command_line import Cli
from corners import HARDPOINTS, SAMPLES

import toewright as tw
from toewright.kinematics.status import STATUS_NAMES

FRONT = HARDPOINTS / "marten_front.toml"
REAR = HARDPOINTS / "marten_rear.toml"
UNEQUAL = HARDPOINTS / "ibex_front.toml"

FIRST_COLUMNS = (
    "side,rack_travel,wheel_travel,status,steer_angle,toe_in,camber,caster,kingpin_inclination,scrub_radius,mechanical_trail,"
    "wheel_centre_offset,wheel_centre_trail,bump_steer,bump_steer_rate,steer_rate,camber_gain,transmission_angle,"
    "wheel_centre_x,wheel_centre_y,wheel_centre_z,contact_x,contact_y,contact_z"
).split(",")

BEYOND = "-300:320:9"
"""Wheel travel that the front sample cannot follow to its ends."""


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_shows_bump_steer_worst_place_and_ranges(cli: Cli, sample: Path) -> None:
    result = cli("sweep", sample)
    assert result.code == 0
    assert "Bump steer, left wheel: change of toe from zero wheel travel, in deg per wheel" in result.out
    assert "Worst place: " in result.out
    assert "Signs: steer angle: to the left +;" in result.out
    assert "all reached" in result.out


@pytest.mark.parametrize("width", [80, 100])
def test_tables_keep_to_the_width(cli: Cli, monkeypatch: pytest.MonkeyPatch, width: int) -> None:
    result = cli("sweep", UNEQUAL)
    assert result.code == 0
    monkeypatch.setenv("COLUMNS", str(width))
    for arguments in (["sweep", UNEQUAL, "--toe-unit", "in"], ["check", UNEQUAL, "--explain"]):
        done = cli(*arguments)
        tables = [line for line in done.out.splitlines() if line.startswith(" ")]
        assert tables
        assert max(len(line) for line in tables) <= width
        assert "…" not in done.out


def test_the_table_agrees_with_the_library(cli: Cli) -> None:
    result = cli("sweep", FRONT, "--travel", "-20:20:5")
    maps = tw.sweep(tw.load(FRONT), None, np.linspace(-20, 20, 5))
    worst = float(np.nanmax(np.abs(maps["bump_steer"][0])))
    lines = result.out.splitlines()
    body = [line.split() for line in lines if line.strip().startswith(("+20.0", "+10.0", "0.0", "-10.0", "-20.0"))]
    assert [row[0] for row in body] == ["+20.0", "+10.0", "0.0", "-10.0", "-20.0"]
    for row, j in zip(body, (4, 3, 2, 1, 0), strict=True):
        values = maps["bump_steer"][0, [0, 10, 20], j]
        expected = [f"{abs(v):.3f}{'' if v == 0.0 else ' in' if v > 0 else ' out'}" for v in values]
        assert " ".join(row[1:]) == " ".join(expected)
    assert (
        f"Worst place: {worst:.3f} deg toe-in per wheel: left wheel at rack +30.0 mm, wheel travel +20 mm (bump)"
        in (result.out)
    )


def test_locks_are_named_by_the_way_the_wheel_turns(cli: Cli) -> None:
    ahead = cli("sweep", FRONT, "--side", "left").out
    assert ahead.index("right lock") < ahead.index("straight ahead") < ahead.index("left lock")
    behind = cli("sweep", HARDPOINTS / "linnet_front.toml", "--side", "left").out
    assert behind.index("left lock") < behind.index("straight ahead") < behind.index("right lock")
    part = cli("sweep", FRONT, "--rack", "-10,0,10").out
    assert "to the left" in part
    assert " lock" not in part.split("Over the whole map")[0]


def test_mirror_images_are_shown_once_and_unequal_sides_twice(cli: Cli) -> None:
    once = cli("sweep", FRONT).out
    assert "right wheel:" not in once
    assert "The right wheel does the same with the rack the other way" in once
    assert "with the rack" not in cli("sweep", REAR).out
    twice = cli("sweep", UNEQUAL).out
    assert "Bump steer, left wheel:" in twice
    assert "Bump steer, right wheel:" in twice
    assert "Over the whole map, left wheel" in twice
    assert "Over the whole map, right wheel" in twice
    assert "Over the whole map, right wheel" not in once
    uneven = cli("sweep", FRONT, "--rack", "0,10,20").out
    assert "Bump steer, right wheel:" in uneven


def test_the_total_of_both_wheels(cli: Cli) -> None:
    result = cli("sweep", UNEQUAL, "--toe-total", "--toe-unit", "min", "--rack", "0", "--travel", "-30,0,30")
    maps = tw.sweep(tw.load(UNEQUAL), [0.0], [-30.0, 0.0, 30.0])
    total = 60.0 * maps["bump_steer"][:, 0, 2].sum()
    assert "in min of arc total of both wheels" in result.out
    line = next(line for line in result.out.splitlines() if line.strip().startswith("+30.0"))
    assert line.split() == ["+30.0", f"{abs(total):.1f}", "in" if total > 0 else "out"]
    refused = cli("sweep", UNEQUAL, "--toe-total", "--side", "left")
    assert refused.code == 2
    assert "--toe-total" in refused.complaint


def test_where_the_linkage_stops_is_said_and_shown(cli: Cli) -> None:
    result = cli("sweep", FRONT, "--travel", BEYOND)
    assert result.code == 0
    assert "84 not" in result.out
    assert "The linkage stops inside this range" in result.out
    row = next(line for line in result.out.splitlines() if line.strip().startswith("+320.0"))
    assert set(row.split()[1:]) <= set(STATUS_NAMES) - {"ok"}
    assert "stops at wheel travel" in result.out


def test_rack_beyond_the_stroke_is_remarked(cli: Cli) -> None:
    result = cli("sweep", FRONT, "--rack", "-40:40:5")
    assert result.code == 0
    assert result.err.splitlines()[-1] == "remark: --rack goes beyond the rack's stroke of 30 mm each way"


def test_json_summary(cli: Cli) -> None:
    result = cli("sweep", FRONT, "--json", "--toe-unit", "mm", "--travel", "-20:20:5")
    assert result.code == 0
    summary = json.loads(result.out)
    maps = tw.sweep(tw.load(FRONT), None, np.linspace(-20, 20, 5))
    assert summary["poses"] == summary["poses_ok"] == 2 * 21 * 5
    assert summary["toe_scale"] == "mm per wheel across the 254 mm rim, toe-in +"
    left = summary["bump_steer"][0]
    assert [c["rack_travel"] for c in left["columns"]] == [-30.0, 0.0, 30.0]
    for column, i in zip(left["columns"], (0, 10, 20), strict=True):
        assert column["deg"] == maps["bump_steer"][0, i].tolist()
        in_mm = 254.0 * np.sin(np.radians(maps["bump_steer"][0, i]))
        assert column["toe_scale"] == pytest.approx(in_mm, abs=1e-12)
    assert left["worst"]["deg"] == pytest.approx(np.max(np.abs(maps["bump_steer"][0])), abs=1e-15)
    assert summary["ranges"]["right"]["camber"]["least"]["value"] == maps["camber"][1].min()
    assert summary["quantities"]["camber"]["sign"] == "top outboard +"


def read_csv(path: Path) -> tuple[list[str], list[list[str]]]:
    with path.open(newline="") as stream:
        rows = list(csv.reader(stream))
    return rows[0], rows[1:]


def test_csv_is_the_long_table_in_full_precision_with_empty_cells(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "maps.csv"
    result = cli("sweep", FRONT, "--travel", BEYOND, "--rack", "-30:30:5", "--out", path)
    assert result.code == 0
    assert f"wrote {path}" in result.err
    header, rows = read_csv(path)
    assert header == FIRST_COLUMNS
    maps = tw.sweep(tw.load(FRONT), np.linspace(-30, 30, 5), np.linspace(-300, 320, 9))
    assert len(rows) == maps.status.size
    expected = iter(np.ndindex(maps.status.shape))
    for row in rows:
        s, i, j = next(expected)
        assert row[0] == maps.sides[s]
        assert (float(row[1]), float(row[2])) == (maps.rack_travel[i], maps.wheel_travel[j])
        assert row[3] == STATUS_NAMES[maps.status[s, i, j]]
        if row[3] == "ok":
            assert [float(cell) for cell in row[4:]] == [maps[name][s, i, j] for name in FIRST_COLUMNS[4:]]
        else:
            assert set(row[4:]) == {""}
    # straight ahead both ends of travel are the ends of the arms, with the tie rod nearly square to its arm
    ahead = {float(row[2]): row[3] for row in rows if float(row[1]) == 0.0}
    assert ahead[-300.0] == ahead[320.0] == "out-of-reach"
    assert ahead[10.0] == "ok"


def test_json_and_netcdf_hold_the_same_maps(cli: Cli, tmp_path: Path) -> None:
    maps = tw.sweep(tw.load(UNEQUAL), [-20.0, 0.0, 20.0], [-300.0, 0.0, 30.0])
    grid = ["--rack", "-20:20:3", "--travel", "-300,0,30"]
    for name in ("maps.json", "maps.nc"):
        assert cli("sweep", UNEQUAL, *grid, "--out", tmp_path / name).code == 0
    document = json.loads((tmp_path / "maps.json").read_text())
    assert document["dims"] == ["side", "rack_travel", "wheel_travel"]
    assert document["quantities"]["caster"] == {"unit": "deg", "sign": "top rearward +"}
    assert document["sha256"] == tw.load(UNEQUAL).sha256
    with xr.open_dataset(tmp_path / "maps.nc", engine="scipy") as dataset:
        for name in ("toe_in", "bump_steer", "contact_y"):
            plain = np.array(document[name], dtype=float)
            np.testing.assert_array_equal(plain, maps[name])
            np.testing.assert_array_equal(dataset[name].to_numpy(), maps[name])
            assert dataset[name].dims == ("side", "rack_travel", "wheel_travel")
        assert dataset["toe_in"].attrs["units"] == "deg"
        assert dataset["toe_in"].attrs["sign"] == "toe-in +"
    assert np.array(document["status"]).tolist() == maps.status_names.tolist()


def test_an_existing_output_is_kept_without_force(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "maps.csv"
    path.write_text("mine")
    refused = cli("sweep", FRONT, "--out", path)
    assert refused.code == 2
    assert "exists already" in refused.complaint
    assert "--force" in refused.complaint
    assert path.read_text() == "mine"
    assert cli("sweep", FRONT, "--out", path, "--force").code == 0
    assert read_csv(path)[0] == FIRST_COLUMNS


def test_a_write_that_fails_half_way_leaves_nothing(cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    def broken(*_: object) -> tuple[list[str], object]:
        def rows() -> object:
            yield ["left", 0.0]
            raise OSError(28, "No space left on device")

        return ["side", "rack_travel"], rows()

    path = tmp_path / "maps.csv"
    path.write_text("mine")
    monkeypatch.setattr("toewright_cli.show.maps.long_table", broken)
    result = cli("sweep", FRONT, "--out", path, "--force")
    assert result.code == 2
    assert "No space left on device" in result.complaint
    assert [p.name for p in tmp_path.iterdir()] == ["maps.csv"]
    assert path.read_text() == "mine"


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["--travel", ""], "--travel: the list is empty"),
        (["--travel", "5:-5:11"], "--travel 5:-5:11: 5 to -5 does not ascend"),
        (["--rack", "3,2,1"], "--rack 3,2,1: 2 after 3 does not ascend"),
        (["--rack", "a"], "--rack a: 'a' is not a number"),
        (["--rack", "0:1:1001", "--travel", "0:1:1001"], "2,004,002 poses"),
        (["--travel", "400,410"], "none of the positions asked for can be reached: left: stops at wheel travel"),
        (["--out", "maps.xls"], "--out maps.xls: the extension '.xls' is unknown; use .csv, .json or .nc"),
        (["--out", "maps"], "--out maps: there is no extension; use .csv, .json or .nc"),
        (["--out", "no/such/folder/maps.csv"], "the folder no/such/folder does not exist"),
        (["--toe-diameter", "-1"], "--toe-diameter -1: must be a length above 0 mm"),
    ],
)
def test_bad_requests_are_refused(cli: Cli, tmp_path: Path, arguments: list[str], words: str) -> None:
    result = cli("sweep", FRONT, *arguments)
    assert result.code == 2
    assert words in result.complaint


def test_bad_files_are_refused(cli: Cli, tmp_path: Path) -> None:
    broken = tmp_path / "broken.toml"
    broken.write_text("schema = 1\ntitle = \n")
    for path, words in (
        (tmp_path / "none.toml", "there is no such file"),
        (tmp_path, "is a folder"),
        (broken, "line 2"),
    ):
        result = cli("sweep", path)
        assert result.code == 2
        assert str(path) in result.complaint
        assert words in result.complaint


def test_a_folder_that_cannot_be_written_to_is_refused(
    cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    monkeypatch.setattr("os.access", lambda _, mode, **__: mode != os.W_OK)
    result = cli("sweep", FRONT, "--out", tmp_path / "maps.csv")
    assert result.code == 2
    assert "can't be written to" in result.complaint


def test_rack_travel_without_a_rack_is_refused(cli: Cli) -> None:
    result = cli("sweep", REAR, "--rack", "-10:10:3")
    assert result.code == 2
    assert f"{REAR}: has no [rack]" in result.complaint
    assert cli("sweep", REAR, "--rack", "0").code == 0


def test_one_side_and_the_contact_point_drive(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "right.csv"
    options = ["--side", "right", "--travel-at", "contact-point", "--rack", "20", "--travel", "-20,0,20"]
    result = cli("sweep", FRONT, *options, "--out", path)
    assert "taken at the contact point" in result.out
    rows = read_csv(path)[1]
    assert {row[0] for row in rows} == {"right"}
    heights = [float(row[FIRST_COLUMNS.index("contact_z")]) for row in rows]
    design = float(tw.design_pose(tw.load(FRONT))["contact_z"][1, 0, 0])
    assert heights == pytest.approx([design - 20.0, design, design + 20.0], abs=1e-9)
    assert "- at" not in result.out


def test_explain_defines_what_is_shown(cli: Cli) -> None:
    text = " ".join(cli("sweep", FRONT, "--explain").out.split())
    for phrase in ("Definitions", "toe_in(rack, travel) - toe_in(rack, 0)", "steering axis", "spin axis"):
        assert phrase in text


def test_a_broad_request_shows_progress_on_stderr_only(cli: Cli, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("toewright_cli.progress.PATIENCE", 0.0)
    result = cli("sweep", FRONT)
    assert "solving 882 poses ..." in result.err
    assert "solving" not in result.out


def test_the_first_run_says_that_it_compiles(cli: Cli, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("toewright.kinematics.cache.kernels_cached", lambda: False)
    result = cli("sweep", FRONT)
    assert "compiling the solver for this machine, once" in result.err
    assert "compiling" not in result.out
