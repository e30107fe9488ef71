"""Voltages of supplies, told only by what is written."""

import pytest

from tests.networks.boards import held, volts

REGULATOR = "U1 [{}] VIN=N1 VOUT=N2 GND=GND\nC1 10u N2 GND\nC2 1u N1 GND"


@pytest.mark.parametrize(
    ("value", "expected"),
    [
        ("QX1117ST33T3", 3.3),
        ("QX2112K-50", 5.0),
        ("QX6211C18", 1.8),
        ("QX1117IMP-ADJ", None),
        ("QX62056DGS", None),
        ("QX5205YM5", None),
        ("QX1700-3302E", 3.3),
        ("QX6206P332MR", 3.3),
        ("QX7333", 3.3),
        ("QX7550-1", 5.0),
        ("QX70233DBV", 3.3),
        ("QX7A2018", 1.8),
        ("R-78E5.0-0.5", 5.0),
        ("QX-78SR-12/1.5", 12.0),
        ("QX2940T-12", 12.0),
        ("QX2596S-5", 5.0),
        ("QX9013-12", None),
        ("QX62150", None),
    ],
)
def test_tenths_of_a_volt_behind_the_letters_of_a_type_number_are_its_output(
    value: str, expected: float | None
) -> None:
    assert volts(REGULATOR.format(value), "N2") == expected


def test_an_adjustable_type_gives_what_its_two_resistors_set() -> None:
    """1.25 V · (1 + 720/240) = 5 V, by the data sheets of the 317 (from memory)."""
    text = "U1 [QX317T] VI=N1 VO=N2 ADJ=N3\nC1 10u N2 GND\nR1 240 N2 N3\nR2 720 N3 GND\nU2 VDD:power-in=N2 GND=GND"
    assert volts(text, "N2") == pytest.approx(5.0)
    assert "5 V from R1 and R2 at U1.ADJ (reference 1.25 V)" in held(text)["N2"].evidence


def test_an_adjustable_type_of_unknown_reference_gives_no_voltage() -> None:
    text = "U1 [QX7301] VIN=N1 VOUT=N2 ADJ=N3\nC1 10u N2 GND\nR1 240 N2 N3\nR2 720 N3 GND\nU2 VDD:power-in=N2 GND=GND"
    assert volts(text, "N2") is None


def test_a_lithium_cell_is_anywhere_between_empty_and_full() -> None:
    found = held("BT1 [Li-Ion 18650] +=N1 -=GND\nU1 VDD=N1 GND=GND")["N1"].voltage
    assert found is not None
    assert (found.low, found.nominal, found.high) == (3.0, 3.7, 4.2)
    assert volts("BT1 [Li-Ion 2S] +=N1 -=GND\nU1 VDD=N1 GND=GND", "N1") is None


def test_the_name_of_a_supply_pin_tells_the_voltage_unless_its_digits_count_pins() -> None:
    assert volts("U1 VDD18=N1 GND=GND\nC1 1u N1 GND", "N1") == 1.8
    assert volts("U1 VDD17=N1 VDD18=N1 GND=GND\nC1 1u N1 GND", "N1") is None


def test_the_supply_pin_of_a_usb_connector_carries_five_volts() -> None:
    text = "J1 [USB_A] VCC=N1 D-=N2 D+=N3 GND=GND\nC1 1u N1 GND\nU1 VIN:power-in=N1 GND=GND"
    assert volts(text, "N1") == 5.0


def test_a_bipolar_pass_transistor_passes_a_supply_of_unknown_voltage() -> None:
    """It may regulate: its base belongs to a chip that holds the output at another voltage."""
    text = (
        "U1 VDD:power-in=+3V3 GND=GND VDRIVE=N2\nQ1 {}=N2 {}=N1 {}=+3V3\nC1 10u N1 GND\n"
        "U2 VDD:power-in=N1 GND=GND\nU3 VDD:power-in=+3V3 GND=GND"
    )
    assert volts(text.format("B", "C", "E"), "N1") is None
    assert volts(text.format("G", "D", "S"), "N1") == 3.3


def test_a_shunt_reference_holds_its_cathode() -> None:
    """2.495 V between reference pin and anode of the type 431, 1.24 V of the type 432 (from memory)."""
    tied = (
        "U1 [QX431] K:passive=N1 REF:passive=N1 A:passive=GND\nR1 1k +5V N1\nC1 1u N1 GND\nR2 10k N1 N2\nC2 1u N2 GND"
    )
    assert volts(tied, "N1") == 2.495
    assert volts(tied.replace("QX431", "QX432"), "N1") == 1.24
    fixed = "U1 [QX4040-4.1] K=N1 A=GND\nR1 1k +5V N1\nC1 1u N1 GND"
    assert volts(fixed, "N1") == 4.1


def test_two_resistors_at_a_shunt_reference_set_its_cathode() -> None:
    """Vref · (1 + 10k/10k), by the data sheets of the 431 (from memory)."""
    text = "U1 [QX431] K=N1 REF=N2 A=GND\nR1 1k +12V N1\nR2 10k N1 N2\nR3 10k N2 GND\nC1 1u N1 GND"
    assert volts(text, "N1") == pytest.approx(4.99)


def test_a_shunt_reference_that_compares_another_net_holds_nothing() -> None:
    text = "U1 [QX431] K=N1 REF=N2 A=GND\nR1 1k +12V N1\nR2 10k +5V N2\nR3 10k N2 GND\nC1 1u N1 N2"
    assert "N1" not in held(text)


def test_a_divider_at_an_unknown_reference_is_told_not_guessed() -> None:
    text = (
        "U1 [QX7301] VIN=N1 VOUT=N2 FB=N3 GND=GND\nC1 10u N2 GND\nR1 30k N2 N3\nR2 10k N3 GND\n"
        "U2 VDD:power-in=N2 GND=GND"
    )
    assert volts(text, "N2") is None
    assert "R1 and R2 set 4 times the reference at U1.FB, which is not known" in held(text)["N2"].evidence


def test_voltages_that_a_part_makes_from_its_other_nets() -> None:
    halves = "U1 VDDQSNS:input=+1V5 VTT:power-out=N1 VTTREF:output=N2 GND=GND\nC1 1u N1 GND\nC2 1u N2 GND"
    assert (volts(halves, "N1"), volts(halves, "N2")) == (0.75, 0.75)
    pump = "U1 [QX3232E] C1+=A C1-=B V+=N1 V-=N2 VCC:power-in=+3V3 GND=GND\nC1 1u N1 GND\nC2 1u N2 GND"
    assert (volts(pump, "N1"), volts(pump, "N2")) == (5.5, -5.5)


def test_a_charger_of_one_cell_tells_the_voltage_of_its_battery() -> None:
    text = "U1 [{}] VDD:power-in=+5V VBAT:power-out=N1 PROG:input=N2 VSS=GND\nC1 1u N1 GND\nR1 2k N2 GND"
    assert volts(text.format("QX7383 charger"), "N1") == 3.7
    assert volts(text.format("QX7383 charger 2S"), "N1") is None


def test_a_link_of_two_pins_passes_a_voltage_on() -> None:
    text = "J1 1=+24V 2=N1\nU1 VIN:power-in=N1 GND=GND\nC1 1u N1 GND\nU2 VM:power-in=+24V GND=GND"
    assert volts(text, "N1") == 24.0


def test_a_supply_behind_a_shunt_is_a_supply() -> None:
    text = "J1 1=+12V 2=GND\nR1 0.01 +12V N1\nJ2 1=N1 2=GND\nU1 VM:power-in=+12V GND=GND"
    assert volts(text, "N1") == 12.0
