"""Step 9: rules and board in, findings with three-valued verdicts out."""

from rcrules.checks._check import Checked, check
from rcrules.checks._coverage import CLASSES, counts, coverage

__all__ = ["CLASSES", "Checked", "check", "counts", "coverage"]
