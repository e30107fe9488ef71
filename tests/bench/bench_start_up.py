"""Start-up of the command against what Python needs for the bare imports and a bare parse of the same file."""

import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

from tests.bench._board import netlist

BARE = (
    "import lxml.etree, numpy, networkx, pint, rich.console; pint.UnitRegistry(); "
    "lxml.etree.fromstring(open({path!r}, 'rb').read())"
)


def seconds(*command: str, runs: int = 7) -> float:
    """Median time of a process."""
    times = []
    for _ in range(runs):
        started = time.perf_counter()
        subprocess.run([sys.executable, *command], capture_output=True, check=False)
        times.append(time.perf_counter() - started)
    return statistics.median(times)


def main() -> None:
    """Print the start-up times and their ratios."""
    with tempfile.TemporaryDirectory() as folder:
        paths = {size: str(Path(folder) / f"board-{size}.xml") for size in (190, 500)}
        for size, path in paths.items():
            Path(path).write_text(netlist(size), encoding="utf-8")
        bare = {size: seconds("-c", BARE.format(path=path)) for size, path in paths.items()}
        print("start-up against the bare imports (lxml, numpy, networkx, pint with registry, rich) and a bare parse")
        print(f"  python -c pass                {seconds('-c', 'pass'):6.3f} s")
        print(f"  rcrules --help                {seconds('-m', 'rcrules', '--help'):6.3f} s")
        for size, path in paths.items():
            took = seconds("-m", "rcrules", "check", path)
            ratio = took / bare[size]
            print(f"  rcrules check, {size} parts     {took:6.3f} s   bare {bare[size]:6.3f} s   {ratio:5.2f} x")


if __name__ == "__main__":
    main()
