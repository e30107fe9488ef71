"""Time and memory of ``rcrules check`` against the size of the board: the work above start-up, ten times the parts."""

import subprocess
import sys
import tempfile
import time
from pathlib import Path

from tests.bench._board import netlist

SIZES = (500, 5_000, 50_000)


def measured(path: Path) -> tuple[float, float]:
    """Seconds and MiB of one check in a process of its own."""
    code = (
        "import resource, sys; from rcrules.cli import main\n"
        f"status = main(['check', {str(path)!r}, '--report', 'json=' + {str(path) + '.json'!r}])\n"
        "print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024)"
    )
    started = time.perf_counter()
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    return time.perf_counter() - started, float(done.stdout.split()[-1])


def main() -> None:
    """Print a row a size."""
    with tempfile.TemporaryDirectory() as folder:
        rows = []
        for size in (1, *SIZES):
            path = Path(folder) / f"board-{size}.xml"
            path.write_text(netlist(size), encoding="utf-8")
            rows.append((size, *measured(path)))
    start_up = rows[0][1]
    print(f"growth of `rcrules check` (a board of one cell takes {start_up:.2f} s)")
    previous = None
    for size, seconds, mebibytes in rows[1:]:
        work = seconds - start_up
        growth = f"{work / previous:5.1f} x the work of the size above" if previous else ""
        print(f"{size:>7} parts  {seconds:7.2f} s  {work:7.2f} s above start-up  {mebibytes:6.0f} MiB  {growth}")
        previous = work


if __name__ == "__main__":
    main()
