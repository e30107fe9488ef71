"""Options and settings that all tests share."""

import os

import pytest
from hypothesis import settings

os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # as the command does

settings.register_profile("rcrules", deadline=None)  # a busy machine is no failure; speed is measured in tests/bench
settings.load_profile("rcrules")


def pytest_addoption(parser: pytest.Parser) -> None:
    """``--update-golden`` rewrites the files of tests/golden; review the difference."""
    parser.addoption("--update-golden", action="store_true", help="rewrite the golden files")
