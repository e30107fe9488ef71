"""Step 7: solved cases in, one quantity per file out."""

from rcrules.measures._measure import Measure, Option, Theory

__all__ = ["Measure", "Option", "Theory"]
