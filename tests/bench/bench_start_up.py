"""Start-up of the command against what Python needs for the bare imports and a bare parse of the same file."""

import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

from tests.bench._bars import held
from tests.bench._board import netlist

BARE = (
    "import lxml.etree, numpy, networkx, pint, rich.console; pint.UnitRegistry(); "
    "lxml.etree.fromstring(open({path!r}, 'rb').read())"
)
MOST = 1.5
"""Times the bare imports and parse."""
PACKS = ("power-on-reset", "debounce", "analog-inputs", "capacitor-voltage", "stored-energy")
RUNS = 7


def seconds(*commands: tuple[str, ...]) -> list[float]:
    """Median time of each process, run in turn so that a busy moment meets all of them."""
    times: list[list[float]] = [[] for _ in commands]
    for _ in range(RUNS):
        for command, own in zip(commands, times, strict=True):
            started = time.perf_counter()
            subprocess.run([sys.executable, *command], capture_output=True, check=False)
            own.append(time.perf_counter() - started)
    return [statistics.median(own) for own in times]


def written(folder: Path, parts: int, *, varied: bool = False) -> Path:
    """A folder with a board, without a project file."""
    path = folder / f"{parts}{'-varied' if varied else ''}" / "board.xml"
    path.parent.mkdir()
    path.write_text(netlist(parts, varied=varied), encoding="utf-8")
    return path


def with_project(folder: Path, board: Path) -> Path:
    """A project file that asks for every pack of a board."""
    path = folder / "rcrules.toml"
    rules = ", ".join(f'"{name}"' for name in PACKS)
    path.write_text(f'[board]\nnetlist = "{board.relative_to(folder)}"\nrules = [{rules}]\n', encoding="utf-8")
    return path


def main() -> None:
    """Print the start-up times and their ratios."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        plain, wanted = seconds(("-c", "pass"), ("-m", "rcrules", "--help"))
        print(f"python -c pass {plain:.3f} s, rcrules --help {wanted:.3f} s: {wanted / plain:.1f} x")
        print("start to report against the bare imports (lxml, numpy, networkx, pint with registry, rich) and parse")
        for parts, varied in ((190, False), (500, False), (500, True)):
            board = written(folder, parts, varied=varied)
            project = with_project(folder, board)
            bare, zero, packs = seconds(
                ("-c", BARE.format(path=str(board))),
                ("-m", "rcrules", "check", str(board), "--project", str(_empty(board))),
                ("-m", "rcrules", "check", "--project", str(project)),
            )
            kind = ", half of them in ladders of their own" if varied else ""
            print(f"  {parts} parts{kind}: bare {bare:.3f} s")
            for word, took in (("no project", zero), ("all packs", packs)):
                print(f"    {word:<10}  {took:6.3f} s  {took / bare:5.2f} x  {held(took / bare, MOST)}")


def _empty(board: Path) -> Path:
    path = board.with_name("rcrules.toml")
    path.write_text("", encoding="utf-8")
    return path


if __name__ == "__main__":
    main()
