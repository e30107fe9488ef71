"""What a run costs, counted in calls and objects, so that no clock decides."""

import gc
from pathlib import Path

from rcrules.networks import Board
from rcrules.pipeline import Job, run
from tests.bench._board import netlist
from tests.work import Work


def calls(folder: Path, parts: int) -> int:
    """Calls of functions in one run over a board of so many parts."""
    path = folder / f"board-{parts}.xml"
    path.write_text(netlist(parts), encoding="utf-8")
    with Work() as work:
        run(Job(inputs=(str(path),)))
    return work.calls


def boards() -> set[int]:
    return {id(item) for item in gc.get_objects() if isinstance(item, Board)}


def test_ten_times_the_parts_are_at_most_eleven_times_the_work(tmp_path: Path) -> None:
    calls(tmp_path, 25)  # imports and everything that is worked out once
    base, small, large = (calls(tmp_path, parts) for parts in (25, 75, 525))
    assert large - base <= 11 * (small - base)


def test_nothing_but_the_document_outlives_a_run(tmp_path: Path) -> None:
    path = tmp_path / "board.xml"
    path.write_text(netlist(50), encoding="utf-8")
    before = boards()
    gc.disable()
    try:
        run(Job(inputs=(str(path),)))
        assert boards() <= before
    finally:
        gc.enable()
