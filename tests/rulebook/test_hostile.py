"""Broken rule and project files end in mistakes, never in anything else."""

from contextlib import suppress
from pathlib import Path

import pytest
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


def test_selections_that_multiply_are_refused():
    """A few hundred letters could stand for millions of tables; their number is counted before any is read."""
    one = '{ net = "a*" }'
    for _ in range(2):
        one = f"{{ any-of = [{', '.join([one] * 30)}] }}"
    text = f'[pack]\nname = "h"\n[[rule]]\nid = "h"\nlevel = "note"\nmeasure = "gain"\nany-of = [{one}]'
    with pytest.raises(UserMistake, match="931 selections in one rule are too many"):
        rulebook.compile_pack(tomlfile.load("p", text), registry())


@pytest.mark.parametrize(
    "value", ["(" * 900, "-" * 900, "2^" * 400, "max(" + "," * 900, "1" + "+1" * 450, "9" * 990, "[" * 900, "''" * 400]
)
def test_sums_of_signs_end_in_mistakes(value):
    text = f'[pack]\nname = "h"\n[[rule]]\nid = "h"\nlevel = "note"\nsubject = "board"\nvalue = "{value}"\nequals = 1'
    with pytest.raises(UserMistake) as caught:
        rulebook.compile_pack(tomlfile.load("p", text), registry())
    assert len(caught.value.mistakes) <= 11


@settings(max_examples=300, deadline=None)
@given(
    st.lists(
        st.sampled_from(["gain", "(", ")", "^", "2", "-", "*", ",", "x", " ", "'", "3 V", "min(", "="]), max_size=30
    )
)
def test_sums_of_pieces_end_in_mistakes_or_rules(pieces):
    body = f'subject = "node"\nvalue = "{"".join(pieces)}"\nequals = 1'
    read_both(f'[pack]\nname = "h"\n[[rule]]\nid = "h"\nlevel = "note"\n{body}')


def test_examples_of_one_rule_are_a_few():
    example = '[[rule.example]]\noutcome = "holds"\ncircuit = "R1 1k : A, B"\n'
    head = '[pack]\nname = "h"\n[[rule]]\nid = "h"\nlevel = "note"\nmeasure = "time_constant"\nat-most = "1 s"\n'
    with pytest.raises(UserMistake, match="21 examples of one rule are too many"):
        rulebook.compile_pack(tomlfile.load("p", head + 21 * example), registry())
