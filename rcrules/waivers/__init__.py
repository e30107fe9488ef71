"""Step 14: findings that a named person accepted for a reason, as long as nothing they rest on changes."""

from rcrules.waivers._apply import waived
from rcrules.waivers._model import Waiver
from rcrules.waivers._read import read
from rcrules.waivers._today import today
from rcrules.waivers._write import entries_text

__all__ = ["Waiver", "entries_text", "read", "today", "waived"]
