"""Bounds of a ladder of 40 nodes with 80 uncertain parts, at its end, in its middle and near its source."""

import os
import time

from rcrules.problems import Bounds, solve_bounds
from tests.bench._bars import held
from tests.bench._ladder import questions

SECTIONS = 40
NODES = (39, 20, 5, 0)
MOST_SECONDS = 1.0
"""Of each, both sides together, of one core."""


def main() -> None:
    """Print the table."""
    if os.environ.get("OPENBLAS_NUM_THREADS") != "1":
        print("(as the command runs: OPENBLAS_NUM_THREADS=1)")
    print(f"{'node':>4}  {'measure':16}  {'seconds':>7}")
    slowest = 0.0
    for at in NODES:
        for asked in questions(SECTIONS, at):
            started = time.process_time()
            (found,) = solve_bounds([(asked.problem, asked.measure)])
            spent = time.process_time() - started
            slowest = max(slowest, spent)
            how = "proved" if isinstance(found, Bounds) and found.proved else "searched"
            print(f"{at:>4}  {asked.name:16}  {spent:>7.2f}  {how}")
    print(f"      the slowest {held(slowest, MOST_SECONDS)}")


if __name__ == "__main__":
    main()
