"""A change of a part's value, taken apart into what makes it up."""

import math
from typing import Final

from rcrules.parts._model import RatedPart, Share

_EXACT: Final = 1e-6
"""Shares that make up a change agree with it to this."""
_LEAST: Final = 5e-5
"""Least share that counts."""


def apart(part: RatedPart, relative: float) -> tuple[tuple[Share, float], ...]:
    """Share and its relative change, for a value at one end of its spread; () where it lies between the ends.

    The loss by bias depends on the voltage that a problem applies, so it is what the other shares leave.
    """
    moves = {share: share.low if relative < 0 else share.high for share in part.shares}
    bias = next((share for share in moves if share.name == "bias"), None)
    others = math.prod(1 + move for share, move in moves.items() if share is not bias)
    left = (1 + relative) / others - 1
    least, most = (0.0, 0.0) if bias is None else (min(bias.low, 0.0), 0.0) if relative < 0 else (0.0, bias.high)
    if not least - _EXACT <= left <= most + _EXACT:
        return ()
    if bias is not None:
        moves[bias] = left
    return tuple((share, move) for share, move in moves.items() if abs(move) >= _LEAST)
