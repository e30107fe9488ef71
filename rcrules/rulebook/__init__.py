"""Step 8: rule packs in TOML in, compiled rules out."""

from rcrules.rulebook._condition import facts_of, holds
from rcrules.rulebook._facts import FACTS, WORDS
from rcrules.rulebook._model import (
    Comparison,
    Condition,
    Example,
    Junction,
    Limit,
    OptionValue,
    Pack,
    Rule,
    Selection,
    Term,
    Worded,
)
from rcrules.rulebook._packs import compile_pack, load, packs, packs_folder, shipped
from rcrules.rulebook._schema import schema
from rcrules.rulebook._sentence import plural, sentence
from rcrules.rulebook._settings import check_settings, strange_settings
from rcrules.rulebook._value import COUNTS, NUMBER_FACTS, WORD_FACTS, dict_of

__all__ = [
    "COUNTS",
    "FACTS",
    "NUMBER_FACTS",
    "WORDS",
    "WORD_FACTS",
    "Comparison",
    "Condition",
    "Example",
    "Junction",
    "Limit",
    "OptionValue",
    "Pack",
    "Rule",
    "Selection",
    "Term",
    "Worded",
    "check_settings",
    "compile_pack",
    "dict_of",
    "facts_of",
    "holds",
    "load",
    "packs",
    "packs_folder",
    "plural",
    "schema",
    "sentence",
    "shipped",
    "strange_settings",
]
