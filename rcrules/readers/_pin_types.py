"""Pin types in every spelling that exports use, brought to the words of the vocabulary."""

from functools import lru_cache
from typing import Final

_SPELLINGS: Final = {
    "": "",
    "input": "input",
    "in": "input",
    "output": "output",
    "out": "output",
    "bidirectional": "bidirectional",
    "bidi": "bidirectional",
    "inout": "bidirectional",
    "io": "bidirectional",
    "tristate": "tri-state",
    "3state": "tri-state",
    "hiz": "tri-state",
    "opencollector": "open-collector",
    "opencol": "open-collector",
    "opendrain": "open-collector",
    "openemitter": "open-emitter",
    "openem": "open-emitter",
    "opensource": "open-emitter",
    "passive": "passive",
    "pas": "passive",
    "power": "power-in",
    "pwr": "power-in",
    "powerin": "power-in",
    "pwrin": "power-in",
    "powerinput": "power-in",
    "powerout": "power-out",
    "pwrout": "power-out",
    "poweroutput": "power-out",
    "noconnect": "no-connect",
    "notconnected": "no-connect",
    "unconnected": "no-connect",
    "nc": "no-connect",
    "free": "no-connect",
    "unspecified": "unspecified",
    "unspc": "unspecified",
}


@lru_cache(maxsize=1024)
def pin_type(text: str) -> str | None:
    """The word of ``vocabulary.PIN_TYPES`` for a type as exported, or None for a spelling not known.

    A ``+no_connect`` suffix marks that the pin is left open on purpose; the type before it stands.
    """
    base = text.partition("+")[0]
    return _SPELLINGS.get("".join(character for character in base.lower() if character.isalnum()))
