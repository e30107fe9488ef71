"""Step 18: a problem and how its parameters are spread in, how often a limit is missed out; only on request."""

from rcrules.statistics._estimates import Estimate, root_sum_square, wilson
from rcrules.statistics._samples import DISTRIBUTIONS, samples, values

__all__ = ["DISTRIBUTIONS", "Estimate", "root_sum_square", "samples", "values", "wilson"]
