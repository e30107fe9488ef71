"""Each measure on small boards: a pocket calculator gets every line and the printed number."""

from typing import Any

import pytest

from rcrules.derivation import derive
from rcrules.design import Pin
from rcrules.events import pose
from rcrules.measures import registry
from rcrules.networks import Held
from rcrules.problems import Bounds, Request, solve_bounds
from tests.derivation._calculator import work_out
from tests.events.boards import Bench, bench

FACTS = """
[supply."+3V3"]
voltage = "3.3 V +/- 3 %"
valid   = "3.0 V"
rise    = "0.5 ms .. 2 ms"
fall    = "5 ms .. 50 ms"
load    = "10 mA .. 20 mA"
[supply."+5V"]
voltage = "4.9 V .. 5.1 V"
load    = "0.1 W .. 0.2 W"
[net."AIN"]
swing = "0 V .. 2.5 V"
[pin."U1.NRST"]
low     = "0.99 V"
high    = "2.31 V"
leakage = "-1 uA .. 1 uA"
drive   = "0.4 V at 3 mA"
[part."R1"]
rated-power = "0.1 W"
"""


@pytest.fixture(scope="module")
def small() -> Bench:
    """A reset with R and C, a filter of two stages, a filter behind a divider, and capacitors at two supplies."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in C2.1 C3.1
        +5V: U2.3/VI/power_in C4.1 R7.1
        NRST: R1.2 C1.1 U1.7/NRST/input
        AIN: J1.1 R2.1 R4.1
        MID: R2.2 C5.1 R3.1
        OUT: R3.2 C6.1 U1.8/IN/input
        TAP: R4.2 R5.1 R6.1 C7.1 U1.9/IN2/input
        GND: U2.2/GND/power_in U1.2/GND/power_in C1.2 C2.2 C3.2 C4.2 C5.2 C6.2 R5.2 R6.2 C7.2 J1.2 R7.2
    """
    parts = "R1 10k 1%, R2 1k 1%, R3 2k 1%, R4 10k 1%, R5 22k 1%, R6 33k 1%, R7 100k 1%, C1 1u 10% C0G, "
    parts += "C2 10u 20% C0G, C3 100n 10% C0G, C4 47u 20% C0G, C5 10n 5% C0G, C6 22n 5% C0G, C7 10n 5% C0G, "
    parts += "J1 IN, U1 QX7301, U2 QX3300"
    return bench(parts, nets, FACTS)


ASKED: list[tuple[str, str, dict[str, Any]]] = [
    ("total_capacitance", "+3V3", {}),
    ("stored_energy", "+3V3", {}),
    ("inrush_current", "+3V3", {}),
    ("hold_up_time", "+3V3", {"to": "2.7 V"}),
    ("effective_capacitance", "C1", {}),
    ("stored_charge", "C1", {}),
    ("applied_voltage", "C7", {}),
    ("power", "R4", {}),
    ("power_ratio", "R1", {}),
    ("pulse_energy", "R4", {"event": "step-up"}),
    ("peak_current", "R2", {"event": "step-up"}),
    ("peak_current", "C2", {"event": "power-up"}),
    ("peak_current", "C7", {"event": "step-up"}),
    ("hold_up_time", "+3V3", {"to": "3.3 V"}),
    ("discharge_time", "C4", {"to": "1 V"}),
    ("discharge_time", "C4", {"to": "1 V", "fault": "any one resistor open"}),
    ("pin_voltage", "U1.NRST", {}),
    ("input_voltage_low", "U1.IN2", {}),
    ("input_voltage_high", "U1.NRST", {}),
    ("final_voltage", "TAP", {"event": "step-up"}),
    ("peak_voltage", "NRST", {}),
    ("pulse_width", "NRST", {"level": "1 V", "side": "below"}),
    ("dip_rearm", "NRST", {"length": 0.1, "armed": "0.99 V", "to": "2.31 V"}),
    ("dip_rearm", "NRST", {"length": 0.1, "armed": "0.99 V", "to": "2.31 V", "from": "supply valid"}),
    ("dip_rearm", "NRST", {"length": 1e-6, "armed": "0.99 V", "to": "2.31 V"}),
    ("edge_slowness", "NRST", {"event": "power-up"}),
    ("thermal_noise", "TAP", {}),
    ("gain", "TAP", {"frequency": 1e3}),
    ("time_constant", "OUT", {}),
    ("corner_frequency", "OUT", {}),
    ("settling_time", "OUT", {"event": "step-up"}),
    ("rise_time", "MID", {"event": "step-up"}),
]


def subject(small: Bench, at: str) -> Any:
    """A part, pin, supply or node by its name."""
    pins: dict[str, Pin] = {pin.key: pin for net in small.board.design.nets.values() for pin in net.pins}
    supplies: dict[str, Held] = {name: held for name, held in small.board.held.items() if held.kind == "supply"}
    return small.board.parts.get(at) or pins.get(at) or supplies.get(at) or small.node(at)


@pytest.mark.parametrize(("measure", "at", "options"), ASKED, ids=lambda item: str(item))
def test_a_pocket_calculator_gets_each_line_and_the_result(
    measure: str, at: str, options: dict[str, Any], small: Bench
) -> None:
    found = registry()[measure]
    problem = pose(small.board, small.project, subject(small, at), found, options)
    (bounds,) = solve_bounds([Request(problem, found)])
    assert isinstance(bounds, Bounds)
    derived = derive(problem, found, bounds)
    assert derived is not None
    ends = {"nominal": bounds.nominal, "lowest": bounds.low, "highest": bounds.high}
    for case in derived["cases"]:
        assert case["by_hand"], case
        for step in case["steps"]:
            if step["put_in"]:
                assert work_out(step["put_in"]) == pytest.approx(work_out(step["text"]), rel=2e-5, abs=1e-15), step
        assert work_out(case["steps"][-1]["text"]) == pytest.approx(case["value"], rel=2e-5)
        for name in case["case"].split(", "):
            assert case["value"] == pytest.approx(ends[name], rel=1e-9)


def test_of_single_faults_the_worst_is_named(small: Bench) -> None:
    """Without R7, its only resistor, nothing discharges C4."""
    found = registry()["discharge_time"]
    options = {"to": "1 V", "fault": "any one resistor open"}
    problem = pose(small.board, small.project, subject(small, "C4"), found, options)
    (bounds,) = solve_bounds([Request(problem, found)])
    assert isinstance(bounds, Bounds)
    derived = derive(problem, found, bounds)
    assert derived is not None
    first, last = derived["cases"][0]["steps"]
    assert (first["symbol"], first["text"], last["text"]) == ("R7", "unlimited", "never")


def test_two_stages_have_the_time_constants_of_the_quadratic(small: Bench) -> None:
    """R2 1 kΩ, C5 10 nF, R3 2 kΩ, C6 22 nF: a = 76 µs, b = 440 µs² (hand derivation); tau = 69.66 µs."""
    found = registry()["time_constant"]
    problem = pose(small.board, small.project, subject(small, "OUT"), found, {})
    (bounds,) = solve_bounds([Request(problem, found)])
    assert isinstance(bounds, Bounds)
    assert bounds.nominal == pytest.approx((76e-6 + (76e-6**2 - 4 * 440e-12) ** 0.5) / 2, rel=1e-9)
    derived = derive(problem, found, bounds)
    assert derived is not None
    steps = {step["symbol"]: step["text"] for step in derived["cases"][0]["steps"]}
    assert work_out(steps["a"]) == pytest.approx(76e-6)
    assert work_out(steps["b"]) == pytest.approx(440e-12)
