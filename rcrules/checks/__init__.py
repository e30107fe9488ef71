"""Step 9: rules and board in, findings with three-valued verdicts out."""

from rcrules.checks._agreement import agreeing
from rcrules.checks._asked import Asked
from rcrules.checks._check import Checked, check
from rcrules.checks._numbers import known, near, numbers_at
from rcrules.checks._packs import astray, packs, unclear, unmet
from rcrules.checks._subject import Subject
from rcrules.checks._trial import Trial, trials, turning

__all__ = [
    "Asked",
    "Checked",
    "Subject",
    "Trial",
    "agreeing",
    "astray",
    "check",
    "known",
    "near",
    "numbers_at",
    "packs",
    "trials",
    "turning",
    "unclear",
    "unmet",
]
