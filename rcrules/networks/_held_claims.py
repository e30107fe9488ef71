"""What a pin may say about the net it is on."""

from typing import Final

GROUND: Final = "ground"
NEGATIVE: Final = "negative"
"""The lower supply pin of a part: on ground or on a negative supply."""
SUPPLY: Final = "supply"
SOURCE: Final = "source"
"""Gives a supply: a regulator's output, an internal regulator's capacitor pin."""
SWITCH: Final = "switch"
NEVER: Final = "never"
"""A pin that holds no net whatever its type says: compensation, feedback, crystal, timing, bootstrap."""
OUTPUT: Final = "output"
OPEN: Final = "open-drain"
NOTHING: Final = ""
