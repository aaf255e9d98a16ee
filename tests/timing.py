"""Times of calls and of whole processes, for the benchmarks."""

from __future__ import annotations

import os
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path


def best_of(call: Callable[[], object], count: int) -> float:
    """Shortest of several calls [s]."""
    times = []
    for _ in range(count):
        start = time.perf_counter()
        call()
        times.append(time.perf_counter() - start)
    return min(times)


def process(arguments: list[str], folder: Path) -> float:
    """Shortest of several runs of a whole process [s]."""
    environment = os.environ | {"PYTHONDONTWRITEBYTECODE": "", "OMP_NUM_THREADS": "1"}

    def run() -> object:
        return subprocess.run(arguments, cwd=folder, env=environment, capture_output=True, check=True)

    run()
    return best_of(run, 7)


COMMAND = [sys.executable, "-c", "import sys; from fishbelly.__main__ import main; main()"]
