"""The closed word lists of the trade that rules, project file and recognition share."""

import re
from collections.abc import Mapping
from typing import Final

ROLES: Final = (
    "power-on-delay",
    "debounce",
    "low-pass",
    "divider-low-pass",
    "high-pass",
    "supply-filter",
    "snubber",
    "termination",
    "chassis-bond",
    "bleeder",
    "sense-shunt",
    "feedback",
    "oscillator",
    "gate-drive",
    "timing",
    "bootstrap",
    "bus-pull-up",
    "decoupling",
    "other",
)
EVENTS: Final = ("power-up", "power-down", "press", "release", "step-up", "step-down", "sample")
HELD_KINDS: Final = ("ground", "supply", "driven")
CERTAINTIES: Final = ("sure", "unsure")
SEVERITIES: Final = ("error", "warning", "note")
OUTCOMES: Final = ("fails", "undecided", "holds", "waived")
PART_KINDS: Final = (
    "resistor",
    "capacitor",
    "inductor",
    "ferrite",
    "diode",
    "transistor",
    "ic",
    "connector",
    "contact",
    "jumper",
    "fuse",
    "crystal",
    "test-point",
    "net-tie",
    "thermistor",
    "varistor",
    "potentiometer",
    "resistor-array",
    "capacitor-array",
    "battery",
    "transformer",
    "mechanical",
    "other",
)
PIN_TYPES: Final = (
    "input",
    "output",
    "bidirectional",
    "tri-state",
    "open-collector",
    "open-emitter",
    "passive",
    "power-in",
    "power-out",
    "no-connect",
    "unspecified",
    "",
)
"""Pin types as the readers normalise them; '' = the export names none."""
AGREEMENTS: Final = ("value", "ratings", "listing", "fitting", "connections")
"""On what the inputs of one board may agree or not about a part."""
AGREEMENT: Final = "agreement on "
"""How the facts of rules about that begin."""
PIN_KINDS: Final = ("input", "output", "open-drain", "supply", "passive")
"""What a project file may call a pin."""
DIELECTRICS: Final = (
    "aluminium",
    "tantalum",
    "niobium",
    "polymer",
    "film",
    "PET film",
    "PP film",
    "PEN film",
    "PPS film",
    "PS film",
    "mica",
    "ceramic",
)
"""Technologies of capacitors that have no letter code."""
TECHNOLOGIES: Final = ("ceramic", "film", "mica", "aluminium", "tantalum", "niobium", "polymer")
"""Families of the dielectrics."""
DIELECTRIC_CODE: Final = re.compile(
    r"[XYZ][2456789][A-FLPRSTUV]|[CBLAMPRSTVU][0-3678][GHJKLMN]|2[BCDEFRX][12346]|NP[0O]|C[0O]G|CG[0O]|C[GHJ]|UJ|SL"
)
"""Letter codes of ceramics: EIA-198 (classes 2 and 1), IEC 60384, and their common spellings, in capitals."""


def technology(dielectric: str) -> str:
    """``ceramic`` of ``X7R``, ``film`` of ``PP film``; '' where it is not known."""
    last = dielectric.rpartition(" ")[2]
    if last in TECHNOLOGIES:
        return last
    return "ceramic" if DIELECTRIC_CODE.fullmatch(dielectric.upper()) else ""


LIMITS: Final = ("file-size", "parts", "connections", "nets")
"""What of one input is limited: its size in MiB, and what it lists."""
NUMBER_CODES: Final[Mapping[str, tuple[str, ...]]] = {
    "value": ("digits", "letters", "three characters", "text"),
    "tolerance": ("letter", "text"),
    "rated-voltage": ("digit and letter", "text"),
    "rated-power": ("text",),
    "tcr": ("text",),
    "dielectric": ("letters",),
}
"""Fact in a part number -> the codes of open standards in which it may be written, the usual one first."""
FED_KINDS: Final = ("reset", "adc", "amplifier", "logic", "supply", "regulator", "timer", "connector", "other")
"""What a fed pin is, as a rule's ``kind-fed`` names it."""
BOUNDS: Final = ("worst", "nominal", "yield")
"""Over which cases a rule judges."""
