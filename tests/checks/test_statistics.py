"""Statistics of findings: against the share that can be worked out, and asked for from the command line."""

import json
from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.pipeline import Job, run
from tests.cli._board import NETLIST, PROJECT

RULES = """[pack]
name = "our-rules"
title = "t"
[[rule]]
id = "slow-enough"
title = "t"
level = "error"
role = ["power-on-delay"]
measure = "time_constant"
at-least = "{limit}"
why = "w"
source = "the test"
"""
NETLIST_TIGHT = NETLIST.replace("10k 1%", "10k 0%").replace("1uF 10% 16V", "1uF 10% 16V C0G")
"""tau = 10 ms ± 10 % but for the drift of a few parts in ten thousand."""


@pytest.fixture
def board(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    (tmp_path / "board.xml").write_text(NETLIST_TIGHT.replace("10k 0%", "10k 0.001% 0ppm/K"), encoding="utf-8")
    (tmp_path / "our-rules.toml").write_text(RULES.format(limit="9.5 ms"))
    (tmp_path / "rcrules.toml").write_text(PROJECT)
    return tmp_path


def fraction(**changed: object) -> float:
    (item,) = run(Job(project="rcrules.toml", samples=20_000, **changed)).findings  # type: ignore[arg-type]
    assert item.statistics is not None
    found = item.statistics["fraction"]
    assert found["low"] <= found["nominal"] <= found["high"]
    return float(found["nominal"])


@pytest.mark.usefixtures("board")
def test_a_quarter_of_uniform_samples_lies_in_the_lowest_quarter() -> None:
    """9 ms .. 11 ms uniform: a quarter is below 9.5 ms; six standard errors of 20 000 samples are 1.8 %."""
    assert fraction(seed=1) == pytest.approx(0.25, abs=0.02)


def test_normal_samples_fail_as_the_normal_distribution_says(board: Path) -> None:
    """9.5 ms is 1.5 standard deviations below the middle: 6.68 % less what is cut off (published normal tables)."""
    (board / "rcrules.toml").write_text(PROJECT.replace("[conditions]", '[conditions]\ndistribution = "normal"'))
    assert fraction(seed=1) == pytest.approx(0.0668 - 0.00135, abs=0.01)


def test_the_distribution_of_a_kind_and_of_a_part_goes_before_the_general_one(board: Path) -> None:
    (board / "rcrules.toml").write_text(PROJECT + '[defaults.capacitor]\ndistribution = "normal"\n')
    assert fraction(seed=1) == pytest.approx(0.0655, abs=0.01)
    own = '[defaults.capacitor]\ndistribution = "normal"\n[part."C1"]\ndistribution = "uniform"\n'
    (board / "rcrules.toml").write_text(PROJECT + own)
    assert fraction(seed=1) == pytest.approx(0.25, abs=0.02)


@pytest.mark.usefixtures("board")
def test_the_same_seed_gives_the_same_document(capsys: pytest.CaptureFixture[str]) -> None:
    texts = []
    for seed in ("1", "1", "2"):
        main(["check", "--samples", "500", "--seed", seed, "--report", "json"])
        texts.append(capsys.readouterr().out)
    assert texts[0] == texts[1] != texts[2]
    found = json.loads(texts[0])["findings"][0]["statistics"]
    assert (found["samples"], found["seed"], found["distributions"]) == (500, 1, ["uniform"])


@pytest.mark.usefixtures("board")
def test_the_report_tells_the_share_with_its_confidence(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["check", "--samples", "500"]) == 1
    out = capsys.readouterr().out
    assert "of 500 samples (uniform) fail" in out
    assert "with 95 % confidence" in out
    assert "root-sum-square" in out


@pytest.mark.usefixtures("board")
@pytest.mark.parametrize("number", ["0", "x", "1000001", "1" * 5000])
def test_numbers_of_samples_out_of_reach_are_refused(number: str, capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit) as caught:
        main(["check", "--samples", number])
    assert caught.value.code == 2
    assert "1 to 1000000" in capsys.readouterr().err
