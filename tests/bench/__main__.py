"""All benches: ``python -m tests.bench [engine|start-up|growth ...]``. Ratios within one run; nothing is asserted."""

import importlib
import sys

NAMES = {"engine": "bench_engine", "start-up": "bench_start_up", "growth": "bench_growth"}


def main() -> None:
    for name in sys.argv[1:] or NAMES:
        importlib.import_module(f"tests.bench.{NAMES[name]}").main()
        print()


if __name__ == "__main__":
    main()
