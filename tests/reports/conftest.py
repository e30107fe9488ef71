"""Whole outputs held against files."""

from collections.abc import Callable
from pathlib import Path

import pytest

FOLDER = Path(__file__).parent.parent / "golden"


@pytest.fixture
def same_as_golden(request: pytest.FixtureRequest) -> Callable[[str, str], None]:
    """Compare a text with a golden file, byte for byte, or rewrite it."""

    def compare(name: str, text: str) -> None:
        path = FOLDER / name
        if request.config.getoption("--update-golden"):
            path.write_bytes(text.encode())
        assert text == path.read_bytes().decode()

    return compare
