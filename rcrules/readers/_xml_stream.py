"""XML element by element, within bounds: each is let go once it is understood, so a long file needs little memory."""

from __future__ import annotations

from collections.abc import Iterator
from io import BytesIO
from typing import TYPE_CHECKING, Final, cast

from rcrules.readers import _bounds
from rcrules.readers._mistakes import refusal, shorten
from rcrules.readers._xml import BoundedStream, doctype_refusal, refuse_doctype

if TYPE_CHECKING:
    from lxml.etree import _Element

    from rcrules.readers._export import Source

MAX_ELEMENTS: Final = 1_000_000
"""Elements that are looked at in one file."""
_TOGETHER: Final = 16
"""Elements after which all that is no longer needed is taken away."""


class Elements:
    """The elements of some local names, or all without names, each with its name, when it is complete.

    An element is cleared after use, and what stood before it is taken away; attributes of the elements around it can be
    read. Elements of idle names are let go, but not given. Raises UserMistake where the XML is damaged, hostile or
    beyond bounds.
    """

    def __init__(
        self, source: Source, names: tuple[str, ...] | None, what: str = "netlist", *, idle: tuple[str, ...] = ()
    ) -> None:
        refuse_doctype(source)
        self._source, self._names, self._what = source, names, what
        self._idle = frozenset(idle)
        self._kept = False
        blanks = len(source.data) - len(source.data.lstrip(b" \t\r\n"))
        self._data = source.data[blanks:] if blanks else source.data
        self._skipped = source.data.count(b"\n", 0, blanks)

    def keep(self) -> None:
        """Do not let go of the element that was given last: it belongs to one that is not complete."""
        self._kept = True

    def line(self, element: _Element) -> int:
        """Line of an element in the file."""
        return self._skipped + (cast("int | None", element.sourceline) or 1)

    def __iter__(self) -> Iterator[tuple[str, _Element]]:
        from lxml import etree

        stream = BoundedStream(self._source, BytesIO(self._data), self._skipped + 1)
        context = etree.iterparse(
            stream,
            events=("end",),
            tag=None if self._names is None else tuple(f"{{*}}{name}" for name in (*self._names, *self._idle)),
            resolve_entities="internal",
            no_network=True,
            load_dtd=False,
            attribute_defaults=False,
            huge_tree=False,
            remove_comments=True,
            remove_pis=True,
        )
        count = 0
        try:
            for _, element in context:
                name = local(element)
                if name not in self._idle:
                    self._kept = False
                    yield name, element
                    if self._kept:
                        continue
                element.clear()
                count += 1
                if count > MAX_ELEMENTS:
                    _bounds.bound(self._source.name, self.line(element), "elements", count, MAX_ELEMENTS)
                if count % _TOGETHER == 0:
                    let_go(element)
                    stream.marks = 0
            root = context.root
        except etree.XMLSyntaxError as error:
            raise self._broken(error) from error
        if root is not None and root.getroottree().docinfo.doctype:
            raise doctype_refusal(self._source, None)

    def _broken(self, error: Exception) -> Exception:
        line, column = getattr(error, "position", (0, 0))
        return refusal(
            self._source.name,
            "the XML breaks off or is damaged",
            line=line + self._skipped if line else None,
            column=column or None,
            found=shorten(str(getattr(error, "msg", error)).partition(", use XML_")[0], 160),
            expected="one whole, well-formed XML document",
            do=f"export the {self._what} again",
        )


def let_go(element: _Element) -> None:
    """Take away all that stands before an element and before the elements around it."""
    inner, around = element, element.getparent()
    while around is not None:
        if around[0] is not inner:
            del around[: around.index(inner)]
        inner, around = around, around.getparent()


def local(element: _Element) -> str:
    """The name of an element without its namespace."""
    tag = element.tag
    return tag.rpartition("}")[2] if tag[0] == "{" else tag
