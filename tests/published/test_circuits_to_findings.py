"""The circuits of ``test_circuits`` once more, as a user meets them: netlist, project and rule as files, findings out.

The answers were worked out apart, in closed form and by a matrix exponential. Each question is asked by two rules whose
limits lie on both sides of the answer: one finding must fail, the other hold.
"""

from dataclasses import dataclass
from math import inf
from pathlib import Path

import pytest

from rcrules.findings import Finding
from rcrules.pipeline import Job, run
from tests.events.boards import xml

EXACT = '[defaults.resistor]\ntolerance = "0 %"\n[defaults.capacitor]\ntolerance = "0 %"\nabsorption = "0 %"\n'
GND = "GND: U2.2/GND/power_in U1.2/GND/power_in"


@dataclass(frozen=True, kw_only=True)
class Circuit:
    """A board as text, with what its project file says."""

    parts: str
    nets: str
    facts: str


DIVIDER = Circuit(
    parts="R1 30k, R2 10k, C1 100n C0G, J1 IN, U1 QX7301, U2 QX5000",
    nets="IN: J1.1 R1.1\nN: R1.2 R2.1 C1.1 U1.1/AIN0/input\n+5V: U2.1/VO/power_out U1.3/VDD/power_in\n"
    f"{GND} J1.2 R2.2 C1.2",
    facts='[net."IN"]\nswing = "0 V .. 12 V"\n',
)
RESET = "+3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in\nN: R1.2 C1.1 U1.7/NRST/input\n" + GND + " C1.2"
VALID = '[supply."+3V3"]\nvoltage = "3.3 V"\nvalid = "3 V"\nrise = "10 ms"\n'
STEP = '[supply."+3V3"]\nvoltage = "3.3 V"\n'
PIN = '[pin."U1.NRST"]\nlow = "30 % of +3V3"\nhigh = "70 % of +3V3"\n'
RAMPED = Circuit(parts="R1 10k, C1 100n C0G, U1 QX7301, U2 QX3300", nets=RESET, facts=VALID + PIN)
LARGE = Circuit(parts="R1 1M, C1 1u C0G, U1 QX7301, U2 QX3300", nets=RESET, facts=STEP)
ACTIVE_HIGH = Circuit(
    parts="R1 10k, C1 100n C0G, U1 QX7301, U2 QX5000",
    nets=f"+5V: U2.1/VO/power_out C1.1 U1.3/VDD/power_in\nN: C1.2 R1.1 U1.7/RST/input\n{GND} R1.2",
    facts='[supply."+5V"]\nvoltage = "5 V"\nrise = "1 ms"\n',
)
CONTACT = STEP + '[part."SW1"]\ncontact = "normally open"\ncontact-resistance = "0 ohm"\n'
BUTTON = Circuit(
    parts="R1 10k, R2 1k, C1 1u C0G, SW1 push, U1 QX7301, U2 QX3300",
    nets="+3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in\nA: R1.2 R2.1 SW1.1\n"
    f"N: R2.2 C1.1 U1.7/KEY/input\n{GND} C1.2 SW1.2",
    facts=CONTACT,
)
DIVIDING = Circuit(
    parts="R1 10k, R2 3.3k, C1 1u C0G, SW1 push, U1 QX7301, U2 QX3300",
    nets="+3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in\nN: R1.2 C1.1 R2.1 U1.7/KEY/input\n"
    f"S: R2.2 SW1.1\n{GND} C1.2 SW1.2",
    facts=CONTACT,
)
STAGES = Circuit(
    parts="R1 10k, R2 10k, C1 100n C0G, C2 100n C0G, J1 IN, U1 QX7301, U2 QX3300",
    nets="IN: J1.1 R1.1\nN: R1.2 R2.1 C1.1\nB: R2.2 C2.1 U1.1/AIN0/input\n+3V3: U2.1/VO/power_out U1.3/VDD/power_in\n"
    f"{GND} J1.2 C1.2 C2.2",
    facts="",
)
TAPPED = Circuit(
    parts="R1 10k, R2 10k, C1 100n C0G, J1 IN, U1 QX7301, U2 QX3300",
    nets="IN: J1.1 R1.1\nA: R1.2 R2.1\nN: R2.2 C1.1 U1.1/AIN0/input\n+3V3: U2.1/VO/power_out U1.3/VDD/power_in\n"
    f"{GND} J1.2 C1.2",
    facts='[net."IN"]\nswing = "0 V .. 3.3 V"\n',
)
LOADED = Circuit(
    parts="R1 100, R2 100, C1 100n C0G, U2 QX5000, U1 QX7301",
    nets=f"+5V: U2.1/VO/power_out R1.1\nN: R1.2 R2.1 C1.1\n{GND} R2.2 C1.2",
    facts='[supply."+5V"]\nvoltage = "5 V"\n[part."R2"]\ntolerance = "50 %"\n',
)

BULK = Circuit(
    parts="R1 10k, C1 1000u C0G, U1 QX7301, U2 QX5000",
    nets="P: U2.3/VI/power_in R1.1 C1.1\n+5V: U2.1/VO/power_out U1.3/VDD/power_in\n" + f"{GND} R1.2 C1.2",
    facts='[supply."P"]\nvoltage = "50 V"\n[part."C1"]\nrated-voltage = "50 V"\nleakage = "500 uA"\n',
)
DIPPED = Circuit(parts="R1 100k, C1 1u C0G, U1 QX7301, U2 QX3300", nets=RESET, facts=STEP)
CONVERTER = Circuit(
    parts="R1 1k, C1 1n C0G, J1 IN, U1 QX7301, U2 QX3300",
    nets=f"IN: J1.1 R1.1\nN: R1.2 C1.1 U1.1/AIN0/input\n+3V3: U2.1/VO/power_out U1.3/VDD/power_in\n{GND} J1.2 C1.2",
    facts='[pin."U1.AIN0"]\nsample-capacitance = "8 pF"\nsample-resistance = "0 ohm"\nfull-scale = "2.5 V"\n',
)
BUS = Circuit(
    parts="R1 2.2k, R2 4.7k, U1 QX7301, U2 QX3300, U3 QX7301",
    nets="+3V3: U2.1/VO/power_out U1.3/VDD/power_in U3.3/VDD/power_in R1.1 R2.1\n"
    f"SDA: U1.7/SDA/open_collector U3.7/SDA/bidirectional R1.2 R2.2\n{GND} U3.2/GND/power_in",
    facts=STEP + '[net."SDA"]\nwiring-capacitance = "200 pF"\n',
)

UP, PRESS, RELEASE, STEPS = (f'event = "{event}"' for event in ("power-up", "press", "release", "step-up"))
DIP = 'length = "200 ms", armed = "0.99 V", to = "0.99 V"'
THIRDS = 'low = "30 % of step", high = "70 % of step"'
HALF = Circuit(parts=DIVIDING.parts.replace("3.3k", "4.7k"), nets=DIVIDING.nets, facts=DIVIDING.facts)
CASES = {
    "1 time to 2 V": (DIVIDER, "N", "delay", f'{STEPS}, to = "2 V"', 823.959e-6, "s"),
    "1b time to 2.9 V": (DIVIDER, "N", "delay", f'{STEPS}, to = "2.9 V"', 2.55090e-3, "s"),
    "1c corner": (DIVIDER, "N", "corner_frequency", "", 212.207, "Hz"),
    "2 ramp to 0.99 V": (RAMPED, "N", "delay", f'{UP}, to = "0.99 V"', 3.98134e-3, "s"),
    "2 ramp to 2.31 V": (RAMPED, "N", "delay", f'{UP}, to = "2.31 V"', 7.99966e-3, "s"),
    "2b 30 % of the moment": (RAMPED, "N", "delay", f'{UP}, to = "may switch"', 0.761434e-3, "s"),
    "2b 70 % of the moment": (RAMPED, "N", "delay", f'{UP}, to = "must have switched"', 3.19706e-3, "s"),
    "3a above 1.5 V": (ACTIVE_HIGH, "N", "pulse_width", f'{UP}, level = "1.5 V"', 1.38862e-3, "s"),
    "3a peak": (ACTIVE_HIGH, "N", "peak_voltage", UP, 3.16060, "V"),
    "6 press": (BUTTON, "N", "delay", f'{PRESS}, to = "0.99 V"', 1.20397e-3, "s"),
    "6 release": (BUTTON, "N", "delay", f'{RELEASE}, to = "2.31 V"', 13.2437e-3, "s"),
    "6b press": (DIVIDING, "N", "delay", f'{PRESS}, to = "0.99 V"', 6.63387e-3, "s"),
    "7 without leakage": (LARGE, "N", "delay", f'{UP}, to = "2.31 V"', 1.20397, "s"),
    "10 tapped line to 2.31 V": (TAPPED, "N", "delay", f'{STEPS}, to = "2.31 V"', 2e-3 * 1.2039728, "s"),
    "10a to 50 % of the step": (STAGES, "B", "delay", f'{STEPS}, to = "50 % of step"', 2.22492e-3, "s"),
    "10a settled at A": (STAGES, "N", "settling_time", f'{STEPS}, band = "0.01220703125 %"', 22.7439e-3, "s"),
    "16 discharge": (BULK, "C1", "discharge_time", 'to = "5 V"', 23.0259, "s"),
    "18 after a long dip": (DIPPED, "N", "dip_rearm", DIP, 21.1261e-3, "s"),
    "19 kick of 12 bits": (CONVERTER, "N", "sample_error", 'time = "0 s"', 32.508 / 4096, "1"),
    "19 left after 2 us": (CONVERTER, "N", "sample_error", 'time = "2 us"', 4.46986 / 4096, "1"),
    "20 rise of a two-wire line": (BUS, "SDA", "rise_time", f"{STEPS}, {THIRDS}", 253.944e-9, "s"),
    "6a pressed": (HALF, "N", "final_voltage", PRESS, 1.0551, "V"),
    "10a settled at B": (STAGES, "B", "settling_time", f'{STEPS}, band = "0.01220703125 %"', 24.0038e-3, "s"),
}


def findings(
    folder: Path, circuit: Circuit, subject: str, measure: str, options: str, limits: list[str]
) -> list[Finding]:
    """One finding a limit, from files alone."""
    (folder / "board.xml").write_text(xml(circuit.parts, circuit.nets), encoding="utf-8")
    board = '[board]\nnetlist = "board.xml"\nrules = ["asked.toml"]\n'
    (folder / "rcrules.toml").write_text(board + circuit.facts + EXACT, encoding="utf-8")
    rules = ['[pack]\nname = "asked"\ntitle = "Asked"\n']
    for number, limit in enumerate(limits):
        rules.append(
            f'[[rule]]\nid = "asked-{number}"\ntitle = "asked"\nlevel = "error"\n{subject}\nmeasure = "{measure}"\n'
            f'{f"with = {{ {options} }}" if options else ""}\n{limit}\nwhy = "asked"\nsource = "asked"\n'
        )
    (folder / "asked.toml").write_text("\n".join(rules), encoding="utf-8")
    return sorted(run(Job(project=str(folder / "rcrules.toml"))).findings, key=lambda finding: finding.rule)


@pytest.mark.parametrize("name", CASES)
def test_each_answer_is_found_and_decides(name: str, tmp_path: Path):
    circuit, net, measure, options, answer, unit = CASES[name]
    plain = unit == "1"
    limits = [f"at-most = {answer * factor:.9g}" for factor in (0.9, 1.1)]
    limits = limits if plain else [f'{limit.replace("= ", chr(34).join(("= ", "")))} {unit}"' for limit in limits]
    subject = f'part = ["{net}"]' if net == "C1" else f'net = ["{net}"]'
    if measure == "dip_rearm":
        subject += '\nsubject = "node"'
    below, above = findings(tmp_path, circuit, subject, measure, options, limits)
    assert below.measured is not None
    assert below.measured.nominal == pytest.approx(answer, rel=2e-5 if net == "N" and unit == "V" else 5e-6)
    assert (below.outcome, above.outcome) == ("fails", "holds")


@pytest.mark.parametrize(("level", "answer"), [("0.99 V", -5.10957e-3), ("2.31 V", -1.09124e-3)])
def test_a_delay_from_a_valid_supply_is_negative_behind_a_slow_ramp(level: str, answer: float, tmp_path: Path):
    """Circuit 2a: the supply is valid at 9.09091 ms."""
    options = f'{UP}, from = "supply valid", to = "{level}"'
    (found,) = findings(tmp_path, RAMPED, 'net = ["N"]', "delay", options, ['at-least = "0 s"'])
    assert found.measured is not None
    assert found.measured.nominal == pytest.approx(answer, abs=6e-9)
    assert found.outcome == "fails"


def test_tolerances_given_on_the_parts_bound_the_time(tmp_path: Path):
    """Circuit 1a, R ±1 %, C ±10 %; the C0G letters and the resistors' drift widen the bounds by what is assumed."""
    parts = "R1 30k 1%, R2 10k 1%, C1 100n 10% C0G, J1 IN, U1 QX7301, U2 QX5000"
    circuit = Circuit(parts=parts, nets=DIVIDER.nets, facts=DIVIDER.facts)
    limits = ['at-most = "927.014 us"', 'at-most = "950 us"', 'at-most = "900 us"']
    edge, wide, narrow = findings(tmp_path, circuit, 'net = ["N"]', "delay", f'{STEPS}, to = "2 V"', limits)
    assert narrow.measured is not None
    assert narrow.measured.low == pytest.approx(725.360e-6, rel=1.5e-2)
    assert narrow.measured.high == pytest.approx(927.014e-6, rel=1.5e-2)
    assert narrow.measured.high >= 927.014e-6
    assert narrow.measured.method == "proved"
    assert (narrow.outcome, edge.outcome, wide.outcome) == ("fails", "undecided", "holds")


def test_a_level_near_the_end_is_never_reached_in_the_worst_case(tmp_path: Path):
    """Circuit 1b, R ±5 %."""
    parts = "R1 30k 5%, R2 10k 5%, C1 100n C0G, J1 IN, U1 QX7301, U2 QX5000"
    circuit = Circuit(parts=parts, nets=DIVIDER.nets, facts=DIVIDER.facts)
    options = f'{STEPS}, to = "2.9 V"'
    (found,) = findings(tmp_path, circuit, 'net = ["N"]', "delay", options, ['at-most = "1 s"'])
    assert found.measured is not None
    assert found.measured.high == inf
    assert found.outcome == "fails"


@pytest.mark.parametrize(("leakage", "high"), [("0 A .. 0.98 uA", 5.44674), ("-1 uA .. 1 uA", inf)])
def test_the_leakage_of_the_pin_decides(leakage: str, high: float, tmp_path: Path):
    """Circuit 7: with +1 µA the pin ends at 2.3 V and never reaches 2.31 V."""
    circuit = Circuit(parts=LARGE.parts, nets=LARGE.nets, facts=f'{STEP}[pin."U1.NRST"]\nleakage = "{leakage}"\n')
    options = f'{UP}, to = "2.31 V"'
    (found,) = findings(tmp_path, circuit, 'net = ["N"]', "delay", options, ['at-most = "2 s"'])
    assert found.measured is not None
    assert found.measured.high == pytest.approx(high, rel=0.2)
    assert found.outcome == "fails"


def test_a_ratiometric_level_cancels_the_supply_and_a_fixed_one_does_not(tmp_path: Path):
    """Circuit 8: VS 3.3 V ±10 %; ln 2 · RC whatever the supply, 6.06136 .. 8.10930 ms to 1.65 V."""
    facts = '[supply."+3V3"]\nvoltage = "3.3 V +/- 10 %"\n'
    circuit = Circuit(parts="R1 10k, C1 1u C0G, U1 QX7301, U2 QX3300", nets=RESET, facts=facts)
    limit = ['at-most = "7.1 ms"']
    (ratio,) = findings(tmp_path, circuit, 'net = ["N"]', "delay", f'{UP}, to = "50 % of +3V3"', limit)
    (fixed,) = findings(tmp_path, circuit, 'net = ["N"]', "delay", f'{UP}, to = "1.65 V"', limit)
    assert ratio.measured is not None
    assert fixed.measured is not None
    assert ratio.measured.nominal == pytest.approx(6.93147e-3, rel=1e-6)
    assert ratio.outcome == "holds"
    assert fixed.measured.high >= 8.10930e-3
    assert fixed.measured.high == pytest.approx(8.10930e-3, rel=1e-2)
    assert fixed.outcome == "fails"


def test_a_pressed_level_that_stays_too_high_is_never_reached(tmp_path: Path):
    """Circuit 6a: 4.7 kΩ against 10 kΩ leaves 1.0551 V, above 0.99 V."""
    circuit = Circuit(parts=DIVIDING.parts.replace("3.3k", "4.7k"), nets=DIVIDING.nets, facts=DIVIDING.facts)
    (found,) = findings(tmp_path, circuit, 'net = ["N"]', "delay", f'{PRESS}, to = "0.99 V"', ['at-most = "1 s"'])
    assert found.measured is not None
    assert found.measured.nominal == inf
    assert found.outcome == "fails"


def test_power_peaks_inside_the_box(tmp_path: Path):
    """Circuit 14: 62.5 mW at matched resistance, more than at either end of 50..150 Ω (55.556 and 60.0 mW)."""
    low, high = findings(tmp_path, LOADED, 'part = ["R2"]', "power", "", ['at-most = "61 mW"', 'at-most = "64 mW"'])
    assert low.measured is not None
    assert low.measured.high == pytest.approx(62.5e-3, rel=1e-2)
    assert low.measured.low == pytest.approx(55.556e-3, rel=2e-2)
    assert (low.outcome, high.outcome) == ("fails", "holds")


def test_leakage_only_shortens_a_discharge(tmp_path: Path):
    """Circuit 16: 20.9326 s at least, as a conductance; 17.05 s, as a current source would have it, is wrong."""
    options = 'to = "5 V"'
    low, high = findings(
        tmp_path, BULK, 'part = ["C1"]', "discharge_time", options, ['at-least = "20 s"', 'at-least = "21 s"']
    )
    assert low.measured is not None
    assert low.measured.low == pytest.approx(20.9326, rel=1e-2)
    assert high.outcome != "holds"


def test_a_short_dip_starts_no_reset(tmp_path: Path):
    """Circuit 18: after 10 ms the node is at 2.98596 V and needs 120.397 ms to fall to 0.99 V."""
    options = 'length = "10 ms", armed = "0.99 V", to = "0.99 V"'
    subject = 'net = ["N"]\nsubject = "node"'
    (found,) = findings(tmp_path, DIPPED, subject, "dip_rearm", options, ['at-least = "1 ms"'])
    assert found.measured is not None
    assert (found.outcome, found.measured.high) == ("fails", 0.0)
    (left,) = findings(
        tmp_path, DIPPED, 'net = ["N"]', "voltage_at", 'event = "power-down", time = "10 ms"', ['at-most = "2.9 V"']
    )
    assert left.measured is not None
    assert left.measured.nominal == pytest.approx(2.98596, rel=2e-6)


@pytest.mark.parametrize(("farads", "kick"), [("10n", 3.2742), ("100n", 0.32765)])
def test_a_larger_capacitor_kicks_less(farads: str, kick: float, tmp_path: Path):
    """Circuit 19."""
    circuit = Circuit(parts=CONVERTER.parts.replace("1n", farads), nets=CONVERTER.nets, facts=CONVERTER.facts)
    (found,) = findings(tmp_path, circuit, 'net = ["N"]', "sample_error", 'time = "0 s"', ["at-most = 1"])
    assert found.measured is not None
    assert found.measured.nominal * 4096 == pytest.approx(kick, rel=2e-5)


def test_pull_ups_with_tolerance_bound_the_edge(tmp_path: Path):
    """Circuit 20: 241.247 to 266.641 ns at ±5 %."""
    circuit = Circuit(
        parts=BUS.parts.replace("2.2k", "2.2k 5%").replace("4.7k", "4.7k 5%"), nets=BUS.nets, facts=BUS.facts
    )
    options = f"{STEPS}, {THIRDS}"
    inside, outside = findings(
        tmp_path, circuit, 'net = ["SDA"]', "rise_time", options, ['at-most = "264 ns"', 'at-most = "270 ns"']
    )
    assert inside.measured is not None
    assert inside.measured.low == pytest.approx(241.247e-9, rel=6e-3)
    assert inside.measured.high == pytest.approx(266.641e-9, rel=6e-3)
    assert (inside.outcome, outside.outcome) == ("fails", "holds")


def test_a_node_between_resistors_jumps(tmp_path: Path):
    """Circuit 10: A is at half the step at once, and at 2.31 V after 1.02165 ms."""
    nets = TAPPED.nets.replace("A: R1.2 R2.1", "A: R1.2 R2.1 C2.1").replace("C1.2", "C1.2 C2.2")
    circuit = Circuit(
        parts=TAPPED.parts.replace("C1 100n C0G", "C1 100n C0G, C2 0.001p C0G"), nets=nets, facts=TAPPED.facts
    )
    (found,) = findings(tmp_path, circuit, 'net = ["A"]', "delay", f'{STEPS}, to = "2.31 V"', ['at-most = "1 s"'])
    assert found.measured is not None
    assert found.measured.nominal == pytest.approx(1.02165e-3, rel=1e-5)
    (later,) = findings(
        tmp_path, circuit, 'net = ["A"]', "voltage_at", f'{STEPS}, time = "1 ns"', ['at-most = "1.7 V"']
    )
    assert later.measured is not None
    assert later.measured.nominal == pytest.approx(1.65, rel=1e-5)
