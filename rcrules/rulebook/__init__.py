"""Step 8: rule packs in TOML in, compiled rules out."""

from rcrules.rulebook._condition import FACTS, facts_of, holds
from rcrules.rulebook._model import Comparison, Condition, Example, Junction, Limit, OptionValue, Pack, Rule, Selection
from rcrules.rulebook._packs import compile_pack, load, packs, packs_folder, shipped
from rcrules.rulebook._sentence import sentence
from rcrules.rulebook._settings import check_settings, strange_settings

__all__ = [
    "FACTS",
    "Comparison",
    "Condition",
    "Example",
    "Junction",
    "Limit",
    "OptionValue",
    "Pack",
    "Rule",
    "Selection",
    "check_settings",
    "compile_pack",
    "facts_of",
    "holds",
    "load",
    "packs",
    "packs_folder",
    "sentence",
    "shipped",
    "strange_settings",
]
