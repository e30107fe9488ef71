"""Which amplifiers are taken as ideal, and which networks stay active."""

import pytest

from rcrules.networks import Amplifier
from tests.networks.boards import board

AMPLIFIER = "U1 [op-amp] ~:output=VO -:input=N +:input=GND V+:power-in=+12V V-:power-in=-12V\n"
STAGE = "U2 [DAC] VOUTA:output=IN VDD:power-in=+5V GND:power-in=GND\nR1 10k IN N\nR2 100k N VO\nC1 1n N VO\n"


def amplifier(text: str) -> Amplifier | None:
    (network,) = (found for found in board(text).networks if any(node.net == "N" for node in found.nodes))
    assert (network.amplifier is None) == any(node.active for node in network.nodes)
    return network.amplifier


def test_one_amplifier_in_a_loop_of_resistors_and_capacitors_is_ideal() -> None:
    assert amplifier(AMPLIFIER + STAGE) == Amplifier(ref="U1", plus="GND", minus="N", output="VO")


def test_the_usual_pinout_tells_pins_without_names() -> None:
    text = "U1 [QX358] =VO =N =GND =GND =A =B =W =+12V\nR9 1k VO OUT\nJ1 1=OUT 2=GND\n"
    assert amplifier(text + STAGE) == Amplifier(ref="U1", plus="GND", minus="N", output="VO")


@pytest.mark.parametrize(
    "further",
    [
        "D1 A=N K=VO",
        "Q1 B=N E=GND C=+12V",
        "U3 [op-amp] ~:output=W -:input=N +:input=X V+:power-in=+12V V-:power-in=-12V\nR8 10k N W\nC8 1n N W",
    ],
)
def test_a_diode_a_transistor_or_a_second_amplifier_keeps_a_network_active(further: str) -> None:
    assert amplifier(AMPLIFIER + STAGE + further) is None


def test_a_comparator_is_no_ideal_amplifier() -> None:
    assert amplifier(AMPLIFIER.replace("op-amp", "comparator") + STAGE) is None
