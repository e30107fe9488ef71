"""Step 10: a recognised board in; its parts, held nets, networks and quantities as the document holds them out."""

from rcrules.inventory._assumptions import Key, assumptions_of, listed_assumptions
from rcrules.inventory._board import board_counts, inputs, problems
from rcrules.inventory._conditions import conditions
from rcrules.inventory._coverage import CLASSES, counts, coverage
from rcrules.inventory._held import held
from rcrules.inventory._networks import networks
from rcrules.inventory._parts import listed, parts
from rcrules.inventory._place import place_json, shown
from rcrules.inventory._quantities import Quantities, as_quantity, case_json, node_quantities

__all__ = [
    "CLASSES",
    "Key",
    "Quantities",
    "as_quantity",
    "assumptions_of",
    "board_counts",
    "case_json",
    "conditions",
    "counts",
    "coverage",
    "held",
    "inputs",
    "listed",
    "listed_assumptions",
    "networks",
    "node_quantities",
    "parts",
    "place_json",
    "problems",
    "shown",
]
