"""Lines on a narrow terminal."""

import re

import pytest

from rcrules.reports import reports
from rcrules.reports._columns import aligned, cells
from rcrules.reports._lines import joined
from rcrules.reports._wrap import folded
from tests.reports._sample import DOCUMENT


def lines(line: str | tuple[object, ...], width: int) -> list[str]:
    """The folded line as texts."""
    own = (line,) if isinstance(line, str) else line
    return joined(folded(own, width), color=False).splitlines()


@pytest.mark.parametrize("width", [40, 72, 80, 100, 132])
@pytest.mark.parametrize("verbose", [False, True])
def test_no_word_is_lost_and_no_line_is_longer_than_its_longest_word(width: int, verbose: bool) -> None:
    whole = reports()["text"].render(DOCUMENT, verbose=verbose)
    narrow = reports()["text"].render(DOCUMENT, verbose=verbose, width=width)
    assert narrow.split() == whole.split()
    asks = re.findall(r"\[\w+\.\".*?\"\] \w+ = \S+|caution \S+", whole)
    longest = max(cells(text) for text in (*whole.split(), *asks))
    assert max(cells(line) for line in narrow.splitlines()) <= max(width, 8 + longest)


def test_colours_do_not_change_the_folding() -> None:
    plain = reports()["text"].render(DOCUMENT, width=80)
    colored = reports()["text"].render(DOCUMENT, width=80, color=True)
    assert re.sub("\x1b\\[[0-9;]*m", "", colored) == plain


def test_without_a_width_each_item_stays_on_its_line() -> None:
    assert max(len(line) for line in reports()["text"].render(DOCUMENT).splitlines()) > 150


def test_what_follows_stands_under_what_it_belongs_to() -> None:
    assert lines("        why  one two three four five six seven eight", 40) == [
        "        why  one two three four five six",
        "             seven eight",
    ]


def test_columns_are_kept_together_where_there_is_room() -> None:
    assert lines("        the measured quantity   1 ms .. 2 ms   must be less", 50) == [
        "        the measured quantity   1 ms .. 2 ms",
        "            must be less",
    ]


def test_a_number_stays_with_its_unit() -> None:
    assert lines("x" * 37 + " 10 kΩ and more", 40) == ["x" * 37, "        10 kΩ and more"]


def test_a_line_to_copy_stays_whole() -> None:
    ask = '[pin."U5.AIN0"] acquisition-time = "…"'
    assert ask in lines(("undecided: one line decides one finding   ", (ask, "name")), 60)[1]


def test_a_word_longer_than_the_terminal_stays_whole() -> None:
    assert lines("y" * 90, 40) == ["y" * 90]
    assert lines("ab " + "y" * 90 + " cd", 40) == ["ab", "        " + "y" * 90, "        cd"]


def test_wide_letters_count_twice() -> None:
    assert cells("電源") == 4
    assert joined(aligned([("電源", "x"), ("ab", "y")]), color=False) == "電源   x\nab     y\n"


def test_columns_without_content_are_left_out_and_long_cells_push_nothing_aside() -> None:
    found = aligned([("a", "", "b"), ("c" * 60, "", "d"), ("ef", "", "g")])
    assert joined(found, color=False) == f"a    b\n{'c' * 60}   d\nef   g\n"


def test_what_could_steer_the_terminal_counts_as_it_is_shown() -> None:
    assert joined(aligned([("\x1b", "x"), ("abcd", "y")]), color=False) == "\\x1b   x\nabcd   y\n"
