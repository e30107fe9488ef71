"""Step 19: the tiny circuits that rules bring with them, tried: does the rule say what its author expects?"""

from rcrules.examples._circuit import circuit_export
from rcrules.examples._try import Tried, board_of, tried

__all__ = ["Tried", "board_of", "circuit_export", "tried"]
