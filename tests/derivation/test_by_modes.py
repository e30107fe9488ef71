"""What no short formula gives: sums of modes, put in, whose every line a pocket calculator gets."""

from typing import Any

import pytest

from rcrules.derivation import derive
from rcrules.events import pose
from rcrules.findings import Json
from rcrules.measures import registry
from rcrules.problems import Bounds, Request, solve_bounds
from tests.derivation._calculator import work_out
from tests.derivation.test_by_hand import FACTS, subject
from tests.events.boards import Bench, bench

STRING = """
[part."C11"]
leakage = "0.5 uA"
rated-voltage = "6.3 V"
[part."C12"]
leakage = "0.5 uA"
rated-voltage = "6.3 V"
"""


@pytest.fixture(scope="module")
def wide() -> Bench:
    """Three stages bridged by a capacitor, a reset with a discharge diode, a high-pass, a balanced string."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in D1.2/K
        +5V: U2.3/VI/power_in C11.1 R10.1
        NRST: R1.2 C1.1 U1.7/NRST/input D1.1/A
        AIN: J1.1 R2.1 C8.1
        MID: R2.2 C5.1 R3.1
        OUT: R3.2 C6.1 R8.1 C9.1
        OUT2: R8.2 C10.1 C9.2 U1.8/IN/input
        HP: C8.2 R9.1 R12.1
        HP2: R12.2 C13.1
        ST: C11.2 C12.1 R10.2 R11.1
        GND: U2.2/GND/power_in U1.2/GND/power_in C1.2 C5.2 C6.2 J1.2 R9.2 C10.2 C12.2 R11.2 C13.2
    """
    parts = "R1 10k 1%, R2 1k 1%, R3 2k 1%, R8 5k 1%, R9 10k 1%, R10 100k 1%, R11 110k 1%, R12 10k 1%, "
    parts += "C1 1u 10% C0G, C5 10n 5% C0G, C6 22n 5% C0G, C8 1n 5% C0G, C9 100p 5% C0G, C10 10n 5% C0G, "
    parts += "C11 100u 20%, C12 100u 20%, C13 100p 5% C0G, D1 diode, J1 IN, U1 QX7301, U2 QX3300"
    return bench(parts, nets, FACTS + STRING)


ASKED: list[tuple[str, str, dict[str, Any]]] = [
    ("corner_frequency", "OUT2", {}),
    ("corner_frequency", "HP", {}),
    ("gain", "OUT2", {"frequency": 1e3}),
    ("gain", "HP2", {"frequency": 1e4}),
    ("time_constant", "OUT2", {}),
    ("time_constant", "HP", {}),
    ("thermal_noise", "MID", {}),
    ("thermal_noise", "OUT2", {}),
    ("peak_current", "C1", {"event": "power-up"}),
    ("peak_current", "C5", {"event": "step-up"}),
    ("delay", "NRST", {"event": "power-down", "to": "1 V"}),
    ("delay", "NRST", {"event": "power-down", "to": "2.5 V"}),
    ("pulse_energy", "R3", {"event": "step-up"}),
    ("pulse_energy", "R1", {"event": "power-up"}),
    ("peak_voltage", "HP2", {"event": "step-up"}),
    ("series_share", "C11", {}),
    ("series_share", "C12", {}),
]


def told(wide: Bench, measure: str, at: str, options: dict[str, Any]) -> tuple[Json, Bounds]:
    found = registry()[measure]
    problem = pose(wide.board, wide.project, subject(wide, at), found, options)
    (bounds,) = solve_bounds([Request(problem, found)])
    assert isinstance(bounds, Bounds)
    derived = derive(problem, found, bounds)
    assert derived is not None
    return derived, bounds


@pytest.mark.parametrize(("measure", "at", "options"), ASKED, ids=lambda item: str(item))
def test_a_pocket_calculator_gets_each_line_and_the_result(
    measure: str, at: str, options: dict[str, Any], wide: Bench
) -> None:
    derived, bounds = told(wide, measure, at, options)
    ends = {"nominal": bounds.nominal, "lowest": bounds.low, "highest": bounds.high}
    for case in derived["cases"]:
        assert case["by_hand"], case
        for step in case["steps"]:
            if step["put_in"]:
                assert work_out(step["put_in"]) == pytest.approx(work_out(step["text"]), rel=2e-5, abs=1e-15), step
        assert work_out(case["steps"][-1]["text"]) == pytest.approx(case["value"], rel=2e-5)
        for name in case["case"].split(", "):
            assert case["value"] == pytest.approx(ends[name], rel=1e-9)


def test_a_diode_that_conducts_is_named_where_its_modes_are(wide: Bench) -> None:
    derived, _ = told(wide, "delay", "NRST", {"event": "power-down", "to": "1 V"})
    notes = [step["note"] for step in derived["cases"][0]["steps"]]
    assert "from the modes of the whole network while D1 conducts" in notes


def test_of_a_mode_the_currents_meet_at_every_node(wide: Bench) -> None:
    derived, _ = told(wide, "time_constant", "OUT2", {})
    texts = {step["symbol"]: work_out(step["text"]) for step in derived["cases"][0]["steps"]}
    for node in ("MID", "OUT", "OUT2"):
        assert texts[f"i C at {node}"] == pytest.approx(texts[f"i R at {node}"], rel=1e-3)
