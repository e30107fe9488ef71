"""Options that all tests share."""

import pytest


def pytest_addoption(parser: pytest.Parser) -> None:
    """``--update-golden`` rewrites the files of tests/golden; review the difference."""
    parser.addoption("--update-golden", action="store_true", help="rewrite the golden files")
