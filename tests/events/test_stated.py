"""What the project file says lies across a capacitor, on a small board with a converter."""

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

RATED = '[defaults.capacitor]\ntolerance = "0 %"\nrated-voltage = "10 V"\n'
ACROSS = '[part."C1"]\nvoltage-across = "4.5 V .. 5.5 V"\n'


def board(project: str = RATED) -> Bench:
    """C1 from switch node to boot pin, C2 in series with a crystal, C3 with an open end."""
    nets = """
        BOOT: U2.6/BOOT/passive C1.1
        SW: U2.5/SW/output C1.2 L1.1
        OSC: Y1.1 C2.1 U1.2/XIN/input
        LOOSE: C3.1
        GND: U2.2/GND/power_in C2.2 C3.2 Y1.2 U1.1/GND/power_in
    """
    return bench("C1 100n, C2 18p, C3 1n, L1 10u, Y1 8MHz, U1 QX7301, U2 QX3300", nets, project)


def test_what_is_said_to_lie_across_a_capacitor_is_taken_at_both_ends():
    stated = board(RATED + ACROSS)
    assert stated.measure("C1", "applied_voltage").high == pytest.approx(5.5)
    assert stated.measure("C1", "applied_voltage", extreme="least").low == pytest.approx(4.5)
    assert stated.measure("C1", "voltage_ratio").nominal == pytest.approx(0.55)
    assert stated.measure("C1", "stored_energy").nominal == pytest.approx(100e-9 * 5.5**2 / 2)


def test_it_is_signed_for_a_polarised_capacitor_only():
    across = '[part."C1"]\nvoltage-across = "-2 V .. 1 V"\n'
    polar = across + 'dielectric = "aluminium"\n'
    assert board(RATED + across).measure("C1", "applied_voltage").high == pytest.approx(2.0)
    assert board(RATED + polar).measure("C1", "applied_voltage", extreme="least").low == pytest.approx(-2.0)
    assert board(RATED + polar).measure("C1", "applied_voltage").high == pytest.approx(1.0)


def test_a_bootstrap_capacitor_asks_for_it_since_both_ends_move_together():
    with pytest.raises(Unmeasurable) as caught:
        board().pose("C1", "applied_voltage")
    assert caught.value.ask == '[part."C1"] voltage-across = "…"'


def test_so_does_a_capacitor_whose_surroundings_are_not_solved():
    with pytest.raises(Unmeasurable, match="oscillates") as caught:
        board().pose("C2", "applied_voltage")
    assert caught.value.ask == '[part."C2"] voltage-across = "…"'


def test_a_capacitor_with_an_open_end_asks_for_nothing():
    with pytest.raises(Unmeasurable) as caught:
        board().pose("C3", "applied_voltage")
    assert caught.value.ask == ""
