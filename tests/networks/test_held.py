"""Grounds, supplies and driven nets by their evidence."""

import pytest

from rcrules.errors import Place
from rcrules.networks import Held
from rcrules.project import NetFacts, PinFacts, Project, SupplyFacts
from rcrules.quantities import Spread
from tests.networks.boards import board, held, kinds, volts

PLACE = Place(file="rcrules.toml", line=1)
LOAD = "U9 VDD:power-in=+3V3 GND:power-in=GND\nC9 100n +3V3 GND"


def spread(low: float, nominal: float, high: float) -> Spread:
    return Spread(low=low, nominal=nominal, high=high, unit="V")


def test_ground_pins_make_a_ground_that_has_no_name_of_one() -> None:
    text = """
    U1 VDD:power-in=A GND:power-in=BAT_PROT-
    U2 VCC:power-in=A VSS:power-in=BAT_PROT-
    C1 100n A BAT_PROT-
    """
    assert kinds(text)["BAT_PROT-"] == "ground"


def test_supply_pins_make_a_supply_without_a_name_or_pin_types() -> None:
    assert kinds("U1 VDD=N1 GND=GND\nU2 VCC=N1 GND=GND\nC1 1u N1 GND")["N1"] == "supply"


def test_a_divider_tap_with_the_name_of_a_supply_is_free() -> None:
    divider = "R1 33k +3V3 VREF\nR2 10k VREF GND\nC1 100n VREF GND"
    assert "VREF" not in kinds(f"{LOAD}\n{divider}\nU1 AIN3:input=VREF GND:power-in=GND")


def test_a_reference_pin_at_a_divider_is_free() -> None:
    text = f"{LOAD}\nR1 10k +3V3 N1\nR2 10k N1 GND\nC1 100n N1 GND\nU1 VREF:power-in=N1 GND:power-in=GND"
    assert "N1" not in kinds(text)


def test_a_local_supply_behind_a_small_resistor_is_held_and_a_network_of_its_own() -> None:
    text = f"""{LOAD}
    R1 10 +3V3 AVDD
    C1 100n AVDD GND
    U1 AVDD:power-in=AVDD GND:power-in=GND IN:input=N2
    R2 10k AVDD N2
    C2 1n N2 GND"""
    found = board(text)
    assert found.held["AVDD"].kind == "supply"
    assert found.held["AVDD"].voltage == spread(3.3, 3.3, 3.3)
    by_id = {network.id: network for network in found.networks}
    assert (by_id["AVDD"].free, [item.ref for item in by_id["AVDD"].branches]) == (("AVDD",), ["C1", "R1"])
    assert by_id["N2"].held == ("AVDD", "GND")


def test_a_local_supply_behind_a_large_resistor_stays_free() -> None:
    text = f"{LOAD}\nR1 10k +3V3 N1\nC1 100n N1 GND\nU1 VDD:power-in=N1 GND:power-in=GND"
    assert "N1" not in kinds(text)


def test_the_output_of_a_regulator_is_a_supply_with_the_voltage_in_its_value() -> None:
    text = "U1 [QX1117-3.3] VI:input=N1 VO:input=N2 GND:input=GND\nC1 10u N2 GND\nR1 1k N2 N3"
    assert kinds(text)["N2"] == "supply"
    assert volts(text, "N2") == 3.3


@pytest.mark.parametrize(
    ("value", "expected"), [("QX7805", 5.0), ("78L12", 12.0), ("QX-33", 3.3), ("QX_1V8", 1.8), ("QX7301", None)]
)
def test_the_voltage_of_a_regulator_is_read_only_where_it_is_written(value: str, expected: float | None) -> None:
    assert volts(f"U1 [{value}] IN=N1 OUT=N2 GND=GND\nC1 10u N2 GND", "N2") == expected


def test_a_seventy_nine_type_is_negative() -> None:
    assert volts("U1 [7912] IN=N1 OUT=N2 GND=GND\nC1 10u N2 GND", "N2") == -12.0


def test_an_internal_regulators_pin_with_its_voltage_is_a_supply() -> None:
    text = "U1 VDD=+5V GND=GND LDO33=N1\nC1 1u N1 GND"
    assert (kinds(text)["N1"], volts(text, "N1")) == ("supply", 3.3)


def test_a_supply_behind_a_ferrite_keeps_its_own_name_and_takes_the_voltage() -> None:
    found = held(f"{LOAD}\nFB1 +3V3 N1\nC1 100n N1 GND\nU1 VDDA:power-in=N1 GND:power-in=GND")
    assert found["N1"].voltage == spread(3.3, 3.3, 3.3)
    assert "joined at DC with +3V3" in found["N1"].evidence


def test_a_diode_passes_the_highest_supply_less_its_drop() -> None:
    clock = "U1 VBAT:power-in=VBAT GND:power-in=GND\nC1 1u VBAT GND"
    text = f"{LOAD}\nD1 A=+3V3 K=VBAT\nD2 A=N1 K=VBAT\nBT1 [CR2032] +=N1 -=GND\n{clock}"
    assert held(text)["N1"].voltage == spread(3.0, 3.0, 3.0)
    found = held(text)["VBAT"].voltage
    assert found is not None
    assert (found.low, found.nominal, found.high) == pytest.approx((2.4, 3.0, 3.3))


def test_a_clamp_diode_to_a_supply_makes_a_connector_line_no_supply() -> None:
    text = f"{LOAD}\nD1 A=GND COM=LINE K=+3V3\nJ1 1=LINE\nR1 10k LINE N1\nU1 IN:input=N1 GND:power-in=GND"
    assert kinds(text)["LINE"] == "driven"


def test_a_power_input_before_its_diode_is_a_supply() -> None:
    text = "J1 1=N1 2=GND\nD1 A=N1 K=+24V\nC1 10u +24V GND\nU1 VIN:power-in=+24V GND:power-in=GND"
    assert kinds(text)["N1"] == "supply"


def test_the_drain_of_a_high_side_switch_is_a_supply_by_the_supply_pins_it_feeds() -> None:
    text = f"{LOAD}\nQ1 G=N1 S=+3V3 D=N2\nJ1 VDD:power-in=N2 GND=GND\nC1 10u N2 GND\nR1 10k N2 GND"
    assert (kinds(text)["N2"], volts(text, "N2")) == ("supply", 3.3)


def test_a_switching_node_is_driven_and_its_inductor_does_not_join_it_to_the_output() -> None:
    text = """
    U1 VIN:power-in=+12V GND:power-in=GND SW:output=N1 FB:input=N2
    L1 N1 +5V
    C1 22u +5V GND
    R1 3 N1 N3
    C2 1n N3 GND
    """
    found = board(text)
    assert found.held["N1"].kind == "driven"
    assert found.joints["N1"] != found.joints["+5V"]
    assert found.networks[0].free == ("N3",)


def test_a_switching_node_is_told_without_pin_names() -> None:
    text = "U1 1=N0 2=N1 3=GND\nL1 N1 N2\nD1 A=GND K=N1\nC1 22u N2 GND\nU2 VDD:power-in=N2 GND:power-in=GND"
    assert (kinds(text)["N1"], kinds(text)["N2"]) == ("driven", "supply")


def test_the_smoothed_end_of_an_inductor_is_no_switching_node() -> None:
    power = "U1 [QX2596-5.0] 1=N0 2=N1 3=GND FB:input=N2\nL1 N1 N2\nD1 A=GND K=N1"
    text = (
        f"{power}\nC1 330u N2 GND\nD2 A=N2 K=+5V\nD3 A=GND K=N2\nC2 10u +5V GND\nU2 VDD:power-in=+5V GND:power-in=GND"
    )
    assert (kinds(text)["N1"], kinds(text)["N2"], volts(text, "N2")) == ("driven", "supply", 5.0)


def test_the_output_of_an_amplifier_without_pin_names_is_told_by_its_supply_pins() -> None:
    text = "U1 =N1 V-=GND =N2 =N3 V+=+5V\nR1 1k N1 N4\nC1 1n N4 GND"
    assert kinds(text)["N1"] == "driven"
    assert "N4" not in kinds(text)


def test_an_output_drives_its_net_and_an_input_does_not() -> None:
    text = "U1 Y:output=N1 A:input=N2\nR1 1k N1 N2\nC1 1n N2 GND\nU2 GND:power-in=GND"
    assert kinds(text) == {"N1": "driven"} | ({"GND": "ground"})


def test_an_output_pin_at_a_crystal_drives_nothing() -> None:
    text = "U1 XTAL1:output=N1 GND:power-in=GND\nY1 N1 N2\nC1 18p N1 GND\nR1 1M N1 N2"
    assert "N1" not in kinds(text)


@pytest.mark.parametrize(
    "pin", ["VBST:output", "COMP:output", "BTST:power-in", "SS1/PG1:output", "RUN1:output", "SPLIT:output"]
)
def test_pins_that_need_a_network_hold_none_whatever_their_type(pin: str) -> None:
    assert "N1" not in kinds(f"U1 {pin}=N1 GND:power-in=GND SW=N2\nC1 100n N1 N2\nR1 2 N1 N3")


def test_a_connector_drives_its_net() -> None:
    text = "J1 1=AIN 2=GND\nC1 1n AIN GND\nR1 1k AIN N1\nC2 10n N1 GND\nU1 IN:input=N1 GND:power-in=GND"
    assert (kinds(text)["AIN"], "N1" in kinds(text)) == ("driven", False)


@pytest.mark.parametrize(
    "evidence",
    ["SW1 LINE GND", "R1 10k +3V3 LINE\nC1 100n LINE GND", "R1 1k N9 LINE\nC1 1n LINE GND\nU8 OUT:output=N9"],
    ids=["a contact", "a pull and a capacitor", "an output through a resistor"],
)
def test_a_connector_does_not_drive_a_net_that_the_board_feeds(evidence: str) -> None:
    assert "LINE" not in kinds(f"{LOAD}\nJ1 1=LINE 2=GND\nU1 IN:input=LINE GND:power-in=GND\n{evidence}")


def test_a_bus_line_on_a_connector_is_free() -> None:
    assert "SDA" not in kinds(f"{LOAD}\nJ1 1=SDA\nR1 4k +3V3 SDA\nU1 SDA:bidirectional=SDA GND:power-in=GND")


def test_an_open_drain_output_with_a_capacitor_leaves_its_net_free() -> None:
    text = f"{LOAD}\nU1 OUT:open-collector=N1 GND:power-in=GND\nR1 10k +3V3 N1"
    assert kinds(text)["N1"] == "driven"
    assert "N1" not in kinds(f"{text}\nC1 10n N1 GND")


def test_without_any_name_the_net_that_most_capacitors_share_is_ground() -> None:
    text = "U1 N1 N2 N3 N9\nC1 1u N1 N9\nC2 1u N1 N9\nC3 1u N2 N9\nC4 1n N3 N9\nC5 1n N4 N9\nC6 10u N1 N9\nR1 1k N3 N4"
    assert (kinds(text)["N9"], held(text)["N9"].sure) == ("ground", False)
    assert kinds(text)["N1"] == "supply"
    assert "N3" not in kinds(text)


def test_a_diode_across_the_resistor_of_a_reset_feeds_no_supply() -> None:
    text = f"{LOAD}\nR1 10k +3V3 N1\nD1 N1 +3V3\nC1 100n N1 GND\nU1 N1 =GND"
    assert "N1" not in kinds(text)


def test_a_switching_node_of_a_chip_without_pin_names_is_told_by_its_inductor() -> None:
    text = f"{LOAD}\nU1 N1 N2 GND\nL1 N1 +1V8\nC1 10u +1V8 GND\nC2 100n N1 N2\nU2 VDD:power-in=+1V8 GND:power-in=GND"
    assert kinds(text)["N1"] == "driven"


def test_a_shield_bonded_by_a_resistor_is_a_ground() -> None:
    text = f"{LOAD}\nJ1 SHIELD=N1 1=N2\nR1 1M N1 GND\nC1 10n N1 GND"
    assert kinds(text)["N1"] == "ground"


def test_the_ground_pin_of_a_lifted_regulator_is_no_ground() -> None:
    text = "U1 [QX1117] IN:input=+12V OUT:input=+9VA GND:input=N1\nR1 150 +9VA N1\nR2 931 N1 GND\nC1 10u N1 GND"
    assert "N1" not in kinds(text)


def test_a_strap_of_two_links_does_not_join_a_supply_to_ground() -> None:
    text = "U1 INTVCC:output=N1 GND:power-in=GND MODE:input=N2\nC1 1u N1 GND\nR1 0 N1 N2\nR2 0 N2 GND"
    found = board(text)
    assert found.joints["N1"] != found.joints["GND"]


def test_what_is_not_fitted_feeds_nothing() -> None:
    assert "N1" not in kinds("U1! VDD:power-in=N1 GND:power-in=GND\nR1 1k N1 N2\nC1 1n N1 GND")


def test_the_project_file_wins() -> None:
    supply = SupplyFacts(place=PLACE, voltage=spread(3.2, 3.3, 3.4))
    project = Project(
        supplies={"+3*": supply},
        grounds=("A0",),
        nets={"AIN?": NetFacts(place=PLACE, swing=spread(0.0, 1.0, 2.5)), "LINE": NetFacts(place=PLACE, held="free")},
        pins={"U1.IO1": PinFacts(place=PLACE, kind="output")},
    )
    text = f"{LOAD}\nR1 1k A0 AIN1\nC1 1n AIN1 A0\nJ1 1=LINE\nR2 1k LINE OUT1\nU1 IO1:bidirectional=OUT1"
    found = held(text, project)
    assert (found["+3V3"].voltage, found["+3V3"].given) == (supply.voltage, True)
    assert found["A0"].kind == "ground"
    assert (found["AIN1"].kind, found["AIN1"].given) == ("driven", True)
    assert found["OUT1"].kind == "driven"
    assert "LINE" not in found


def test_a_voltage_read_from_a_name_is_an_assumption() -> None:
    found: Held = held(LOAD)["+3V3"]
    assert (found.given, found.sure) == (False, True)
    assert "3.3 V from the net name" in found.evidence


def test_outputs_of_a_known_type_number_are_told_without_pin_names() -> None:
    text = "U1 [QX393] =N1 =A =B =GND =C =D =N2 =+5V\nR1 4.7k +5V N1\nU2 PD0=N1\nR2 4.7k +5V N2\nU3 PD0=N2"
    assert kinds(text)["N1"] == "driven"


def test_a_pin_that_pulls_through_a_diode_drives_its_net() -> None:
    text = "U1 PA1:bidirectional=N1\nD1 A=N2 K=N1\nR1 10k +5V N2\nC1 1u N2 GND"
    assert kinds(text)["N1"] == "driven"


def test_a_supply_behind_a_small_resistor_is_local_although_its_name_is_as_strong() -> None:
    text = (
        "U1 VDD:power-in=+3V3 VSS=GND VDDA:power-in=+3V3A\nR1 10 +3V3 +3V3A\nC1 1u +3V3A GND\nJ1 1=+3V3 2=GND\n"
        "C2 1u +3V3 GND"
    )
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert [(node.net, node.role, node.parts) for node in nodes] == [("+3V3A", "supply-filter", ("R1", "C1"))]
