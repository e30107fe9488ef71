"""The EDIF 2 0 0 netlist of a board (ANSI/EIA-548), its hierarchy flattened."""

import re
from collections.abc import Mapping
from typing import Final

from rcrules.readers._edif_flat import flatten
from rcrules.readers._edif_forms import CONTAINERS, Taker
from rcrules.readers._edif_words import text_of
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._sexpr import PLAIN_TOKEN, parse
from rcrules.readers._text import decode, head

NAME: Final = "edif"
_START: Final = re.compile(r"\s*\(\s*edif\s", re.IGNORECASE)


def claims(source: Source, _: Mapping[str, str]) -> bool:
    """True for text that starts with ``(edif``."""
    return _START.match(head(source)) is not None


def read(source: Source, columns: Mapping[str, str]) -> Export:
    """Read the libraries form by form, then walk from the design's cell down. Raises UserMistake."""
    del columns  # a netlist has none
    text, remarks = decode(source)
    taker = Taker(source)
    parse(source.name, text, taker.take, CONTAINERS, PLAIN_TOKEN, text_of, folded=True)
    if taker.version is None:
        raise refusal(
            source.name,
            "the EDIF file does not say its version",
            line=1,
            expected="(edifVersion 2 0 0)",
            do="export the netlist as EDIF 2 0 0",
        )
    return flatten(source, NAME, taker.libraries, remarks)


READER = Reader(name=NAME, order=22, claims=claims, read=read)
