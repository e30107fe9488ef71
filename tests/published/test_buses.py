"""Two-wire buses from the netlist to the edge: UM10204 (Rev. 5, 2012), section 7.1 and table 10."""

from math import log

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n'
RATIO = log(7 / 3)
"""0.847298: from 30 % to 70 % of the supply; UM10204 prints 0.8473."""


def bus(ohms: str, picofarads: float, tolerance: str = EXACT) -> Bench:
    """Two parts on a line with pull-ups to 3.3 V; thresholds 30 % and 70 % of the supply (UM10204, table 9)."""
    refs = [f"R{number} {value}" for number, value in enumerate(ohms.split(), 1)]
    nets = f"""
        +3V3: U2.1/VO/power_out U1.3/VDD/power_in U3.3/VDD/power_in {" ".join(f"R{n + 1}.1" for n in range(len(refs)))}
        SDA: U1.7/SDA/open_collector U3.7/SDA/bidirectional {" ".join(f"R{n + 1}.2" for n in range(len(refs)))}
        GND: U2.2/GND/power_in U1.2/GND/power_in U3.2/GND/power_in
    """
    project = f"""
        [supply."+3V3"]
        voltage = "3.3 V"
        [net."SDA"]
        wiring-capacitance = "{picofarads:g} pF"
        [pin."*.SDA"]
        low = "30 % of +3V3"
        high = "70 % of +3V3"
    """
    return bench(f"{', '.join(refs)}, U1 QX7301, U2 QX3300, U3 QX7301", nets, project + tolerance)


RISE = {"event": "step-up", "low": "30 % of step", "high": "70 % of step"}


def test_a_line_with_wiring_of_known_capacitance_is_a_node():
    assert bus("2.2k", 200.0).node("SDA").role == "bus-pull-up"


@pytest.mark.parametrize(
    ("ohms", "picofarads", "seconds"),
    [("2950.5", 400.0, 1000e-9), ("885.16", 400.0, 300e-9), ("257.50", 550.0, 120e-9), ("1770.33", 200.0, 300e-9)],
    ids=["standard", "fast", "fast-plus", "SLVA689 section 4"],
)
def test_the_largest_pull_up_makes_the_slowest_edge(ohms: str, picofarads: float, seconds: float):
    """Rp(max) = tr/(0.8473 Cb) at the limits of UM10204, table 10, and the example of TI SLVA689."""
    line = bus(ohms, picofarads)
    assert line.measure("SDA", "rise_time", **RISE).nominal == pytest.approx(seconds, rel=2e-5)
    slow = line.measure("SDA", "edge_slowness")
    assert slow.nominal == pytest.approx(seconds / (0.4 * 3.3), rel=2e-5)


def test_pull_ups_on_both_sheets_act_together():
    """2.2 kΩ and 4.7 kΩ with 200 pF: 253.944 ns; at ±5 % 241.247 to 266.641 ns (derived)."""
    line = bus("2.2k 4.7k", 200.0, '[defaults.resistor]\ntolerance = "5 %"\n')
    found = line.measure("SDA", "rise_time", given_only=True, **RISE)
    assert (found.low, found.nominal, found.high) == pytest.approx((241.247e-9, 253.944e-9, 266.641e-9), rel=2e-6)
    assert found.proved
    slow = line.measure("SDA", "edge_slowness", given_only=True)
    assert slow.high == pytest.approx(266.641e-9 / 1.32, rel=2e-6)
    assert slow.proved


def test_thresholds_of_a_line_are_asked_for():
    line = bench(
        "R1 2.2k, U1 QX7301, U2 QX3300, U3 QX7301",
        """
        +3V3: U2.1/VO/power_out U1.3/VDD/power_in U3.3/VDD/power_in R1.1
        SDA: U1.7/SDA/open_collector U3.7/SDA/bidirectional R1.2
        GND: U2.2/GND/power_in U1.2/GND/power_in U3.2/GND/power_in
        """,
        '[supply."+3V3"]\nvoltage = "3.3 V"\n[net."SDA"]\nwiring-capacitance = "100 pF"\n',
    )
    with pytest.raises(Unmeasurable) as caught:
        line.pose("SDA", "edge_slowness")
    assert caught.value.ask.startswith('[pin."U3.SDA"] low = ')
