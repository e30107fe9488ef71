"""Time and memory of ``rcrules check`` against the size of the board: the work above start-up, ten times the parts."""

import subprocess
import sys
import tempfile
import time
from itertools import pairwise
from pathlib import Path

from tests.bench._bars import held
from tests.bench._board import netlist

SIZES = (1_000, 10_000, 100_000)
MOST_GROWTH = 11.0
"""Times the work for ten times the parts."""
MOST_SECONDS = 20.0
"""Of the largest board."""
MOST_MEBIBYTES = 2048.0
"""Of the largest board."""


def measured(path: Path) -> tuple[float, float, float]:
    """Seconds of one check in a process of its own, seconds that its core worked for it, and MiB."""
    code = (
        "import resource, time; from rcrules.cli import main\n"
        f"main(['check', {str(path)!r}, '--report', 'json=' + {str(path) + '.json'!r}])\n"
        "print(time.process_time(), resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024)"
    )
    started = time.perf_counter()
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    worked, mebibytes = done.stdout.split()[-2:]
    return time.perf_counter() - started, float(worked), float(mebibytes)


def main(sizes: tuple[int, ...] = SIZES) -> None:
    """Print a row a size."""
    with tempfile.TemporaryDirectory() as folder:
        rows = []
        for size in (1, *sizes):
            path = Path(folder) / f"board-{size}.xml"
            path.write_text(netlist(size), encoding="utf-8")
            rows.append((size, *measured(path)))
    start_up = rows[0][2]
    print(f"growth of `rcrules check`, seconds of one core (a board of one cell takes {start_up:.2f} s)")
    for (before, _, sooner, _), (size, seconds, worked, mebibytes) in pairwise(rows):
        work, growth = worked - start_up, ""
        if before > 1:
            ten = 10 * work / (sooner - start_up) * before / size
            growth = f"{ten:5.1f} x for ten times the parts: {held(ten, MOST_GROWTH)}"
        print(f"{size:>7} parts  {work:7.2f} s above start-up  {seconds:7.2f} s in all  {mebibytes:6.0f} MiB  {growth}")
    size, seconds, _, mebibytes = rows[-1]
    if size >= SIZES[-1]:
        print(f"  time {held(seconds, MOST_SECONDS)}; memory {held(mebibytes, MOST_MEBIBYTES)}")


if __name__ == "__main__":
    main(tuple(int(size) for size in sys.argv[1:]) or SIZES)
