"""Twelve rules as a lead would write them after reading the README's rule chapter, on the demo board."""

import tomllib
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.pipeline import Job, try_on

RULES = Path(__file__).parent / "lead_rules.toml"
FOUND = {
    "reset-pins-have-a-pull-up": {"NRST": "holds"},
    "large-ceramics-are-no-smaller-than-0805": dict.fromkeys(["C3", "C5", "C6", "C7", "C22"], "holds"),
    "battery-dividers-draw-little": {"R21": "holds", "R22": "holds"},
    "rails-have-bulk": {"+3V3": "holds", "+5V": "holds"},
    "converter-filters-keep-their-value": {"C20": "fails", "C21": "fails"},
    "noise-below-a-quarter-step": {"FIELD_SENSE": "holds", "LEVEL_ADC": "holds"},
    "small-resistors-see-little": {
        **dict.fromkeys(["R12", "R13", "R14", "R20", "R22", "R23"], "holds"),
        **dict.fromkeys(["R2", "R3", "R30", "R31"], "undecided"),
        "R21": "fails",
    },
    "buttons-answer-in-time": {"Net-(R13-Pad2)": "holds"},
    "connector-inputs-are-stopped": {"LEVEL_ADC": "holds"},
    "high-supplies-are-bled": {"+48V": "holds"},
    "nothing-but-the-pull-up-at-the-wake-button": {"Net-(R13-Pad2)": "fails"},
    "filters-pass-the-wave-and-stop-the-mains": {"FIELD_SENSE": "holds", "LEVEL_ADC": "undecided"},
}
"""Rule -> net or part -> outcome, as worked out by eye from the board's files."""


def test_they_are_twelve_of_at_most_ten_lines() -> None:
    rules = RULES.read_text(encoding="utf-8").split("[[rule]]")[1:]
    assert len(rules) == 12
    assert max(len(rule.strip().splitlines()) + 1 for rule in rules) <= 10
    assert len(tomllib.loads(RULES.read_text(encoding="utf-8"))["rule"]) == 12


@pytest.fixture(scope="module")
def found(tmp_path_factory: pytest.TempPathFactory) -> dict[str, dict[str, str]]:
    """Rule -> net or part -> outcome."""
    folder = tmp_path_factory.mktemp("demo")
    folder = folder / "board"
    assert main(["demo", str(folder)]) == 0
    tried = try_on(Job(inputs=(), project=str(folder / "rcrules.toml"), rules=(str(RULES),)))
    return {
        trial.rule.id: {item.net or ", ".join(item.parts): item.outcome for item in trial.findings} for trial in tried
    }


@pytest.mark.parametrize("rule", FOUND)
def test_each_finds_on_the_demo_board_what_it_should(rule: str, found: dict[str, dict[str, str]]) -> None:
    assert found[rule] == FOUND[rule]
