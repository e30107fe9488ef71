"""The closed word lists of the trade that rules, project file and recognition share."""

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
PIN_KINDS: Final = ("input", "output", "open-drain", "supply", "passive")
"""What a project file may call a pin."""
FED_KINDS: Final = ("reset", "adc", "amplifier", "logic", "supply", "regulator", "timer", "connector", "other")
"""What a fed pin is, as a rule's ``kind-fed`` names it."""
