"""What kind of part a part is."""

import pytest

from rcrules.parts import kind_of
from rcrules.vocabulary import PART_KINDS
from tests.parts.parts_by_hand import part


@pytest.mark.parametrize(
    ("ref", "kind"),
    [
        ("R1", "resistor"),
        ("C1", "capacitor"),
        ("r12", "resistor"),
        ("/sheet/C3", "capacitor"),
        ("L1", "inductor"),
        ("FB2", "ferrite"),
        ("D5", "diode"),
        ("VD1", "diode"),
        ("Q1", "transistor"),
        ("VT3", "transistor"),
        ("U1", "ic"),
        ("DD4", "ic"),
        ("J3", "connector"),
        ("XS1", "connector"),
        ("SW1", "contact"),
        ("K1", "contact"),
        ("JP1", "jumper"),
        ("F1", "fuse"),
        ("Y1", "crystal"),
        ("ZQ1", "crystal"),
        ("TP9", "test-point"),
        ("NT1", "net-tie"),
        ("TH1", "thermistor"),
        ("RV1", "potentiometer"),
        ("BT1", "battery"),
        ("TR1", "transformer"),
        ("FID1", "mechanical"),
        ("ZZ1", "other"),
    ],
)
def test_the_letters_of_the_reference_tell_where_nothing_else_does(ref, kind):
    assert kind_of(part(ref))[0] == kind
    assert kind in PART_KINDS


@pytest.mark.parametrize(
    ("item", "kind"),
    [
        (part("R1", "10k", symbol="lib:R_Small_US", description="Resistor, small US symbol"), "resistor"),
        (part("R2", "0R", description="RES SMD 0 OHM JUMPER 1/10W 0603"), "resistor"),
        (part("R3", "NTC 10k"), "thermistor"),
        (part("R3", "10k", symbol="lib:Thermistor_NTC"), "thermistor"),
        (part("R4", "10k", symbol="lib:R_POT", pins=3), "potentiometer"),
        (part("R4", "10k", description="Potenciómetro lineal", pins=3), "potentiometer"),
        (part("R5", "10k", symbol="lib:R_Pack04", pins=8), "resistor-array"),
        (part("R5", "33R0_5%_4x0603", pins=8), "resistor-array"),
        (part("R5", "10k", pins=8), "resistor-array"),
        (part("RN1", "10k", pins=8), "resistor-array"),
        (part("RN2", "10k", pins=0), "resistor-array"),
        (part("RN3", "10k", pins=2), "resistor"),
        (part("R6", "5mOhm", pins=4), "resistor"),
        (part("R7", "Jumper-Pad-Pad"), "jumper"),
        (part("R8", "600R@100MHz"), "ferrite"),
        (part("R9", "Varistor 14V"), "varistor"),
        (part("R10", "10k", symbol="lib:R", description="pull-up for the crystal"), "resistor"),
        (part("C1", "100n", symbol="lib:C_Array", pins=8), "capacitor-array"),
        (part("C2", "100n", footprint="lib:R_0603"), "capacitor"),
        (part("CE1", "10uF"), "capacitor"),
        (part("Rload", "10k"), "resistor"),
        (part("L1", "BEAD", symbol="lib:L"), "inductor"),
        (part("L2", "220R", symbol="lib:FerriteBead"), "ferrite"),
        (part("FB1", "QX18", symbol="lib:L"), "ferrite"),
        (part("F1", "QX-SMD050", symbol="lib:THERMISTOR"), "fuse"),
        (part("F2", "fiducial"), "mechanical"),
        (part("TH1", "PTC 0.5A", symbol="lib:THERMISTOR"), "fuse"),
        (part("J1", "slide", description="SLIDE SWITCH SPDT SMD"), "contact"),
        (part("J2", "RELAY_OUT", symbol="lib:TB_1X3", description="TERM BLOCK 3POS"), "connector"),
        (part("P1", "TST", symbol="lib:TST", pins=1), "test-point"),
        (part("X1", "12MHz", symbol="lib:Crystal"), "crystal"),
        (part("X2", "12 MHz"), "crystal"),
        (part("X3", "header", symbol="lib:Conn_01x03", pins=3), "connector"),
        (part("D1", "QX7430", pins=14), "ic"),
        (part("D2", "LED", symbol="lib:LED_RGB", pins=6), "diode"),
        (part("T1", "QX12", symbol="lib:Q_NPN_BEC", pins=3), "transistor"),
        (part("T2", "", symbol="lib:TRANSFORMER", pins=4), "transformer"),
        (part("V1", "green", symbol="LED green:QX15"), "diode"),
        (part("V2", "QX9101", description="Battery protection IC", pins=6), "ic"),
        (part("LCD1", "", symbol="lib:UNKNOWN_LCD_C39363", pins=22), "ic"),
        (part("H1", "4mm", symbol="lib:CONN_1", pins=1), "mechanical"),
        (part("Z1", "", symbol="lib:Pulsador"), "contact"),
        (part("Z2", "", description="Widerstand 10k"), "resistor"),
        (part("Z3", "", symbol="Кнопка"), "contact"),
        (part("Z4", "", symbol="lib:Übertrager"), "transformer"),
        (part("Z5", "", symbol="lib:SolderJumper_2_Open"), "jumper"),
        (part("Z6", "", symbol="lib:NetTie_2"), "net-tie"),
        (part("Z7", "", symbol="lib:Reed_Relay"), "contact"),
        (part("Z8", "QX1", pins=16), "ic"),
    ],
)
def test_symbol_value_and_description_tell_kinds_that_share_letters(item, kind):
    found, why = kind_of(item)
    assert found == kind, why
    assert why
