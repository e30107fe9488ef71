"""Broken rule files, each with the whole of what is said about it; what is said was reviewed, word by word."""

import tomllib
from pathlib import Path

import pytest

from rcrules import rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.measures import registry

FOLDER = Path(__file__).parent / "broken_rules"
FILES = sorted(FOLDER.glob("*.toml"))


def told(path: Path) -> str:
    with pytest.raises(UserMistake) as caught:
        rulebook.compile_pack(tomlfile.load(path.name, path.read_text(encoding="utf-8")), registry())
    return f"{caught.value}\n"


def test_there_are_forty() -> None:
    assert len(FILES) >= 40


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_all_that_is_said_is_what_was_reviewed(path: Path) -> None:
    assert told(path) == path.with_suffix(".txt").read_text(encoding="utf-8")


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_every_message_has_a_place_a_marker_and_advice(path: Path) -> None:
    with pytest.raises(UserMistake) as caught:
        rulebook.compile_pack(tomlfile.load(path.name, path.read_text(encoding="utf-8")), registry())
    for item in caught.value.mistakes:
        assert item.place.line
        assert item.place.column
        assert item.shown is not None
        assert item.span is not None
        assert item.expected or item.do or " must be " in item.problem, item.problem


def test_only_what_has_no_syntax_is_no_toml() -> None:
    def is_toml(path: Path) -> bool:
        try:
            tomllib.loads(path.read_text(encoding="utf-8"))
        except tomllib.TOMLDecodeError:
            return False
        return True

    assert {path.stem for path in FILES if not is_toml(path)} == {"toml-bare-text", "toml-quote-open"}
