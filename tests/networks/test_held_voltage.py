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
