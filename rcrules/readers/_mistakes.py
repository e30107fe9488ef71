"""The one way in which readers refuse a source."""

from rcrules.errors import Mistake, Place, UserMistake

NETLIST_WANTED = "a netlist or BOM in one of the formats that the README lists, such as XML or CSV"


def refusal(
    file: str,
    problem: str,
    *,
    line: int | None = None,
    column: int | None = None,
    found: str | None = None,
    expected: str | None = NETLIST_WANTED,
    do: str | None = None,
) -> UserMistake:
    """A mistake at a place of an input, ready to raise."""
    place = Place(file=file, line=line, column=column)
    return UserMistake(Mistake(place=place, problem=problem, found=found, expected=expected, do=do))


def shorten(text: str, limit: int = 60) -> str:
    """A stranger's text as one printable line of at most ``limit`` characters."""
    plain = "".join(character if character.isprintable() else "?" for character in text[: limit + 1])
    return plain if len(plain) <= limit else plain[: limit - 1] + "…"
