"""Step 4: parts in, held nets, networks and nodes with their roles out."""

from rcrules.networks._coverage import BOOTSTRAP, OPEN_END
from rcrules.networks._fed import pin_kinds
from rcrules.networks._model import Amplifier, Board, Branch, Contact, Diode, Held, Network, Node
from rcrules.networks._recognise import recognise

__all__ = [
    "BOOTSTRAP",
    "OPEN_END",
    "Amplifier",
    "Board",
    "Branch",
    "Contact",
    "Diode",
    "Held",
    "Network",
    "Node",
    "pin_kinds",
    "recognise",
]
