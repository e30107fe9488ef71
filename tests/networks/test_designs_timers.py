"""Timers and resets: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "555 astable": (
        """
        U1 [QX555] TR:input=T THR:input=T DIS:input=D CV:input=CV Q:output=Q R:input=+5V VCC=+5V GND=GND
        R1 10k +5V D
        R2 47k D T
        C1 1u T GND
        C2 10n CV GND
        """,
        {"T": ("timing", "C1 R1 R2")},
    ),
    "555 monostable with trigger coupling": (
        """
        U1 [QX555] TR:input=TRG THR:input=T DIS:input=T CV:input=CV Q:output=Q R:input=+5V VCC=+5V GND=GND
        R1 100k +5V T
        C1 10u T GND
        C3 10n BTN TRG
        R3 10k +5V TRG
        R4 10k +5V BTN
        SW1 BTN GND
        """,
        {"BTN": ("debounce", "C3 R4"), "TRG": ("timing", "C3 R3"), "T": ("timing", "C1 R1")},
    ),
    "schmitt oscillator": (
        """
        U1 [74HC14] 1A:input=I 1Y:output=O VCC:power-in=+5V GND:power-in=GND
        R1 100k O I
        C1 10n I GND
        """,
        {"I": ("timing", "C1 R1")},
    ),
    "power on reset with diode": (
        """
        U1 [MCU] ~{RESET}:input=RST VDD:power-in=+5V GND:power-in=GND
        R1 10k +5V RST
        C1 100n RST GND
        D1 RST +5V
        J1 [programmer] MISO:passive=MISO RST:passive=RST GND:passive=GND VCC:passive=+5V
        """,
        {"RST": ("power-on-delay", "C1 R1")},
    ),
    "reset coupled from a handshake line": (
        """
        U1 [MCU] ~{RESET}:input=RST VDD:power-in=+5V GND:power-in=GND
        U2 [UART bridge] DTR:output=DTR VCC:power-in=+5V GND:power-in=GND
        C1 100n DTR RST
        R1 10k +5V RST
        SW1 RST GND
        """,
        {"RST": ("high-pass", "C1 R1")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
