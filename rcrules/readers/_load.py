"""Files and standard input to sources."""

import sys
from dataclasses import replace
from pathlib import Path

from rcrules.readers._bounds import USUAL, Limits
from rcrules.readers._export import Source
from rcrules.readers._mistakes import refusal


def load(path: str, limits: Limits = USUAL, named_in: str | None = None) -> Source:
    """The bytes of a file, or of standard input for ``-``. Raises UserMistake, which says where the path is named."""
    most = limits.file_size * 2**20
    do = f"check the path in {named_in}" if named_in else "check the path"
    if path == "-":
        return _whole("<stdin>", sys.stdin.buffer.read(most + 1), limits)
    if not path:
        raise refusal("command line", "an input without a name", expected="a file, or -", do="check the quotes")
    try:
        with Path(path).open("rb") as file:
            whole = _whole(path, file.read(most + 1), limits)
        return replace(whole, path=Path(path), folder=Path(path).parent)
    except FileNotFoundError as error:
        raise refusal(path, "no such file", expected=None, do=do) from error
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise refusal(path, "the file cannot be read", found=reason, expected=None, do=do) from error


def _whole(name: str, data: bytes, limits: Limits) -> Source:
    if len(data) > limits.file_size * 2**20:
        raise refusal(
            name,
            "the file is too large",
            found=f"more than {limits.file_size} MiB",
            expected="a netlist or BOM of one board",
            do="check that this is the file you mean; --limit file-size=N allows more MiB",
        )
    return Source(name=name, data=data, limits=limits)
