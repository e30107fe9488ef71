"""What never happens, or has no limit, reads so in every measure that can meet it."""

from collections.abc import Mapping
from math import inf

import pytest

from rcrules.events import pose
from rcrules.measures import registry
from rcrules.problems import Bounds, solve_bounds
from rcrules.quantities import show
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


def board() -> Bench:
    """A reset behind 10 kΩ, a bare contact across its capacitor, a supply that rises at once with nothing to feed."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 C2.1 U1.3/VDD/power_in
        NRST: R1.2 C1.1 SW1.1 U1.7/NRST/input
        GND: U2.2/GND/power_in C1.2 C2.2 SW1.2 U1.2/GND/power_in
    """
    facts = """
        [supply."+3V3"]
        voltage = "3.3 V"
        rise = "0 s"
        load = "0 A"
        [pin."U1.NRST"]
        low = "0.99 V"
        high = "3.4 V"
        [part."SW1"]
        contact-resistance = "0 ohm"
    """
    return bench("R1 10k, C1 1u, C2 10u, SW1 push, U1 QX7301, U2 QX3300", nets, facts + EXACT)


UP = {"event": "power-up"}
NEVER: dict[str, tuple[str, Mapping[str, str | float], str]] = {
    "delay": ("NRST", {**UP, "to": "must have switched"}, "never"),
    "rise_time": ("NRST", {**UP, "low": "0.33 V", "high": "3.4 V"}, "never"),
    "edge_slowness": ("NRST", UP, "unlimited"),
    "pulse_width": ("NRST", {**UP, "level": "1 V"}, "never"),
    "dip_rearm": ("NRST", {"length": 0.1, "to": "3.4 V"}, "never"),
    "discharge_time": ("C2", {"to": "1 V"}, "never"),
    "hold_up_time": ("+3V3", {"to": "3 V"}, "never"),
    "inrush_current": ("+3V3", {}, "unlimited"),
    "peak_current": ("C2", UP, "unlimited"),
    "peak_pin_current": ("SW1", {}, "unlimited"),
}


@pytest.mark.parametrize("name", NEVER)
def test_it_is_infinite_and_reads_so(name: str):
    at, options, text = NEVER[name]
    on, measure = board(), registry()[name]
    subject: object = (
        on.board.parts.get(at)
        or on.board.held.get(at)
        or next((node for network in on.board.networks for node in network.nodes if node.net == at), None)
    )
    if measure.subject == "pin":
        subject = on.board.design.parts[at].pins[0]
    problem = pose(on.board, on.project, subject, measure, options)  # type: ignore[arg-type]  # one of the subjects
    found = solve_bounds([(problem, measure, True)])[0]
    assert isinstance(found, Bounds)
    assert (found.nominal, show(found.nominal, measure.unit)) == (inf, text)


def test_a_node_that_nothing_moves_reaches_no_level():
    """A driver that rests at 0 V: 1 V is never reached, and there is no step to settle from."""
    nets = "IN: J1.1 R1.1\nN: R1.2 C1.1 U1.1/AIN0/input\n+3V3: U1.3/VDD/power_in\nGND: J1.2 C1.2 U1.2/GND/power_in"
    still = bench("R1 1k, C1 1u, J1 IN, U1 QX7301", nets, '[net."IN"]\nswing = "0 V .. 0 V"\n' + EXACT)
    assert still.measure("N", "delay", event="step-up", to="1 V").nominal == inf
