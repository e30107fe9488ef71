"""Lines, contacts and currents: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "relay snubber across contact": (
        """
        SW1 [RELAY] L1 L2
        R1 100 L1 X
        C1 100n X L2
        J1 Pin_1:passive=L1 Pin_2:passive=L2
        """,
        {"X": ("snubber", "C1 R1")},
    ),
    "triac snubber": (
        """
        Q1 [TRIAC] A1:passive=L1 A2:passive=L2 G:input=G
        R1 39 L1 X
        C1 10n X L2
        J1 Pin_1:passive=L1 Pin_2:passive=L2
        """,
        {"X": ("snubber", "C1 R1")},
    ),
    "485 termination with C": (
        """
        U1 [RS485] A:bidirectional=A B:bidirectional=B VCC:power-in=+5V GND:power-in=GND RO:output=RO DI:input=DI
        R1 120 A M
        C1 1n M B
        R2 680 +5V A
        R3 680 B GND
        J1 Pin_1:passive=A Pin_2:passive=B
        """,
        {"M": ("termination", "C1 R1")},
    ),
    "CAN split": (
        """
        U1 [CAN transceiver] CANH:bidirectional=H CANL:bidirectional=L VCC=+5V GND=GND TXD:input=TX RXD:output=RX
        R1 60 H M
        R2 60 L M
        C1 4.7n M GND
        J1 Pin_1:passive=H Pin_2:passive=L
        """,
        {"M": ("termination", "C1 R1 R2")},
    ),
    "crystal with Rd": (
        """
        U1 [MCU] XIN:input=XI XOUT:output=XO VDD:power-in=+3V3 GND:power-in=GND
        Y1 XI XR
        R1 470 XO XR
        C1 18p XI GND
        C2 18p XR GND
        R2 1M XI XO
        """,
        {"XI": ("oscillator", "C1 R2"), "XR": ("oscillator", "C2 R1")},
    ),
    "I2C filter": (
        """
        U1 [MCU] SDA:bidirectional=SDA_M VDD:power-in=+3V3 GND:power-in=GND
        U2 [sensor] SDA:bidirectional=SDA VDD:power-in=+3V3 GND:power-in=GND
        R1 33 SDA_M SDA
        R2 4.7k +3V3 SDA
        C1 22p SDA GND
        """,
        {"SDA": ("bus-pull-up", "C1 R2")},
    ),
    "optocoupler input + output": (
        """
        J1 Pin_1:passive=INP Pin_2:passive=INN
        R1 2.2k INP A
        C1 100n A INN
        U1 [optocoupler] 1.A:passive=A 2.K:passive=INN 3.E:passive=GND 4.C:passive=OC
        R2 10k +3V3 OC
        C2 10n OC GND
        U2 [MCU] PB0:bidirectional=OC VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"A": ("low-pass", "C1 R1"), "OC": ("low-pass", "C2 R2")},
    ),
    "shunt filter": (
        """
        U1 [current sense amplifier] IN+:input=SP IN-:input=SM OUT:output=CSO VS:power-in=+3V3 GND:power-in=GND
        R1 0.01 +12V LOAD
        R2 10 +12V SP
        R3 10 LOAD SM
        C1 100n SP SM
        R4 1k CSO AD
        C2 100n AD GND
        U2 [ADC] AIN0:input=AD VDD:power-in=+3V3 GND:power-in=GND
        J1 [Screw_Terminal] Pin_1:passive=+12V Pin_2:passive=GND
        J2 [Screw_Terminal] Pin_1:passive=LOAD Pin_2:passive=GND
        """,
        {"AD": ("low-pass", "C2 R4"), "SM": ("low-pass", "C1 R3"), "SP": ("low-pass", "C1 R2")},
    ),
    "low side shunt filter": (
        """
        Q1 [NMOS] G:input=G D:passive=PH S:passive=SH
        R1 0.1 SH GND
        R2 1k SH CS
        C1 1n CS GND
        U1 [motor driver] CS:input=CS VM:power-in=+12V GND:power-in=GND G:output=G
        """,
        {"CS": ("low-pass", "C1 R2")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
