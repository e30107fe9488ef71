"""Step 8: rule packs in TOML in, compiled rules out."""

from rcrules.rulebook._model import Limit, Pack, Rule, Selection

__all__ = ["Limit", "Pack", "Rule", "Selection"]
