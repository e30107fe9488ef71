"""All benches: ``python -m tests.bench [engine|readers|wide|start-up|growth ...]``. Nothing is asserted."""

import importlib
import os
import sys

NAMES = {
    "engine": "bench_engine",
    "readers": "bench_readers",
    "wide": "bench_wide",
    "start-up": "bench_start_up",
    "growth": "bench_growth",
}


def main() -> None:
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # as the command does
    for name in sys.argv[1:] or NAMES:
        importlib.import_module(f"tests.bench.{NAMES[name]}").main()
        print()


if __name__ == "__main__":
    main()
