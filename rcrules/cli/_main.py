"""From arguments to an exit code."""

import gc
import os
import sys
from collections.abc import Sequence
from typing import Final

from rcrules.cli._arguments import parser

USAGE: Final = 2
BUG: Final = 3
INTERRUPTED: Final = 130


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command; everything but reports goes to standard error."""
    _open_streams()
    os.environ.setdefault("OPENBLAS_NUM_THREADS", "1")  # over small matrices more only wait
    chosen = parser().parse_args(arguments)
    from rcrules.errors import UserMistake  # help is shown without it

    gc.disable()  # one short run that makes few cycles: collecting costs a third of a large board's time
    try:
        found: int = chosen.run(chosen)
    except UserMistake as error:
        print("\n".join(_shown(str(mistake)) for mistake in error.mistakes), file=sys.stderr)
        return USAGE
    except KeyboardInterrupt:
        print("interrupted", file=sys.stderr)
        return INTERRUPTED
    except Exception:  # our own bug: shown whole, never swallowed
        import traceback

        traceback.print_exc()
        print("this is a bug of rcrules, not of your files; please report it with the lines above", file=sys.stderr)
        return BUG
    finally:
        gc.freeze()  # what is left goes with the process: looking through it for cycles on the way out is slow
        gc.enable()
    return found


def _open_streams() -> None:
    """Where the caller has closed a standard stream, nothing goes out and nothing comes in."""
    for name, mode in (("stdin", "r"), ("stdout", "w"), ("stderr", "w")):
        if getattr(sys, name) is None:
            setattr(sys, name, open(os.devnull, mode, encoding="utf-8"))  # noqa: SIM115 - open to the end of the process


def _shown(text: str) -> str:
    """The lines of a mistake without what could steer the terminal; names in it come from strangers."""
    from rcrules.reports import safe

    return "\n".join(safe(line) for line in text.split("\n"))
