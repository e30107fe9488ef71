"""Resets, buttons and sensors: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "auto reset by two transistors": (
        """
        R1 10k +3V3 EN
        C1 1u EN GND
        R2 10k +3V3 IO0
        C2 100n IO0 GND
        U1 [radio module] EN:input=EN IO0:bidirectional=IO0 VDD:power-in=+3V3 GND:power-in=GND
        Q1 [NPN] B:input=B1 E:passive=RTS C:passive=EN
        Q2 [NPN] B:input=B2 E:passive=DTR C:passive=IO0
        R3 10k DTR B1
        R4 10k RTS B2
        U2 [UART bridge] DTR:output=DTR RTS:output=RTS VDD:power-in=+3V3 GND:power-in=GND
        SW1 EN GND
        SW2 IO0 GND
        """,
        {"EN": ("debounce", "C1 R1"), "IO0": ("debounce", "C2 R2")},
    ),
    "controller reset and boot, analog supply": (
        """
        R1 10k +3V3 /MCU/NRST
        C1 100n /MCU/NRST GND
        R2 10k BOOT0 GND
        R3 10 +3V3 +3V3A
        C2 1u +3V3A GND
        C3 100n +3V3A GND
        R4 1k AIN_RAW /AIN
        C4 10n /AIN GND
        U1 [MCU] NRST=/MCU/NRST BOOT0=BOOT0 VDD=+3V3 VSS=GND VDDA=+3V3A PA0:bidirectional=/AIN PA1:bidirectional=X1
        J1 Pin_1:passive=AIN_RAW Pin_2:passive=GND Pin_3:passive=+3V3
        """,
        {
            "+3V3A": ("supply-filter", "C2 C3 R3"),
            "/AIN": ("low-pass", "C4 R4"),
            "/MCU/NRST": ("power-on-delay", "C1 R1"),
        },
    ),
    "USB resistor 5k1 CC with cap, shield RC": (
        """
        J1 [USB_C_Receptacle] VBUS=VBUS GND=GND CC1:bidirectional=CC1 SHIELD=SHLD D+:bidirectional=DP
        R1 5.1k CC1 GND
        R2 1M SHLD GND
        C1 4.7n SHLD GND
        C2 10u VBUS GND
        R3 22 DP DP_R
        C3 22p DP_R GND
        U1 [MCU] D+:bidirectional=DP_R VBUS:power-in=VBUS GND:power-in=GND
        """,
        {"DP_R": ("low-pass", "C3 R3"), "SHLD <-> GND": ("chassis-bond", "C1 R2")},
    ),
    "battery divider": (
        """
        BT1 [18650] +:passive=VBAT -:passive=GND
        R1 100k VBAT VBAT_SENSE
        R2 100k VBAT_SENSE GND
        C1 100n VBAT_SENSE GND
        U1 [MCU] PA3:bidirectional=VBAT_SENSE VDD:power-in=+3V3 GND:power-in=GND
        U2 [QX73-3.3] VIN:power-in=VBAT VOUT:power-out=+3V3 GND:power-in=GND
        C2 1u +3V3 GND
        """,
        {"VBAT_SENSE": ("divider-low-pass", "C1 R1 R2")},
    ),
    "NTC dividers both orientations with series R": (
        """
        TH1 10k +3V3 T1
        R1 10k T1 GND
        R2 1k T1 T1F
        C1 100n T1F GND
        TH2 10k T2 GND
        R3 10k +3V3 T2
        C2 100n T2 GND
        U1 [MCU] AIN0:input=T1F AIN1:input=T2 VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"T1F": ("low-pass", "C1 R1 R2 TH1"), "T2": ("divider-low-pass", "C2 R3 TH2")},
    ),
    "button with series R": (
        """
        R1 10k +3V3 B
        SW1 B GND
        R2 1k B BF
        C1 100n BF GND
        U1 [74HC14] 1A:input=BF 1Y:output=BO VCC:power-in=+3V3 GND:power-in=GND
        """,
        {"BF": ("debounce", "C1 R1 R2")},
    ),
    "button with pull-up at MCU side after series": (
        """
        SW1 A GND
        R1 100 A B
        R2 10k +3V3 B
        C1 1u B GND
        U1 [MCU] PB0:bidirectional=B VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"B": ("debounce", "C1 R1 R2")},
    ),
    "button cap across, no R (internal pull-up)": (
        """
        SW1 A GND
        C1 100n A GND
        U1 [MCU] PB0:bidirectional=A VDD:power-in=+3V3 GND:power-in=GND
        """,
        {},
    ),
    "button to supply with pull-down": (
        """
        SW1 +3V3 A
        R1 10k A GND
        C1 100n A GND
        U1 [MCU] PB0:bidirectional=A VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"A": ("debounce", "C1 R1")},
    ),
    "rotary encoder via header": (
        """
        J1 Pin_1:passive=A Pin_2:passive=GND Pin_3:passive=B
        R1 10k +3V3 A
        R2 10k A AF
        C1 10n AF GND
        R3 10k +3V3 B
        R4 10k B BF
        C2 10n BF GND
        U1 [MCU] PB0:bidirectional=AF PB1:bidirectional=BF VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"AF": ("low-pass", "C1 R2"), "BF": ("low-pass", "C2 R4")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
