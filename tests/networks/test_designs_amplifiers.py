"""Amplifiers and filters: small circuits as boards have them, with the nodes that a reviewer sees."""

import pytest

from tests.networks.boards import board

CIRCUITS = {
    "opamp buffer with input and output RC": (
        """
        U1 [op-amp dual] 1:output=BO -:input=BO +:input=BI V+:power-in=+5V V-:power-in=GND
        R1 10k SIG BI
        C1 10n BI GND
        R2 100 BO ADC
        C2 10n ADC GND
        U2 [ADC] AIN0:input=ADC VDD:power-in=+5V GND:power-in=GND
        J1 Pin_1:passive=SIG Pin_2:passive=GND
        """,
        {"ADC": ("low-pass", "C2 R2"), "BI": ("low-pass", "C1 R1")},
    ),
    "inverting integrator with R parallel C": (
        """
        U1 [op-amp] ~:output=VO -:input=N +:input=GND V+:power-in=+12V V-:power-in=-12V
        R1 10k SIG N
        R2 100k N VO
        C1 1n N VO
        J1 Pin_1:passive=SIG Pin_2:passive=GND Pin_3:passive=VO
        """,
        {"N": ("feedback", "C1 R1 R2")},
    ),
    "noninverting with cap to ground leg": (
        """
        U1 [op-amp] ~:output=VO -:input=N +:input=SIG V+:power-in=+12V V-:power-in=GND
        R1 1k N M
        C1 10u M GND
        R2 10k N VO
        C2 100p N VO
        J1 Pin_1:passive=SIG Pin_2:passive=GND Pin_3:passive=VO
        """,
        {"M": ("feedback", "C1 C2 R1 R2"), "N": ("feedback", "C1 C2 R1 R2")},
    ),
    "sallen key low pass unity": (
        """
        U1 [op-amp] ~:output=VO -:input=VO +:input=B V+:power-in=+12V V-:power-in=GND
        R1 10k SIG A
        R2 10k A B
        C1 22n A VO
        C2 10n B GND
        J1 Pin_1:passive=SIG Pin_2:passive=GND Pin_3:passive=VO
        """,
        {"A": ("low-pass", "C1 R1"), "B": ("low-pass", "C1 C2 R1 R2")},
    ),
    "sallen key high pass": (
        """
        U1 [op-amp] ~:output=VO -:input=VO +:input=B V+:power-in=+12V V-:power-in=-12V
        C1 10n SIG A
        C2 10n A B
        R1 10k A VO
        R2 22k B GND
        J1 Pin_1:passive=SIG Pin_2:passive=GND Pin_3:passive=VO
        """,
        {"A": ("high-pass", "C1 C2 R1"), "B": ("high-pass", "C1 C2 R1 R2")},
    ),
    "mfb low-pass": (
        """
        U1 [op-amp] ~:output=VO -:input=N +:input=GND V+:power-in=+12V V-:power-in=-12V
        R1 10k SIG A
        R2 10k A VO
        R3 4.7k A N
        C1 22n A GND
        C2 2.2n N VO
        J1 Pin_1:passive=SIG Pin_2:passive=GND Pin_3:passive=VO
        """,
        {"A": ("feedback", "C1 R1 R2"), "N": ("feedback", "C1 C2 R1 R2 R3")},
    ),
    "comparator RC + hysteresis": (
        """
        U1 [comparator QX393] ~:open-collector=CO -:input=N +:input=P V+:power-in=+5V V-:power-in=GND
        R1 100k +5V N
        C1 1u N GND
        R2 10k +5V P
        R3 10k P GND
        R4 100k CO P
        R5 4.7k +5V CO
        """,
        {"N": ("power-on-delay", "C1 R1")},
    ),
    "audio coupling in/out": (
        """
        J1 [AudioJack3] T:passive=LIN R:passive=RIN S:passive=GND
        C1 1u LIN A
        R1 100k A GND
        U1 [op-amp] ~:output=VO -:input=N +:input=A V+:power-in=+12V V-:power-in=-12V
        R2 10k N VO
        R3 10k N GND
        C2 10u VO OUTC
        R4 100k OUTC GND
        R5 100 OUTC LOUT
        J2 [AudioJack3] T:passive=LOUT S:passive=GND
        """,
        {"A": ("high-pass", "C1 R1"), "OUTC": ("high-pass", "C2 R4")},
    ),
    "single supply coupling with half supply bias": (
        """
        J1 [AudioJack3] T:passive=LIN S:passive=GND
        C1 1u LIN A
        R1 100k A VMID
        R2 10k +5V VMID
        R3 10k VMID GND
        C2 10u VMID GND
        U1 [op-amp] ~:output=VO -:input=VO +:input=A V+:power-in=+5V V-:power-in=GND
        """,
        {"A": ("high-pass", "C1 R1"), "VMID": ("divider-low-pass", "C2 R2 R3")},
    ),
    "mic bias": (
        """
        C1 10u MB GND
        R1 1k +3V3 MB
        R2 2.2k MB MIC
        C2 100n MIC IN
        R3 10k IN N
        R4 100k N VO
        U1 [op-amp] ~:output=VO -:input=N +:input=VMID V+:power-in=+3V3 V-:power-in=GND
        J9 [Microphone] Pin_1:passive=MIC Pin_2:passive=GND
        """,
        {"IN": ("high-pass", "C2 R3"), "MB": ("supply-filter", "C1 R1")},
    ),
    "PWM DAC two-stage": (
        """
        U1 [MCU] PA8:bidirectional=PWM VDD:power-in=+3V3 GND:power-in=GND
        R1 10k PWM S1
        C1 100n S1 GND
        R2 10k S1 S2
        C2 100n S2 GND
        J1 Pin_1:passive=S2 Pin_2:passive=GND
        """,
        {"S1": ("low-pass", "C1 R1"), "S2": ("low-pass", "C1 C2 R1 R2")},
    ),
    "PWM DAC typed output": (
        """
        U1 [MCU] PWM0:output=PWM VDD:power-in=+3V3 GND:power-in=GND
        R1 10k PWM S1
        C1 100n S1 GND
        R2 10k S1 S2
        C2 100n S2 GND
        U2 [op-amp] ~:output=AO -:input=AO +:input=S2 V+:power-in=+5V V-:power-in=GND
        """,
        {"S1": ("low-pass", "C1 R1"), "S2": ("low-pass", "C1 C2 R1 R2")},
    ),
}
"""Name -> parts and nets; node -> role and the parts that set its time."""


@pytest.mark.parametrize("name", CIRCUITS)
def test_a_circuit_shows_its_nodes(name: str) -> None:
    text, expected = CIRCUITS[name]
    nodes = [node for network in board(text).networks for node in network.nodes]
    assert {node.net: (node.role, " ".join(sorted(node.parts))) for node in nodes} == expected
