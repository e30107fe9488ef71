"""Parenthesised text: tokens and lists, without recursion."""

import re
from collections.abc import Callable
from typing import Final

from rcrules.errors import UserMistake
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._text import spot

MAX_DEPTH: Final = 256
MAX_KEPT: Final = 200_000
"""Brackets and texts between two that are understood: those of one component or library part."""
MAX_ATOM: Final = 1_000_000
"""Characters of the longest text."""
_TOKEN: Final = re.compile(r'[()]|"[^"\\]*+(?:\\.[^"\\]*+)*+"|[\r\n]\s*+|[^\s()"]++|[ \t]{99}[ \t]*+|"', re.DOTALL)
PLAIN_TOKEN: Final = re.compile(r'[()]|"[^"]*+"|[\r\n]\s*+|[^\s()"]++|[ \t]{99}[ \t]*+|"')
"""Tokens of a text whose quoted texts have no backslash escapes."""
_BLANKS: Final = " \t\r\n"
_ESCAPE: Final = re.compile(r"\\(.)", re.DOTALL)
_ESCAPES: Final = {"n": "\n", "r": "\r", "t": "\t"}


class Form:
    """A list ``(head atom … (form) …)``."""

    __slots__ = ("atoms", "forms", "head", "line")

    def __init__(self, line: int) -> None:
        self.line = line
        self.head: str | None = None
        self.atoms: list[str] = []
        self.forms: list[Form] = []

    def add(self, token: str, quoted: Callable[[str], str], folded: bool) -> int:
        """Keep a further atom, as the head where nothing stands before it; the number of line ends inside it."""
        breaks = 0
        if token[0] == '"':
            breaks = _line_ends(token)
            token = quoted(token[1:-1])
        if self.head is None and not self.forms:
            self.head = token.casefold() if folded else token
        else:
            self.atoms.append(token)
        return breaks

    def text(self, head: str) -> str:
        """First atom of the first form of that name, '' without one."""
        found = self.find(head)
        return found.atoms[0] if found is not None and found.atoms else ""

    def first(self) -> str:
        """First atom, '' without one."""
        return self.atoms[0] if self.atoms else ""

    def find(self, head: str) -> "Form | None":
        """First form of that name."""
        return next((form for form in self.forms if form.head == head), None)


def unescaped(text: str) -> str:
    """A quoted text without its backslash escapes."""
    return _ESCAPE.sub(lambda found: _ESCAPES.get(found[1], found[1]), text) if "\\" in text else text


def parse(
    file: str,
    text: str,
    take: Callable[[str | None, Form], bool],
    containers: frozenset[str],
    tokens: re.Pattern[str] = _TOKEN,
    quoted: Callable[[str], str] = unescaped,
    *,
    folded: bool = False,
) -> None:
    """Go through the one form that the text holds.

    take: called as each inner form ends, with the head of the form around it; where it returns True the form is
    understood and let go, so that a long file needs little memory. containers: heads of forms whose own forms are let
    go in any case. tokens, quoted: how the text is cut, and what a quoted text says. folded: whether case does not
    count in heads. Raises UserMistake with line and column.
    """
    stack: list[Form] = []
    line, kept, ended = 1, 0, False
    for match in tokens.finditer(text):
        token = match[0]
        if token == "(":
            if ended or len(stack) >= MAX_DEPTH:
                raise _misplaced(file, text, match, stack, kept)
            stack.append(Form(line))
        elif token == ")":
            if not stack or kept > MAX_KEPT:
                raise _misplaced(file, text, match, stack, kept)
            form = stack.pop()
            if not stack:
                ended = True
            elif take(stack[-1].head, form):
                kept = 0
            else:
                kept += 1
                if stack[-1].head not in containers:
                    stack[-1].forms.append(form)
        elif token[0] in _BLANKS:
            line += _line_ends(token)
        elif not stack or token == '"' or len(token) > MAX_ATOM or kept > MAX_KEPT:
            raise _misplaced(file, text, match, stack, kept)
        else:
            kept += 1
            line += stack[-1].add(token, quoted, folded)
    if stack:
        raise _not_closed(file, stack)


def _line_ends(text: str) -> int:
    """Number of line ends: CR LF, LF, and a lone CR."""
    return text.count("\n") + (text.count("\r") - text.count("\r\n") if "\r" in text else 0)


def _not_closed(file: str, stack: list[Form]) -> UserMistake:
    inner = stack[-1]
    return refusal(
        file,
        "the file ends inside a bracket",
        line=inner.line,
        found=f"{len(stack)} brackets not closed; the innermost is ({shorten(inner.head or '')} …",
        expected="a closing bracket for each opening one",
        do="export the netlist again; check that the file was not cut",
    )


def _misplaced(file: str, text: str, match: re.Match[str], stack: list[Form], kept: int) -> UserMistake:
    if match[0] == '"':
        problem, expected = "a quoted text is not closed", 'a closing "'
    elif len(match[0]) > MAX_ATOM:
        problem, expected = "a text is too long", f"at most {MAX_ATOM} characters"
    elif len(stack) >= MAX_DEPTH:
        problem, expected = "brackets nested too deeply", f"at most {MAX_DEPTH} levels"
    elif kept > MAX_KEPT:
        problem, expected = "too much inside one component, or outside of any", f"at most {MAX_KEPT} brackets and texts"
    else:
        problem, expected = "text after the end of the netlist", "the end of the file: the first bracket is closed"
    line, column = spot(text, match.start())
    return refusal(
        file,
        problem,
        line=line,
        column=column,
        found=shorten(match[0]),
        expected=expected,
        do="export the netlist again",
    )
