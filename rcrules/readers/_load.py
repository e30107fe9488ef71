"""Files and standard input to sources."""

import sys
from pathlib import Path
from typing import Final

from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal

SIZE_LIMIT: Final = 64 * 2**20
"""Bytes of the largest input that is read, unless the caller says otherwise."""


def load(path: str, size_limit: int = SIZE_LIMIT, named_in: str | None = None) -> Source:
    """The bytes of a file, or of standard input for ``-``. Raises UserMistake, which says where the path is named."""
    do = f"check the path in {named_in}" if named_in else "check the path"
    if path == "-":
        return _whole("<stdin>", sys.stdin.buffer.read(size_limit + 1), size_limit)
    if not path:
        raise refusal("command line", "an input without a name", expected="a file, or -", do="check the quotes")
    try:
        with Path(path).open("rb") as file:
            return _whole(path, file.read(size_limit + 1), size_limit)
    except FileNotFoundError as error:
        raise refusal(path, "no such file", expected=None, do=do) from error
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise refusal(path, "the file cannot be read", found=reason, expected=None, do=do) from error


def _whole(name: str, data: bytes, size_limit: int) -> Source:
    if len(data) > size_limit:
        raise refusal(
            name,
            "the file is too large",
            found=f"more than {size_limit / 2**20:.3g} MiB",
            expected="a netlist or BOM of one board",
            do="check that this is the file you mean",
        )
    return Source(name=name, data=data)
