"""Names of nets and pins as words: sheet path, active-low marks, digits and letter case taken apart.

``/CPU/~{SYS_RST}``, ``nSysRst``, ``SYS_RST_N``, ``SYSRST#`` differ only in marks; ``BURST`` holds no ``RST``.
"""

import re
from functools import lru_cache
from typing import Final

_UPPER: Final = "A-ZÀ-ÖØ-ÞΑ-ΩА-ЯЁ"
_LOWER: Final = "a-zß-öø-ÿα-ωа-яё"
_WORD: Final = re.compile(
    rf"[{_UPPER}]{{2,}}(?=[{_LOWER}](?![{_LOWER}]))"  # RST of "RSTn"
    rf"|[{_UPPER}]+(?![{_LOWER}])"  # MCU of "MCUReset"
    rf"|[{_UPPER}]?[{_LOWER}]+"
    r"|\d+"
    rf"|[^\W\d_{_UPPER}{_LOWER}]+"  # letters without case
)
_BAR: Final = re.compile(r"(?<=\w)\\(?=\w|$)|[{}~]")
"""Marks of an overbar: a backslash after each letter; braces and tildes."""
_AUTOMATIC: Final = re.compile(
    r"#\w+|Net-?\(.*|N-?\d{4,}|\$\$\$\d+|N\$\d+|\$?N\d{3,}|\$?Net\d+|Net[A-Z]+\d+_.*|unconnected-.*", re.IGNORECASE
)
_SLASH: Final = "{slash}"
_ACTIVE_LOW: Final = (("N", ""), ("", "N"), ("", "B"))
"""Letters that mark a word as active low when glued to it: NRST, RSTN, RSTB."""


def automatic(net: str) -> bool:
    """Whether a net's name, after its sheet path, was made up by the schematic editor: ``Net-(R13-Pad2)``, ``N$12``."""
    own = net.rsplit("/", 1)[-1] if net.startswith("/") else net
    return _AUTOMATIC.fullmatch(own.strip()) is not None


@lru_cache(maxsize=65536)
def tokens(name: str) -> tuple[str, ...]:
    """The words of a net or pin name in upper case, in order: ``/CPU/nSysRst2`` gives ``("N", "SYS", "RST", "2")``.

    Of a sheet path (a name that starts with ``/``) only the last step counts; in a pin name ``PA0/NRST`` both do.
    Overbars (``~RST~``, ``~{RST}``, ``R\\S\\T\\``) and ``#`` vanish; digits are words of their own.
    """
    own = name.rstrip("/").rsplit("/", 1)[-1] if name.startswith("/") else name
    plain = _BAR.sub("", own.replace(_SLASH, "/"))
    return tuple(word.upper() for word in _WORD.findall(plain))


def has_token(name: str, wanted: str) -> bool:
    """Whether the words of ``wanted`` stand in ``name`` side by side as whole words, active-low marks ignored.

    ``has_token("MCU_NRST", "RST")`` and ``has_token("~{POWER_GOOD}", "power good")`` are true;
    ``has_token("BURST", "RST")`` and ``has_token("PORTA", "POR")`` are false.
    """
    sought, words = tokens(wanted), tokens(name)
    if not sought:
        return False
    starts = range(len(words) - len(sought) + 1)
    return any(all(map(_same, words[start : start + len(sought)], sought)) for start in starts)


def _same(word: str, wanted: str) -> bool:
    return word == wanted or any(word == before + wanted + after for before, after in _ACTIVE_LOW)
