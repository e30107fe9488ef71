"""Descriptions of a team's own exports: ``[[format]]`` says what stands where, so that no reader need be written."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.project._model import FileFormat, PathStep, Records, XmlPath
from rcrules.tomlfile import Table, cut, listed

KINDS: Final = ("delimited", "xml", "lines")
PART_CELLS: Final = ("reference", "value", "footprint", "symbol", "description")
PIN_CELLS: Final = ("net", "reference", "pin", "pin-name", "pin-type", "ends")
_KEYS: Final = ("name", "kind", "has", "columns", "parts", "pins", "end")
_WORDS: Final = ("after", "title", "words", "separator", "between")
_STEP: Final = re.compile(r"(\.\.|\.|\*|@?[^\W\d][\w.-]*)(?:\[(@?[^\W\d][\w.-]*)\s*=\s*'([^']*)'\])?")
_MOST_STEPS: Final = 20
_LONGEST: Final = 500
_PATH: Final = "a path such as net/pin, ../@name, field[@name='Value'] or . (at most 20 steps)"
_EACH: Final = "a path of elements from the root, such as /board/net/pin, or from anywhere, such as //net/pin"


def formats(top: Table) -> tuple[FileFormat, ...]:
    """Every description of the file; what is wrong with any is noted."""
    return tuple(found for table in top.tables("format") if (found := _format(table)) is not None)


def _format(table: Table) -> FileFormat | None:
    table.only(_KEYS)
    table.needs("name", "kind", "has", known=_KEYS)
    name, kind, has = table.text("name"), table.word("kind", KINDS), table.text("has")
    if name is None or kind is None or has is None:
        return None
    if not 0 < len(has.strip()) <= _LONGEST:
        table.wrong("has", "'has' must be a text by which the file is known", found=f"'{cut(has)}'")
    if kind == "delimited":
        parts, pins = _columns(table)
    else:
        parts, pins = (_records(table, key, kind) for key in ("parts", "pins"))
    if parts is None and pins is None and not {"columns", "parts", "pins"} & {*table.data}:
        expected = "columns = { … }" if kind == "delimited" else "parts = { … }, pins = { … } or both"
        table.wrong((), "this format says nothing of parts or pins", expected=expected)
    return FileFormat(
        name=name, kind=kind, has=has, parts=parts, pins=pins, end=table.text("end") or "", place=table.place
    )


def _columns(table: Table) -> tuple[Records | None, Records | None]:
    """One table of columns: of pins where it names nets, else of parts."""
    columns = table.table("columns")
    if columns is None:
        return None, None
    cells = _texts(columns)
    if "net" not in cells:
        columns.needs("reference")
        return Records(cells=cells), None
    _needs_ends(columns, cells)
    return None, Records(cells=cells, between=".")


def _records(table: Table, key: str, kind: str) -> Records | None:
    own = table.table(key)
    if own is None:
        return None
    return _elements(own, key) if kind == "xml" else _lines(own, key)


def _elements(own: Table, key: str) -> Records | None:
    own.needs("each")
    if key == "pins":
        own.only(("each", "between", *PIN_CELLS, *PART_CELLS))
    texts = _texts(own)
    each, between = texts.pop("each", None), texts.pop("between", ".")
    if each is not None and (whole := path(each)) is not None and whole.selects:
        selected: XmlPath | None = whole
    else:
        selected = None
        if each is not None:
            own.wrong("each", "not a path of elements", found=f"'{cut(each)}'", expected=_EACH)
    paths: dict[str, XmlPath] = {}
    for name, text in texts.items():
        found = path(text)
        if found is None or found.selects:
            own.wrong(name, f"'{name}' is no path from the element", found=f"'{cut(text)}'", expected=_PATH)
        else:
            paths[name] = found
    _needs_cells(own, key, texts)
    return Records(each=selected, paths=paths, between=between) if selected is not None else None


def _lines(own: Table, key: str) -> Records | None:
    own.only(_WORDS)
    own.needs("after", "words")
    after, words, title = own.text("after"), own.texts("words"), own.text("title") or ""
    _needs_cells(own, key, dict.fromkeys((*words, title), ""))
    if not after or not words:
        return None
    return Records(
        after=after,
        title=title,
        words=words,
        separator=own.text("separator") or "",
        between=own.text("between") or ".",
    )


def _needs_cells(own: Table, key: str, cells: Mapping[str, str]) -> None:
    if key == "pins":
        _needs_ends(own, cells)
    elif "reference" not in cells:
        own.wrong((), "'parts' does not say where the reference stands", expected="reference")


def _needs_ends(own: Table, cells: Mapping[str, str]) -> None:
    if "net" not in cells or ("ends" not in cells and not {"reference", "pin"} <= {*cells}):
        found = listed(tuple(cell for cell in cells if cell)) or "nothing"
        expected = "net, and reference with pin, or ends (R1.2 C1.1)"
        own.wrong((), "pins need their net and their ends", found=found, expected=expected)


def _texts(table: Table) -> dict[str, str]:
    found = {key: table.text(key) for key in table.data}
    return {key: text for key, text in found.items() if text is not None}


def path(text: str) -> XmlPath | None:
    """A path in a small part of XPath: steps down by name, ``..``, ``@attribute``, ``[@name='x']``; None if it is none.

    Each step is one name, so that following it takes one look at each child: XPath itself knows no such bound.
    """
    rooted = text.startswith("/")
    anywhere = text.startswith("//")
    steps: list[PathStep] = []
    for said in _split(text.lstrip("/") if rooted else text):
        found = _STEP.fullmatch(said)
        if found is None or len(steps) >= _MOST_STEPS or (steps and steps[-1].name.startswith("@")):
            return None
        name, key, value = found.groups()
        if rooted and (name in ("..", ".") or name.startswith("@")):
            return None
        steps.append(PathStep(name=name, key=key or "", value=value or ""))
    if not steps or len(text) > _LONGEST or text.startswith("///"):
        return None
    return XmlPath(steps=tuple(steps), selects=rooted, anywhere=anywhere)


def _split(text: str) -> list[str]:
    """At slashes that are not within quotes."""
    return re.findall(r"(?:[^/'\[\]]|\[[^\]']*'[^']*'\])+", text) if "//" not in text and text[-1:] != "/" else [""]
