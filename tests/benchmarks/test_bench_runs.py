"""The benchmark runs and prints its ratios; no time is asserted."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path


def test_the_benchmark_prints_ratios() -> None:
    script = Path(__file__).parent / "bench_solver.py"
    command = [sys.executable, str(script), "--designs", "32", "--quick"]
    done = subprocess.run(command, capture_output=True, text=True, check=True)
    for words in ("scipy.optimize.root", "times as fast as A", "two threads", "all hardpoint slopes", "cost per pose with"):
        assert words in done.stdout
