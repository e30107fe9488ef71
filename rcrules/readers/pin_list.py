"""The pin list: delimited rows of net, part and pin, in any order, or of net and ``PART.PIN``."""

import hashlib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from rcrules.readers._columns import JOINED, NET, PART, PIN, PIN_NAME, PIN_TYPE, find, find_named, plain
from rcrules.readers._export import Export, Reader, Source
from rcrules.readers._mistakes import refusal
from rcrules.readers._pin_rows import PinRows
from rcrules.readers._table import DELIMITERS, Row, rows
from rcrules.readers._text import decode, head
