"""Limits of the shipped packs, held to published numbers: a step inside holds, a step outside fails."""

from dataclasses import replace
from math import log

import pytest

from rcrules.errors import Place
from rcrules.examples import tried
from rcrules.rulebook import Example, Rule, load, shipped

RULES = {rule.id: rule for rule in load(shipped())}
IC = "U1 x : VDD power-in +3V3, GND power-in GND\n"


def outcomes(rule: Rule, circuit: str, project: str) -> set[str]:
    example = Example(place=Place(file="published"), circuit=circuit, project=project, outcome="holds")
    (found,) = tried(replace(rule, examples=(example,)))
    return {item.outcome for item in found.findings}


@pytest.mark.parametrize(
    ("volts", "inside", "outside"),
    [("1.8", 481, 479), ("2.5", 701, 699), ("3.3", 968, 965), ("5", 1535, 1531)],
)
def test_the_strongest_pull_up_of_a_two_wire_bus(volts: str, inside: float, outside: float) -> None:
    """Source: UM10204, V_OL 0.4 V (a fifth of the supply below 2 V) at 3 mA: 480, 700, 966.67 and 1533.3 Ω."""
    circuit = "R1 {ohms} 0.01% : +3V3, SDA\nU1 x : SDA bidirectional SDA, VDD power-in +3V3, GND power-in GND\n"
    circuit += "U2 y : SDA open-collector SDA, VDD power-in +3V3, GND power-in GND"
    project = f'[supply."+3V3"]\nvoltage = "{volts} V"\n[net."SDA"]\nwiring-capacitance = "50 pF"\n'
    rule = replace(RULES["bus-pull-up-not-too-strong"], nominal=True)
    assert outcomes(rule, circuit.format(ohms=inside), project) == {"holds"}
    assert outcomes(rule, circuit.format(ohms=outside), project) == {"fails"}


@pytest.mark.parametrize(
    ("mode", "picofarads", "ohms"), [("standard", 400, 2950.5), ("fast", 400, 885.16), ("fast-plus", 550, 257.5)]
)
def test_the_weakest_pull_up_of_a_two_wire_bus_by_mode(mode: str, picofarads: int, ohms: float) -> None:
    """Source: UM10204, rise times 1000, 300 and 120 ns, t = 0.8473 R C; the resistances follow by hand."""
    circuit = "R1 {ohms} 1% : +3V3, SDA\nU1 x : SDA bidirectional SDA, VDD power-in +3V3, GND power-in GND\n"
    circuit += "U2 y : SDA open-collector SDA, VDD power-in +3V3, GND power-in GND"
    project = f'[supply."+3V3"]\nvoltage = "3.3 V"\n[net."SDA"]\nwiring-capacitance = "{picofarads} pF"\n'
    project += f'set = {{ mode = "{mode}" }}\n'
    rule = replace(RULES["bus-rises-fast-enough"], nominal=True)
    assert outcomes(rule, circuit.format(ohms=f"{ohms * 0.999:.3f}"), project) == {"holds"}
    assert outcomes(rule, circuit.format(ohms=f"{ohms * 1.001:.3f}"), project) == {"fails"}


@pytest.mark.parametrize(("hottest", "volts"), [(70, 12.5), (90, 10.0), (110, 7.5)])
def test_the_voltage_of_solid_tantalums_after_eee_inst_002(hottest: int, volts: float) -> None:
    """Source: EEE-INST-002, 50 % at 70 °C to 30 % at 110 °C (from memory): at 90 °C 40 % of 25 V are 10 V."""
    circuit = "C1 10uF 10% 25V tantalum : + +3V3, - GND\n" + IC
    project = '[supply."+3V3"]\nvoltage = "{volts} V"\n[conditions]\n' + f'temperature = "0 degC .. {hottest} degC"\n'
    rule = RULES["nasa-tantalum-voltage"]
    assert outcomes(rule, circuit, project.format(volts=volts * 0.999)) == {"holds"}
    assert outcomes(rule, circuit, project.format(volts=volts * 1.001)) == {"fails"}


@pytest.mark.parametrize(("hottest", "milliwatts"), [(70, 60.0), (94, 30.0)])
def test_the_power_of_chip_film_resistors_after_eee_inst_002(hottest: int, milliwatts: float) -> None:
    """Source: EEE-INST-002, section R1, table 4, style RM: 0.1 W take 60 mW up to 70 °C and 30 mW at 94 °C."""
    circuit = "R1 {ohms} 1% 0.1W : +3V3, GND\n" + IC
    project = f'[supply."+3V3"]\nvoltage = "10 V"\n[conditions]\ntemperature = "0 degC .. {hottest} degC"\n'
    rule = replace(RULES["nasa-film-power"], nominal=True)
    ohms = 100.0 / (milliwatts / 1000.0)
    assert outcomes(rule, circuit.format(ohms=f"{ohms * 1.002:.2f}"), project) == {"holds"}
    assert outcomes(rule, circuit.format(ohms=f"{ohms * 0.998:.2f}"), project) == {"fails"}


@pytest.mark.parametrize(
    ("rule", "start", "safe", "seconds"),
    [
        ("plug-of-household-equipment", 325.0, 34.0, 1.0),
        ("audio-video-and-it-equipment", 325.0, 60.0, 2.0),
        ("measuring-and-laboratory-equipment", 325.0, 60.0, 10.0),
        ("low-voltage-capacitors-by-code", 325.0, 50.0, 60.0),
        ("power-capacitors", 325.0, 75.0, 180.0),
        ("discharged-in-five-seconds", 325.0, 60.0, 5.0),
    ],
)
def test_times_in_which_capacitors_discharge(rule: str, start: float, safe: float, seconds: float) -> None:
    """Sources: IEC 60335-1, 22.5; IEC 62368-1, 5.5.2.2; IEC 61010-1, 6.3; NFPA 70, 460.6; IEC 60831-1; IEC 60204-1,
    6.2.4. A capacitor of 1 µF falls from U to u in R C ln(U/u)."""
    circuit = "C1 1uF 10% 630V PP : HV, GND\nR1 {ohms} 1% : HV, GND\nU1 x : VIN power-in HV, GND power-in GND\n"
    project = f'[supply."HV"]\nvoltage = "{start} V"\n'
    ohms = seconds / (1e-6 * log(start / safe))
    judged = replace(RULES[rule], nominal=True)
    assert outcomes(judged, circuit.format(ohms=f"{ohms * 0.99:.0f}"), project) == {"holds"}
    assert outcomes(judged, circuit.format(ohms=f"{ohms * 1.01:.0f}"), project) == {"fails"}
