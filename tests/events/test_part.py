"""Questions about capacitors and resistors, posed on small boards."""

from dataclasses import replace

import pytest

from rcrules.events import Unmeasurable
from tests.events.boards import Bench, bench

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\nrated-voltage = "10 V"\n'
SUPPLIES = '[supply."+5V"]\nvoltage = "5 V +/- 10 %"\n[supply."+3V3"]\nvoltage = "3.3 V"\n'


def board(project: str = SUPPLIES + EXACT) -> Bench:
    """C1 at +5V, C2 between +5V and +3V3, C3 at a divider's tap, C4 from a driven net."""
    nets = """
        +5V: U2.3/VI/power_in C1.1 C2.1 R1.1
        +3V3: U2.1/VO/power_out C2.2 U1.3/VDD/power_in
        TAP: R1.2 R2.1 C3.1 U1.1/AIN0/input
        IN: J1.1 R3.1
        N: R3.2 C4.1 U1.4/AIN1/input
        GND: U2.2/GND/power_in C1.2 R2.2 C3.2 C4.2 J1.2 U1.2/GND/power_in
    """
    parts = "C1 10u, C2 1u, R1 10k, R2 10k, C3 100n, R3 1k, C4 100n, J1 IN, U1 QX7301, U2 QX3300"
    return bench(parts, nets, project)


def test_a_decoupling_capacitor_takes_the_whole_supply():
    found = board().measure("C1", "applied_voltage")
    assert (found.low, found.nominal, found.high, found.proved) == (4.5, 5.0, 5.5, True)
    assert board().measure("C1", "voltage_ratio").high == pytest.approx(0.55)


def test_between_two_supplies_either_may_be_off():
    assert board().measure("C2", "applied_voltage").nominal == pytest.approx(5.0)
    assert board().measure("C2", "applied_voltage", extreme="least").nominal == pytest.approx(0.0)


def test_a_divider_takes_its_part_away():
    found = board().measure("C3", "applied_voltage")
    assert found.nominal == pytest.approx(2.5)
    assert found.proved


def test_charge_and_energy_are_those_at_the_greatest_voltage():
    assert board().measure("C1", "stored_charge").nominal == pytest.approx(50e-6)
    assert board().measure("C1", "stored_energy").nominal == pytest.approx(125e-6)


def test_a_driven_net_of_unknown_swing_is_asked_for():
    with pytest.raises(Unmeasurable) as caught:
        board().pose("C4", "applied_voltage")
    assert caught.value.ask == '[net."IN"] swing = "…"'
    swung = board(SUPPLIES + EXACT + '[net."IN"]\nswing = "0 V .. 2 V"\n')
    assert swung.measure("C4", "applied_voltage").nominal == pytest.approx(2.0)


def test_a_rating_that_is_not_known_is_asked_for():
    bare = board(SUPPLIES + EXACT.replace('rated-voltage = "10 V"\n', ""))
    with pytest.raises(Unmeasurable) as caught:
        bare.pose("C1", "voltage_ratio")
    assert caught.value.ask == '[part."C1"] rated-voltage = "…"'


def test_the_first_current_of_a_capacitor_is_volts_over_ohms():
    found = board().measure("C3", "peak_current", event="power-up")
    assert found.nominal == pytest.approx(5.0 / 10e3)
    assert board().measure("C1", "peak_current", event="power-up").nominal == float("inf")


def test_a_ramped_supply_charges_its_capacitor_with_a_steady_current():
    ramped = board(SUPPLIES.replace("10 %", "0 %").replace('5 V +/- 0 %"', '5 V"\nrise = "1 ms"') + EXACT)
    assert ramped.measure("C1", "peak_current", event="power-up").nominal == pytest.approx(10e-6 * 5.0 / 1e-3)


def test_power_of_a_divider():
    assert board().measure("R1", "power").nominal == pytest.approx(2.5**2 / 10e3)


def test_a_coupling_capacitor_is_followed_through_the_transient():
    """C1 from a stepped net into a divider at 2.5 V: it takes the whole step at first, then the difference."""
    nets = """
        +5V: U2.1/VO/power_out R1.1 U1.3/VDD/power_in
        IN: J1.1 C1.1
        B: C1.2 R1.2 R2.1 U1.1/AIN0/input
        GND: U2.2/GND/power_in J1.2 R2.2 U1.2/GND/power_in
    """
    project = '[supply."+5V"]\nvoltage = "5 V"\n[net."IN"]\nswing = "0 V .. 4 V"\n' + EXACT
    found = bench("R1 10k, R2 10k, C1 1u, J1 IN, U1 QX7301, U2 QX5000", nets, project)
    assert found.measure("C1", "applied_voltage").nominal == pytest.approx(4.0)


def test_a_capacitor_at_a_crystal_is_part_of_an_active_network():
    found = bench(
        "C1 18pF, Y1 8MHz, U1 QX7301",
        "XI: C1.1 Y1.1 U1.1/XIN/input\nXO: Y1.2 U1.2/XOUT/output\nGND: C1.2 U1.3/GND/power_in",
    )
    with pytest.raises(Unmeasurable) as told:
        found.pose("C1", "applied_voltage")
    assert (told.value.reason, told.value.ask) == (
        "active network: crystal Y1 oscillates with the part that drives it",
        '[part."C1"] voltage-across = "…"',
    )


def test_a_coupling_capacitor_between_open_nets_is_decided_by_their_swings():
    """What the line asks for is taken: with both swings the voltage is their greatest difference."""
    parts, nets = "C1 100nF, U1 QX7301, U2 QX7302", "TXA: C1.1 U1.1/A/input\nTXB: C1.2 U2.1/B/input"
    with pytest.raises(Unmeasurable) as told:
        bench(parts, nets).pose("C1", "applied_voltage")
    assert told.value.ask == '[net."TXA"] swing = "…"'
    given = '[net."TXA"]\nswing = "0 V .. 1.2 V"\n[net."TXB"]\nswing = "0 V .. 0.4 V"\n'
    assert bench(parts, nets, given).measure("C1", "applied_voltage").high == pytest.approx(1.2)


@pytest.mark.parametrize(
    ("ends", "line"),
    [
        ("MID: RV1.2 R2.1\nGND: RV1.3 R2.2", ""),
        ("GND: RV1.2 RV1.3 R2.1 R2.2", '[part."RV1"] kind = "resistor"  value = "…"'),
    ],
)
def test_a_potentiometer_has_no_setting(ends: str, line: str):
    """As a divider nothing tells its setting; as a variable resistor a value does."""
    nets = f"+5V: R1.1 U1.2/VDD/power_in\nN: R1.2 RV1.1 C1.1 U1.1/IN/input\n{ends} C1.2 U1.3/GND/power_in"
    with pytest.raises(Unmeasurable) as told:
        bench("R1 10k, R2 1M, RV1 20k, C1 100nF, U1 QX7301", nets).pose("N", "time_constant")
    assert told.value.reason == "RV1 is a potentiometer, and its setting is not known"
    assert told.value.ask == line


RATED = SUPPLIES + EXACT.replace('"0 %"\n[', '"0 %"\nrated-voltage = "50 V"\nrated-power = "62.5 mW"\n[')


def test_a_resistor_has_voltage_and_ratios_too():
    """Half of 5 V ±10 % across 10 kΩ: 2.75 V at most, in 50 V; 0.75625 mW in 62.5 mW."""
    assert board(RATED).measure("R1", "applied_voltage", given_only=True).high == pytest.approx(2.75)
    assert board(RATED).measure("R1", "voltage_ratio", given_only=True).high == pytest.approx(0.055)
    assert board(RATED).measure("R1", "power_ratio", given_only=True).high == pytest.approx(2.75**2 / 10e3 / 62.5e-3)


def test_a_rated_power_that_is_not_known_is_asked_for():
    with pytest.raises(Unmeasurable) as caught:
        board().pose("R1", "power_ratio")
    assert caught.value.ask == '[part."R1"] rated-power = "…"'


def test_a_resistor_takes_as_much_energy_as_the_capacitor_that_it_charges():
    """OpenStax University Physics 2, section 10.5: C V²/2 each, whatever R; and V/R at first."""
    nets = """
        IN: J1.1 R1.1
        N: R1.2 C1.1 U1.1/AIN0/input
        GND: J1.2 C1.2 U1.2/GND/power_in
        +5V: U1.3/VDD/power_in
    """
    swung = bench("R1 1k, C1 1u, J1 IN, U1 QX7301", nets, '[net."IN"]\nswing = "0 V .. 4 V"\n' + EXACT)
    assert swung.measure("R1", "pulse_energy", event="step-up").nominal == pytest.approx(8e-6, rel=1e-12)
    assert swung.measure("R1", "peak_current", event="step-up").nominal == pytest.approx(4e-3, rel=1e-12)


def test_a_capacitor_with_an_open_end_says_so():
    nets = "+5V: C1.1 C2.1 U1.1/VDD/power_in\nGND: C2.2 U1.2/GND/power_in\nN: C1.2"
    found = bench("C1 100nF, C2 1uF, U1 QX7301", nets)
    with pytest.raises(Unmeasurable) as told:
        found.pose("C1", "applied_voltage")
    assert (told.value.reason, told.value.ask) == ("one end of C1 is open", "")


def test_the_rated_power_of_a_chip_of_known_size_is_assumed():
    found = board(SUPPLIES + EXACT + '[conditions]\ntemperature = "0 degC .. 112.5 degC"\n')
    part = replace(found.board.parts["R1"], size="0805")
    sized = replace(found, board=replace(found.board, parts={**found.board.parts, "R1": part}))
    posed = sized.pose("R1", "power_ratio")
    (rating,) = (item for item in posed.parameters if item.name == "R1 rated power")
    assert (rating.low, rating.nominal, rating.ask) == pytest.approx((0.05, 0.0625, '[part."R1"] rated-power = "…"'))
    assert (rating.given_low, rating.given_high) == pytest.approx((0.0625, 0.0625))
    assert rating.assumed == ("assumed: rated power of a 0805 chip, 50 mW to 62.5 mW at 112.5 °C",)
    ratio, watts = sized.measure("R1", "power_ratio"), sized.measure("R1", "power")
    assert ratio.high == pytest.approx(watts.high / 0.05)
