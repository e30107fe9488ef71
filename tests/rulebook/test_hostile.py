"""Broken rule and project files end in mistakes, never in anything else."""

from contextlib import suppress
from pathlib import Path

from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules import project, rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.measures import registry

FOLDER = Path(__file__).parent.parent / "messages"
TEXTS = [path.read_text(encoding="utf-8") for path in sorted(FOLDER.rglob("*.toml"))]
PIECES = [
    '"',
    "[",
    "]",
    "{",
    "}",
    "=",
    "\n",
    "3",
    "-1",
    "true",
    "nan",
    "1e400",
    "[]",
    "{}",
    '"1 V"',
    "2020-01-01",
    "'''",
]


def read_both(text: str) -> None:
    for read in (
        lambda: project.load("p", text),
        lambda: [rulebook.sentence(rule) for rule in rulebook.compile_pack(tomlfile.load("p", text), registry())],
    ):
        with suppress(UserMistake):
            read()


@settings(max_examples=150, deadline=None)
@given(st.sampled_from(TEXTS), st.lists(st.tuples(st.integers(0), st.sampled_from(PIECES)), min_size=1, max_size=4))
def test_files_with_pieces_put_anywhere_end_in_mistakes(text, changes):
    for at, piece in changes:
        at %= len(text)
        text = text[:at] + piece + text[at + len(piece) :]
    read_both(text)


@settings(max_examples=150, deadline=None)
@given(st.sampled_from(TEXTS), st.integers(0), st.sampled_from(PIECES))
def test_files_with_a_value_exchanged_end_in_mistakes(text, which, piece):
    lines = text.split("\n")
    settable = [number for number, line in enumerate(lines) if "=" in line and not line.startswith("#")]
    at = settable[which % len(settable)]
    lines[at] = lines[at].partition("=")[0] + "= " + piece
    read_both("\n".join(lines))


def test_globs_that_could_blow_up_do_not():
    """Stars that fail late are tried in bounded steps; a matcher that backtracks would never come back."""
    from rcrules.checks._select import globbed

    assert not globbed(("*a" * 99 + "b",), ["a" * 4000])
    assert globbed(("*a" * 99 + "*",), ["a" * 4000])
