"""Sources, clamps and sensors: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "open-drain transistor with RC": (
        """
        Q1 [NMOS] G:input=GD S:passive=GND D:passive=OD
        R1 10k +3V3 OD
        C1 100n OD GND
        U1 [MCU] PB1:bidirectional=OD PB2:output=GD VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"OD": ("low-pass", "C1 R1")},
    ),
    "protected digital input: series, clamp, RC": (
        """
        J1 1=DI 2=GND
        R1 10k DI A
        D1 [double diode] A:passive=GND K:passive=+3V3 COM:passive=A
        R2 1k A B
        C1 10n B GND
        U1 [74HC14] 1A:input=B 1Y:output=Y VCC:power-in=+3V3 GND:power-in=GND
        """,
        {"B": ("low-pass", "C1 R1 R2")},
    ),
    "zener clamp divider input": (
        """
        J1 1=VIN 2=GND
        R1 100k VIN M
        R2 10k M GND
        C1 100n M GND
        D1 [3V3 zener] A=GND K=M
        U1 [MCU] ADC1:bidirectional=M VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"M": ("divider-low-pass", "C1 R1 R2")},
    ),
    "supervisor delay cap": (
        """
        U1 [supervisor] VDD:power-in=+3V3 GND:power-in=GND CT:passive=CT ~{RESET}:open-collector=RST
        C1 100n CT GND
        R1 10k +3V3 RST
        C2 100n RST GND
        U2 [MCU] ~{RST}:input=RST VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"RST": ("power-on-delay", "C2 R1")},
    ),
    "regulator enable delay": (
        """
        U1 [LDO] VIN:power-in=+5V VOUT:power-out=+3V3 EN:input=EN GND:power-in=GND
        R1 100k +5V EN
        C1 1u EN GND
        C2 1u +3V3 GND
        """,
        {"EN": ("power-on-delay", "C1 R1")},
    ),
    "VREF filter via resistor": (
        """
        R1 100 +3V3 VREFP
        C1 10u VREFP GND
        C2 100n VREFP GND
        U1 [ADC] VREF:input=VREFP VDD:power-in=+3V3 GND:power-in=GND AIN0:input=X
        """,
        {"VREFP": ("supply-filter", "C1 C2 R1")},
    ),
    "VBAT coin with series resistor": (
        """
        BT1 [CR2032] +=BATP -=GND
        R1 1k BATP VB
        C1 100n VB GND
        U1 [RTC] VBAT:power-in=VB VDD:power-in=+3V3 GND:power-in=GND
        """,
        {"VB": ("supply-filter", "C1 R1")},
    ),
    "divider with cap across upper, scope-like": (
        """
        J1 1=IN 2=GND
        R1 1M IN T
        R2 100k T GND
        C1 10p IN T
        C2 100p T GND
        U1 [op-amp] ~:output=O -:input=O +:input=T V+:power-in=+5V V-:power-in=GND
        """,
        {"T": ("divider-low-pass", "C1 C2 R1 R2")},
    ),
    "LED with RC soft (transistor base)": (
        """
        U1 [MCU] PA1:output=P VDD:power-in=+3V3 GND:power-in=GND
        R1 10k P B
        C1 1u B GND
        Q1 [NPN] B:input=B C:passive=K E:passive=GND
        """,
        {"B": ("gate-drive", "C1 R1")},
    ),
    "4-20 loop to ADC": (
        """
        J1 1=LOOP 2=GND
        R1 250 LOOP GND
        R2 1k LOOP A
        C1 1u A GND
        U1 [ADC] AIN0:input=A VDD:power-in=+5V GND:power-in=GND
        """,
        {"A": ("low-pass", "C1 R2")},
    ),
    "differential input filter": (
        """
        J1 1=INP 2=INN 3=GND
        R1 100 INP P
        R2 100 INN N
        C1 1n P GND
        C2 1n N GND
        C3 10n P N
        U1 [instrumentation amplifier] +IN:input=P -IN:input=N OUT:output=O V+:power-in=+5V V-:power-in=GND REF=GND
        """,
        {"N": ("low-pass", "C1 C2 C3 R1 R2"), "P": ("low-pass", "C1 C2 C3 R1 R2")},
    ),
    "audio RC with MCU DAC to amp": (
        """
        U1 [MCU] PA4/DAC_OUT1:bidirectional=DAC VDD:power-in=+3V3 GND:power-in=GND
        R1 1k DAC F
        C1 10n F GND
        C2 1u F IN
        R2 10k IN GND
        U2 [audio amplifier] IN+:input=IN VO+:output=SP VDD:power-in=+5V GND:power-in=GND
        """,
        {"F": ("low-pass", "C1 R1"), "IN": ("high-pass", "C1 C2 R1 R2")},
    ),
    "oscillator module supply": (
        """
        FB1 +3V3 VOSC
        C1 100n VOSC GND
        Y1 1=VOSC 2=GND 3=CLK 4=VOSC
        R1 33 CLK CLKM
        U1 [MCU] OSC_IN:input=CLKM VDD:power-in=+3V3 GND:power-in=GND
        C2 10p CLKM GND
        """,
        {"CLKM": ("low-pass", "C2 R1")},
    ),
    "mains X cap bleeder": (
        """
        J1 1=L 2=N
        F1 L LF
        C1 100n LF N
        R1 470k LF N
        """,
        {"LF <-> N": ("bleeder", "C1 R1")},
    ),
    "USB data series with termination caps": (
        """
        J1 [USB_B] VBUS=+5V D-=DM D+=DP GND=GND
        R1 27 DM DMU
        R2 27 DP DPU
        C1 47p DMU GND
        C2 47p DPU GND
        U1 [MCU] D-:bidirectional=DMU D+:bidirectional=DPU VDD:power-in=+5V GND:power-in=GND
        """,
        {"DMU": ("low-pass", "C1 R1"), "DPU": ("low-pass", "C2 R2")},
    ),
    "bulk bleeder": (
        """
        J1 1=HV 2=GND
        C1 100u HV GND
        R1 100k HV GND
        U1 [converter module] VIN:power-in=HV GND:power-in=GND VOUT:power-out=+12V
        """,
        {"HV <-> GND": ("bleeder", "C1 R1")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
