"""Step 9: rules and board in, findings with three-valued verdicts out."""

from rcrules.checks._check import Checked, check
from rcrules.checks._packs import astray, packs, unclear, unmet

__all__ = ["Checked", "astray", "check", "packs", "unclear", "unmet"]
