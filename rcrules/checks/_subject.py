"""One thing that a rule may be held against."""

from dataclasses import dataclass

from rcrules.checks._views import View
from rcrules.design import Pin
from rcrules.networks import Held, Network, Node
from rcrules.parts import RatedPart


@dataclass(frozen=True, slots=True, kw_only=True)
class Subject:
    """A node, a capacitor or resistor, a pin, a supply, or a network."""

    kind: str
    """``node``, ``capacitor``, ``resistor``, ``pin``, ``supply``, ``network``, ``board``."""
    target: Node | RatedPart | Pin | Held | Network
    network: Network | None
    """Where it stands; None for a part between held nets."""
    net: str | None
    """Name of the node, of the pin's or supply's net; None for a part."""
    refs: tuple[str, ...]
    feeds: tuple[str, ...]
    nets: tuple[str, ...]
    """Nets of the node, joined ones too, or of the part's pins."""
    views: tuple[View, ...]
