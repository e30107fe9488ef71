"""What dielectrics absorb: no settling within a narrower band is promised."""

from math import exp
from pathlib import Path

import pytest

from rcrules.findings import Finding
from rcrules.pipeline import Job, run
from tests.events.boards import Bench, bench, xml

NETS = """
    IN: J1.1 R1.1
    N: R1.2 C1.1 U1.1/AIN0/input
    +3V3: U1.3/VDD/power_in
    GND: J1.2 C1.2 U1.2/GND/power_in
"""


def settled(folder: Path, dielectric: str, band: str, limit: str, facts: str = "") -> Finding:
    """A rule on the settling of 1 kΩ with 100 nF, from files."""
    (folder / "board.xml").write_text(
        xml(f"R1 1k 1%, C1 100n 5% {dielectric}, J1 IN, U1 QX7301", NETS), encoding="utf-8"
    )
    (folder / "rcrules.toml").write_text(
        f'[board]\nnetlist = "board.xml"\nrules = ["settles.toml"]\n{facts}', encoding="utf-8"
    )
    rule = f"""
        [pack]
        name = "settles"
        title = "Settles"
        [[rule]]
        id = "settles"
        title = "settles"
        level = "error"
        net = ["N"]
        measure = "settling_time"
        with = {{ event = "step-up", band = "{band}" }}
        at-most = "{limit}"
        why = "asked"
        source = "asked"
    """
    (folder / "settles.toml").write_text(rule, encoding="utf-8")
    (found,) = run(Job(project=str(folder / "rcrules.toml"))).findings
    return found


def test_a_band_below_what_the_dielectric_absorbs_is_undecided(tmp_path: Path):
    """X7R absorbs about 2.5 % (a maker's comparison of dielectrics); a slower reading drifts by that much."""
    found = settled(tmp_path, "X7R", "1 %", "5 ms")
    assert (found.outcome, found.ask) == ("undecided", ['[part."C1"] absorption = "…"'])
    assert found.reason == "C1: X7R, whose dielectric absorbs up to 2.5 %; a band of 1 % cannot be promised"
    assert found.measured is not None
    assert found.measured.nominal == pytest.approx(1e-4 * 4.605170)


def test_a_wider_band_is_decided(tmp_path: Path):
    assert settled(tmp_path, "X7R", "3 %", "5 ms").outcome == "holds"


def test_what_fails_fails_whatever_is_absorbed(tmp_path: Path):
    assert settled(tmp_path, "X7R", "1 %", "100 us").outcome == "fails"


def test_a_better_dielectric_decides_a_narrower_band(tmp_path: Path):
    """NP0 0.6 %, by the same comparison."""
    assert settled(tmp_path, "C0G", "1 %", "5 ms").outcome == "holds"
    assert settled(tmp_path, "C0G", "0.1 %", "5 ms").outcome == "undecided"


def test_the_project_may_know_better(tmp_path: Path):
    facts = '[part."C1"]\nabsorption = "0.01 %"\n'
    assert settled(tmp_path, "X7R", "0.1 %", "5 ms", facts).outcome == "holds"


def low_pass(project: str) -> Bench:
    return bench("R1 1k, C1 100n X7R, J1 IN, U1 QX7301", NETS, project + '[defaults.resistor]\ntolerance = "0 %"\n')


def test_no_less_than_what_is_absorbed_is_left():
    found = low_pass("").measure("N", "residual", time=1e-3)
    assert (found.nominal, found.high) == (pytest.approx(exp(-10), rel=1e-6), pytest.approx(0.025))
