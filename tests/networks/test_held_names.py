"""What net names say."""

import pytest

from rcrules.networks._held_names import hint


@pytest.mark.parametrize(
    ("name", "volts"),
    [
        ("+3V3", 3.3),
        ("+3,3В", 3.3),
        ("+5В_USB1", 5.0),
        ("+1,65В", 1.65),
        ("P2V5", 2.5),
        ("VCC1V0", 1.0),
        ("V3P3D", 3.3),
        ("3P3V", 3.3),
        ("+5VD", 5.0),
        ("12Vin", 12.0),
        ("24V_A", 24.0),
        ("/Power/USR_24V", 24.0),
        ("USB_VBUS", 5.0),
        ("-5VA", -5.0),
        ("N12V", -12.0),
        ("VDD18", 1.8),
        ("VDD_1P8", 1.8),
        ("+5", 5.0),
        ("-12", -12.0),
        ("+3.3", 3.3),
        ("+24A", 24.0),
        ("PP3V3", 3.3),
        ("D3V3", 3.3),
        ("A5V", 5.0),
        ("VCC12", None),
        ("VDDA", None),
        ("VGROUND", None),
    ],
)
def test_a_supply_is_told_with_its_voltage_in_many_spellings(name: str, volts: float | None) -> None:
    found = hint(name)
    assert found is not None
    assert (found.kind, found.volts) == ("supply", volts)


@pytest.mark.parametrize(
    "name", ["GND", "AGND", "GNDA", "VSS", "0", "0V", "GNDPWR", "CAN_GND", "XADCGND", "ЗЕМЛЯ", "/IO/DGND"]
)
def test_a_ground_is_told_in_many_spellings(name: str) -> None:
    found = hint(name)
    assert found is not None
    assert (found.kind, found.strong) == ("ground", True)


@pytest.mark.parametrize(
    "name",
    ["EN_3V3", "PGOOD1V8", "VBAT_SENSE", "USB_POWER_FLT#", "V1P2_EN", "SDA_3V3", "P1.5", "V1", "ADDR12V3", "MVpwr"],
)
def test_a_signal_about_a_supply_is_no_supply(name: str) -> None:
    assert hint(name) is None


@pytest.mark.parametrize("name", ["Net-(U6-VDD)", "#12", "N562363", "Net-(C1-Pad1)", "unconnected-(U1-VCC)"])
def test_an_automatic_name_says_nothing(name: str) -> None:
    assert hint(name) is None


@pytest.mark.parametrize("name", ["", "{", "~", "/", "~{}", " ", "/A/{}"])
def test_a_name_of_marks_alone_says_nothing(name: str) -> None:
    assert hint(name) is None
