"""Step 7: solved cases in, one quantity per file out."""

from rcrules.measures._measure import Measure, Option, Theory
from rcrules.measures._passing import passed
from rcrules.measures._registry import registry

__all__ = ["Measure", "Option", "Theory", "passed", "registry"]
