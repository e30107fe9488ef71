"""Parenthesised text: tokens and lists, without recursion."""

import re
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Final

from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._text import Lines

MAX_DEPTH: Final = 256
MAX_ATOM: Final = 10_000_000
_TOKEN: Final = re.compile(r'\s*+(?:(\()|(\))|"([^"\\]*+(?:\\.[^"\\]*+)*+)"|([^\s()"]++)|(\Z)|(.))', re.DOTALL)
_ESCAPE: Final = re.compile(r"\\(.)", re.DOTALL)
_ESCAPES: Final = {"n": "\n", "r": "\r", "t": "\t"}


@dataclass(slots=True)
class Form:
    """A list ``(head atom … (form) …)``."""

    at: int
    """Offset of its bracket."""
    head: str = ""
    atoms: list[str] = field(default_factory=list)
    forms: "list[Form]" = field(default_factory=list)

    def text(self, head: str) -> str:
        """First atom of the first form of that name, '' without one."""
        found = self.find(head)
        return found.atoms[0] if found is not None and found.atoms else ""

    def find(self, head: str) -> "Form | None":
        """First form of that name."""
        return next((form for form in self.forms if form.head == head), None)


def parse(file: str, text: str, lines: Lines, take: Callable[[str, Form], bool]) -> Form:
    """The one form that the text holds.

    take: called as each inner form ends, with the head of the form around it; where it returns True the form is let
    go, so that a long file needs little memory. Raises UserMistake with line and column.
    """
    stack: list[Form] = []
    root: Form | None = None
    match = _TOKEN.match
    at = 0
    while True:
        found = match(text, at)
        assert found is not None  # the last alternatives take any character and the end
        kind, at = found.lastindex, found.end()
        if kind == 1:
            if root is not None or len(stack) >= MAX_DEPTH:
                raise _misplaced(file, lines, found.start(1), stack, "(")
            stack.append(Form(found.start(1)))
        elif kind == 2:
            if not stack:
                raise _misplaced(file, lines, found.start(2), stack, ")")
            form = stack.pop()
            if not stack:
                root = form
            elif not take(stack[-1].head, form):
                stack[-1].forms.append(form)
        elif kind == 5:
            return _whole(file, lines, stack, root)
        elif kind == 6 or not stack:
            raise _misplaced(file, lines, found.start(kind or 0), stack, found.group(kind or 0))
        else:
            _add_atom(stack[-1], found.group(4) if kind == 4 else _plain(found.group(3)))


def _add_atom(form: Form, atom: str) -> None:
    if not form.head and not form.atoms and not form.forms:
        form.head = atom
    else:
        form.atoms.append(atom)


def _plain(quoted: str) -> str:
    """The text of a quoted atom with its backslash escapes resolved."""
    if "\\" not in quoted:
        return quoted
    return _ESCAPE.sub(lambda found: _ESCAPES.get(found.group(1), found.group(1)), quoted)


def _whole(file: str, lines: Lines, stack: list[Form], root: Form | None) -> Form:
    if stack:
        inner = stack[-1]
        raise refusal(
            file,
            "the file ends inside a bracket",
            line=lines.line(inner.at),
            column=lines.column(inner.at),
            found=f"{len(stack)} brackets not closed; the innermost is ({shorten(inner.head)} …",
            expected="a closing bracket for each opening one",
            do="export the netlist again; check that the file was not cut",
        )
    assert root is not None  # the reader claims only texts that start with a bracket
    return root


def _misplaced(file: str, lines: Lines, at: int, stack: list[Form], found: str) -> Exception:
    if len(stack) >= MAX_DEPTH and found == "(":
        problem, expected = "brackets nested too deeply", f"at most {MAX_DEPTH} levels"
    elif found == '"':
        problem, expected = "a quoted text is not closed", 'a closing "'
    else:
        problem, expected = "text after the end of the netlist", "the end of the file: the first bracket is closed"
    return refusal(
        file,
        problem,
        line=lines.line(at),
        column=lines.column(at),
        found=shorten(found),
        expected=expected,
        do="export the netlist again",
    )
