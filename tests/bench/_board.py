"""Generated boards of any size: controllers with reset, filters, divider, button, supply filter and decoupling."""

from itertools import pairwise
from random import Random
from xml.sax.saxutils import quoteattr

PARTS_PER_CELL = 25
PARTS_PER_LADDER = 9
"""On average."""

Components = list[tuple[str, str, str]]
"""Reference, value, symbol."""
Nets = dict[str, list[tuple[str, str, str, str]]]
"""Net -> reference, pin number, pin name, pin type."""


def netlist(parts: int, *, varied: bool = False) -> str:
    """An XML netlist (version E) with about ``parts`` parts.

    varied: half of the parts form ladders of which hardly two are alike; else every cell has the same networks, with
    other values.
    """
    components: Components = []
    nets: Nets = {}
    own = parts / 2 if varied else parts
    for cell in range(max(1, round(own / PARTS_PER_CELL))):
        _cell(cell, components, nets)
    for ladder in range(round((parts - own) / PARTS_PER_LADDER)):
        _ladder(ladder, components, nets)
    lines = ['<?xml version="1.0" encoding="UTF-8"?>', '<export version="E">', "<components>"]
    for ref, value, symbol in components:
        lines += [
            f"<comp ref={quoteattr(ref)}>",
            f"<value>{value}</value>",
            f'<libsource lib="Device" part="{symbol}"/>',
            "</comp>",
        ]
    lines += ["</components>", "<nets>"]
    for code, (name, pins) in enumerate(nets.items(), 1):
        lines.append(f'<net code="{code}" name={quoteattr(name)}>')
        lines += [
            f'<node ref="{ref}" pin="{pin}" pinfunction="{function}" pintype="{kind}"/>'
            for ref, pin, function, kind in pins
        ]
        lines.append("</net>")
    return "\n".join([*lines, "</nets>", "</export>", ""])


def _ladder(number: int, components: Components, nets: Nets) -> None:
    """Two to five sections between a connector and a chip, with loads, bleeders and couplings by chance."""
    chance = Random(number)
    base, count = 1_000_000 + 20 * number, 0

    def part(prefix: str, a: str, b: str) -> None:
        nonlocal count
        count += 1
        value = f"{chance.randint(1, 99)}k 1%" if prefix == "R" else f"{chance.randint(1, 99)}nF 10% 50V X7R"
        components.append((f"{prefix}{base + count}", value, prefix))
        nets.setdefault(a, []).append((f"{prefix}{base + count}", "1", "", "passive"))
        nets.setdefault(b, []).append((f"{prefix}{base + count}", "2", "", "passive"))

    joints = [f"/ladder{number}/{name}" for name in "ABCDEF"[: chance.randint(3, 6)]]
    for before, here in pairwise(joints):
        part("R", before, here)
        part("C", here, "GND")
        for prefix, far in (("R", "GND"), ("R", "+3V3"), ("C", before)):
            if chance.random() < 0.15:
                part(prefix, here, far)
    components.extend([(f"J{base}", "PROBE", "Conn_04"), (f"U{base}", "QX32", "QX32")])
    nets[joints[0]].append((f"J{base}", "1", "", "passive"))
    nets[joints[-1]].append((f"U{base}", "1", "AIN0", "input"))


def _cell(cell: int, components: Components, nets: Nets) -> None:
    """One controller with what hangs on it; the values differ from cell to cell."""

    def passive(prefix: str, number: int, value: str, a: str, b: str) -> None:
        ref = f"{prefix}{cell * 20 + number}"
        components.append((ref, value, prefix))
        nets.setdefault(a, []).append((ref, "1", "", "passive"))
        nets.setdefault(b, []).append((ref, "2", "", "passive"))

    def pin(ref: str, number: int, name: str, kind: str, net: str) -> None:
        nets.setdefault(net, []).append((ref, str(number), name, kind))

    kilo, nano = 1 + cell % 47, 10 + cell % 83
    chip, plug, switch = f"U{cell + 1}", f"J{cell + 1}", f"SW{cell + 1}"
    components.extend([(chip, "QX32", "QX32"), (plug, "PROBE", "Conn_04"), (switch, "KEY", "SW_Push")])
    here = f"/cell{cell}/"
    passive("R", 1, f"{kilo}k 1%", "+3V3", here + "NRST")
    passive("C", 1, "1uF 10% 16V X7R", here + "NRST", "GND")
    for channel in range(4):
        passive("R", 2 + channel, f"{kilo}k 1%", f"{here}IN{channel}", f"{here}AIN{channel}")
        passive("C", 2 + channel, f"{nano}nF 10% 50V X7R", f"{here}AIN{channel}", "GND")
        pin(plug, channel + 1, "", "passive", f"{here}IN{channel}")
        pin(chip, 10 + channel, f"AIN{channel}", "input", f"{here}AIN{channel}")
    passive("R", 6, "100k 1%", "+12V", here + "SENSE")
    passive("R", 7, "22k 1%", here + "SENSE", "GND")
    passive("C", 6, f"{nano}nF 10% 50V X7R", here + "SENSE", "GND")
    passive("R", 8, f"{kilo}k 5%", "+3V3", here + "KEY")
    passive("C", 7, "100nF 10% 50V X7R", here + "KEY", "GND")
    pin(switch, 1, "", "passive", here + "KEY")
    pin(switch, 2, "", "passive", "GND")
    passive("R", 9, "10 1%", "+3V3", here + "VDDA")
    passive("C", 8, "1uF 10% 16V X7R", here + "VDDA", "GND")
    for number in range(9, 12):
        passive("C", number, "100nF 10% 50V X7R", "+3V3", "GND")
    pins = [
        ("VDD", "power_in", "+3V3"),
        ("VSS", "power_in", "GND"),
        ("VDDA", "power_in", here + "VDDA"),
        ("NRST", "input", here + "NRST"),
        ("AIN4", "input", here + "SENSE"),
        ("PA0", "input", here + "KEY"),
    ]
    for number, (name, kind, net) in enumerate(pins, 1):
        pin(chip, number, name, kind, net)
