"""Step 13: two findings documents in, the newer one out, with what broke, what mended, what moved and why."""

from rcrules.comparison._circumstances import circumstances
from rcrules.comparison._compare import compared
from rcrules.comparison._match import pairs

__all__ = ["circumstances", "compared", "pairs"]
