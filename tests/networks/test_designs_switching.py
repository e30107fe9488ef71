"""Power and gates: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "MOSFET low-side gate with pull-down and gate C": (
        """
        U1 [MCU] PB1:bidirectional=PWM VDD:power-in=+3V3 GND:power-in=GND
        R1 100 PWM G
        R2 10k G GND
        C1 1n G GND
        Q1 [NMOS] G:input=G D:passive=DR S:passive=GND
        L1 +12V DR
        J1 Pin_1:passive=+12V Pin_2:passive=GND
        """,
        {"G": ("gate-drive", "C1 R1")},
    ),
    "P-FET soft start high side": (
        """
        Q1 [PMOS] G:input=G S:passive=VIN D:passive=VOUT
        R1 100k VIN G
        C1 100n G VIN
        R2 10k G GC
        Q2 [NMOS] G:input=EN D:passive=GC S:passive=GND
        J1 [Barrel_Jack] 1:passive=VIN 2:passive=GND
        C2 10u VOUT GND
        U1 [LDO 3.3V] VIN:power-in=VOUT VOUT:power-out=+3V3 GND:power-in=GND
        C3 1u +3V3 GND
        R3 100k EN GND
        """,
        {"G": ("gate-drive", "C1 R1 R2")},
    ),
    "snubber across mosfet, buck": (
        """
        U1 [buck regulator] VIN=+12V SW:output=SWN BST=BST FB:input=FB GND=GND COMP=COMP SS=SS EN:input=EN
        C1 100n SWN BST
        L1 SWN +5V
        C2 22u +5V GND
        R1 10k +5V FB
        R2 1.91k FB GND
        C3 47p +5V FB
        R3 10 SWN SN
        C4 1n SN GND
        R4 22k COMP CZ
        C5 4.7n CZ GND
        C6 100p COMP GND
        C7 10n SS GND
        R5 100k +12V EN
        R6 33k EN GND
        C8 10n EN GND
        J1 [Screw_Terminal_01x02] Pin_1:passive=+12V Pin_2:passive=GND
        """,
        {
            "COMP": ("feedback", "C5 C6 R4"),
            "CZ": ("feedback", "C5 R4"),
            "EN": ("divider-low-pass", "C8 R5 R6"),
            "FB": ("feedback", "C3 R1 R2"),
            "SN": ("snubber", "C4 R3"),
        },
    ),
    "buck with boot resistor": (
        """
        U1 [buck regulator] VIN:power-in=+12V SW:power-out=SWN BOOT:input=BST FB:input=FB GND:power-in=GND
        R1 10 BST BR
        C1 100n BR SWN
        L1 SWN +3V3
        C2 22u +3V3 GND
        J1 [Screw_Terminal_01x02] Pin_1:passive=+12V Pin_2:passive=GND
        """,
        {"BR": ("bootstrap", "C1 R1")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
