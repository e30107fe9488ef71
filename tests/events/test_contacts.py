"""Contacts to ground and to a supply, normally open and closed, with resistance: pressed and released."""

from dataclasses import dataclass
from math import inf, log

import numpy as np
import pytest
from scipy.linalg import expm

from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\n'


@dataclass(frozen=True, kw_only=True)
class Key:
    """A contact between the node and a rail, and the resistor from the node to the other rail."""

    to: str
    normally: str
    ohms: str = "100 ohm"

    @property
    def board(self) -> Bench:
        high, low = ("SW1.2", "R1.1") if self.to == "supply" else ("R1.1", "SW1.2")
        nets = f"""
            +3V3: U2.1/VO/power_out U1.3/VDD/power_in {high}
            N: R1.2 C1.1 SW1.1 U1.7/KEY/input
            GND: U2.2/GND/power_in C1.2 U1.2/GND/power_in {low}
        """
        contact = f'[part."SW1"]\ncontact = "normally {self.normally}"\ncontact-resistance = "{self.ohms}"\n'
        facts = '[supply."+3V3"]\nvoltage = "3.3 V"\n' + contact + EXACT
        return bench("R1 10k, C1 1u, SW1 push, U1 QX7301, U2 QX3300", nets, facts)


OPEN, CLOSED = 10e-3, 1e-6 * 1e4 * 100 / 10100
"""Time constants with the contact open and closed [s]."""
LEFT = 100 / 10100
"""Part of the supply that the contact leaves across itself."""


@pytest.mark.parametrize("event", ["press", "release"])
@pytest.mark.parametrize("normally", ["open", "closed"])
@pytest.mark.parametrize("to", ["ground", "supply"])
def test_every_contact_moves_its_node_as_it_closes_or_opens(to: str, normally: str, event: str):
    """One time constant each: R1 ∥ contact while it is closed, R1 alone while it is open (divider and RC, by hand)."""
    board = Key(to=to, normally=normally).board
    closes = (event == "press") == (normally == "open")
    ends = {"ground": (3.3, 3.3 * LEFT), "supply": (0.0, 3.3 * (1 - LEFT))}[to]
    before, after = ends if closes else ends[::-1]
    tau = CLOSED if closes else OPEN
    assert board.measure("N", "initial_voltage", event=event).nominal == pytest.approx(before, abs=1e-12)
    assert board.measure("N", "final_voltage", event=event).nominal == pytest.approx(after, abs=1e-12)
    expected = tau * log((before - after) / (1.65 - after))
    assert board.measure("N", "delay", event=event, to="1.65 V").nominal == pytest.approx(expected, rel=1e-9)


def test_a_contact_of_high_resistance_never_gets_there():
    """10 kΩ against 10 kΩ leaves half of the supply."""
    worn = Key(to="ground", normally="open", ohms="10 kohm").board
    assert worn.measure("N", "delay", event="press", to="0.99 V").nominal == inf


def test_the_resistance_of_a_contact_is_one_number_wherever_it_acts():
    spread = Key(to="ground", normally="open", ohms="0 ohm .. 100 ohm").board
    found = spread.measure("N", "final_voltage", event="press", given_only=True)
    assert (found.low, found.high) == (pytest.approx(0.0, abs=1e-9), pytest.approx(3.3 * LEFT))
    assert [item.name for item in spread.pose("N", "final_voltage", event="press").parameters].count("SW1 contact") == 1


def test_a_bounce_back_is_the_release_from_where_the_press_had_led():
    """Behind 1 kΩ: released after a full press the two capacitors charge as the matrix exponential says."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        A: R1.2 R2.1 C2.1 SW1.1
        N: R2.2 C1.1 U1.7/KEY/input
        GND: U2.2/GND/power_in C1.2 C2.2 U1.2/GND/power_in SW1.2
    """
    facts = '[supply."+3V3"]\nvoltage = "3.3 V"\n[part."SW1"]\ncontact-resistance = "0 ohm"\n' + EXACT
    board = bench("R1 10k, R2 1k, C1 1u, C2 100n, SW1 push, U1 QX7301, U2 QX3300", nets, facts)
    g = np.array([[1e-4 + 1e-3, -1e-3], [-1e-3, 1e-3]])
    c = np.diag([100e-9, 1e-6])
    expected = 3.3 * (1 - (expm(-np.linalg.solve(c, g) * 5e-3) @ np.ones(2))[1])
    found = board.measure("N", "voltage_at", event="release", time=5e-3).nominal
    assert found == pytest.approx(expected, rel=1e-9)
