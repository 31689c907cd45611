from __future__ import annotations

import csv
import json
from pathlib import Path

import numpy as np
import pytest
import xarray as xr
from command_line import Cli
from corners import HARDPOINTS

FRONT = HARDPOINTS / "marten_front.toml"
VAN = HARDPOINTS / "linnet_front.toml"
UNEQUAL = HARDPOINTS / "ibex_front.toml"


@pytest.fixture
def raised(tmp_path: Path) -> Path:
    """The front sample with its rack end joint 4 mm higher."""
    text = FRONT.read_text(encoding="utf-8").replace("[62.0, 228.0, 148.0]", "[62.0, 228.0, 152.0]")
    path = tmp_path / "raised.toml"
    path.write_text(
        text.replace('"marten_rear.toml"', json.dumps(str(HARDPOINTS / "marten_rear.toml"))), encoding="utf-8"
    )
    return path


def test_it_tells_what_moved_and_what_it_does(cli: Cli, raised: Path) -> None:
    result = cli("compare", FRONT, raised)
    assert result.code == 0
    assert result.err == ""
    squeezed = " ".join(result.out.split())
    assert "left tie_rod_inner 0.00 0.00 +4.00 4.00" in squeezed
    assert "bump-steer rate +5.59 -4.6" in squeezed
    assert "Largest change of bump steer from A to B: 0.312 deg per wheel towards toe-in" in squeezed
    assert "Turning, at rack +30.0 mm" in squeezed
    assert "Change of bump steer from A to B, left wheel: deg per wheel, toe-in +" in squeezed
    tables = [line for line in result.out.splitlines() if line.startswith(" ") and ".toml" not in line]
    assert max(map(len, tables)) <= 100


def test_what_is_not_reached_is_a_dash(cli: Cli, raised: Path) -> None:
    result = cli("compare", FRONT, raised, "--rack", "-60,0,60", "--travel", "-10,0,10")
    assert result.code == 0
    assert "A dash: not reached in one of the two files." in result.out


def test_three_files_and_unequal_sides_fit(cli: Cli, raised: Path) -> None:
    result = cli("compare", FRONT, raised, UNEQUAL, "--explain")
    assert result.code == 0
    assert "Design position, right side" in result.out
    assert "Hardpoints that moved from A to C" in result.out
    assert "…" not in result.out


@pytest.mark.parametrize("kind", ["csv", "json", "nc"])
def test_results_go_to_files(cli: Cli, raised: Path, tmp_path: Path, kind: str) -> None:
    path = tmp_path / f"change.{kind}"
    assert cli("compare", FRONT, raised, "--rack", "-10,0,10", "--travel", "-20,0,20", "-o", path).code == 0
    if kind == "csv":
        rows = list(csv.DictReader(path.read_text(encoding="utf-8").splitlines()))
        assert len(rows) == 2 * 2 * 3 * 3
        changes = [float(row["bump_steer_change"]) for row in rows]
        assert not any(changes[:18])
        largest = max(map(abs, changes))
    elif kind == "json":
        document = json.loads(path.read_text(encoding="utf-8"))
        largest = float(np.abs(document["changes"]["bump_steer"][1]).max())
        assert document["moved_points"][0][0]["shift_mm"] == [0.0, 0.0, 4.0]
        assert len(document["files"][1]["sha256"]) == 64
    else:
        with xr.open_dataset(path) as dataset:
            largest = float(np.abs(dataset["bump_steer_change"]).max())
            assert dataset["bump_steer_change"].attrs["units"] == "deg"
    assert largest == pytest.approx(0.23, abs=0.03)


def test_json_and_plot(cli: Cli, raised: Path, tmp_path: Path) -> None:
    picture = tmp_path / "change.png"
    result = cli("compare", FRONT, raised, VAN, "--json", "--plot", picture)
    assert result.code == 0
    document = json.loads(result.out)
    assert document["design_position"]["left"]["toe_in"] == [
        pytest.approx(-0.1),
        pytest.approx(-0.1),
        pytest.approx(0.08),
    ]
    assert document["largest_change_of_bump_steer"][0]["side"] == "left"
    assert picture.read_bytes().startswith(b"\x89PNG")


def test_bad_requests_are_one_sentence(cli: Cli, tmp_path: Path) -> None:
    assert "got 1 file; give 2 to 6" in cli("compare", FRONT).complaint
    assert "there is no such file" in cli("compare", FRONT, tmp_path / "none.toml").complaint
    rear = HARDPOINTS / "marten_rear.toml"
    assert "has no [rack]" in cli("compare", FRONT, rear, "--rack", "-5:5:3").complaint
    result = cli("compare", FRONT, VAN, "--travel", "900:901:2")
    assert result.code == 2
    assert "none of the positions" in result.err
