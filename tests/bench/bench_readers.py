"""Readers: ten times the parts in each format, and a netlist of 50 MB in XML against a bare parse of it."""

import gc
from collections.abc import Callable, Iterator
from time import process_time

from lxml import etree

from rcrules import readers
from rcrules.readers import Limits, Source
from tests.bench._bars import held

PARTS = 5_000
"""Of the smaller file of each format; the larger has ten times as many."""
MOST_GROWTH = 11.0
MEGABYTES = 50
MOST_RATIO = 2.0
"""Times the bare parse."""
ROUNDS = 3
"""Timed runs; the fastest counts, as the machine may be shared."""
Ends = tuple[str, str, str]
"""A part and the nets at its two pins."""


def chain(parts: int) -> Iterator[Ends]:
    """Resistors in a row."""
    return ((f"R{number}", f"N{number}", f"N{number + 1}") for number in range(1, parts + 1))


def nets(parts: int, joint: str) -> Iterator[tuple[str, str]]:
    """Each net with its pins: ``R1``, the mark, and the pin's number."""
    for number in range(1, parts + 2):
        before = f"R{number - 1}{joint}2 " if number > 1 else ""
        here = f"R{number}{joint}1" if number <= parts else ""
        yield f"N{number}", f"{before}{here}".strip()


def xml(parts: int) -> str:
    """With fields told twice, as newer exports have them."""
    fields = '<field name="Tolerance">1%</field><field name="Maker">any</field>'
    again = '<property name="Tolerance" value="1%"/>\n<property name="Maker" value="any"/>'
    rows = "\n".join(
        f'<comp ref="{ref}">\n<value>10k</value>\n<footprint>R_0402</footprint>\n<fields>{fields}</fields>\n'
        f'<libsource lib="Device" part="R" description="resistor"/>\n{again}\n<tstamps>{ref:0>36}</tstamps>\n</comp>'
        for ref, _, _ in chain(parts)
    )
    ends = "\n".join(
        f'<net code="{name[1:]}" name="{name}">\n'
        + "\n".join(f'<node ref="{ref}" pin="{pin}"/>' for ref, pin in (end.split(".") for end in pins.split()))
        + "\n</net>"
        for name, pins in nets(parts, ".")
    )
    return f'<export version="E">\n<components>\n{rows}\n</components>\n<nets>\n{ends}\n</nets>\n</export>\n'


def sexpr(parts: int) -> str:
    """The twin in brackets."""
    rows = "\n".join(f'(comp (ref "{ref}") (value "10k"))' for ref, _, _ in chain(parts))
    ends = "\n".join(
        f'(net (code "{name[1:]}") (name "{name}") '
        + " ".join(f'(node (ref "{ref}") (pin "{pin}"))' for ref, pin in (end.split(".") for end in pins.split()))
        + ")"
        for name, pins in nets(parts, ".")
    )
    return f'(export (version "E")\n(components\n{rows})\n(nets\n{ends}))\n'


def pin_list(parts: int) -> str:
    """A row a pin."""
    return "net,part,pin\n" + "".join(f"{a},{ref},1\n{b},{ref},2\n" for ref, a, b in chain(parts))


def bom(parts: int) -> str:
    """A row a part."""
    return "Reference,Value,Tolerance\n" + "".join(f"{ref},10k,1%\n" for ref, _, _ in chain(parts))


def star(parts: int) -> str:
    """Star sections."""
    rows = "".join(f"{ref} RES-10K-1%@R0402\n" for ref, _, _ in chain(parts))
    return (
        f"*PART*\n{rows}*NET*\n" + "".join(f"*SIGNAL* {name}\n{pins}\n" for name, pins in nets(parts, ".")) + "*END*\n"
    )


def dollar(parts: int) -> str:
    """Dollar sections."""
    rows = "".join(f"R0402 ! RES ! 10K ! 1% ; {ref}\n" for ref, _, _ in chain(parts))
    ends = "".join(f"{name} ; {pins}\n" for name, pins in nets(parts, "."))
    return f"(NETLIST)\n$PACKAGES\n{rows}$NETS\n{ends}$END\n"


def bracket(parts: int) -> str:
    """Bracket lists."""
    rows = "".join(f"[\n{ref}\nR0402\n10K\n]\n" for ref, _, _ in chain(parts))
    return rows + "".join("(\n" + "\n".join([name, *pins.split()]) + "\n)\n" for name, pins in nets(parts, "-"))


FORMATS: dict[str, Callable[[int], str]] = {
    "xml-netlist": xml,
    "sexpr-netlist": sexpr,
    "pin-list": pin_list,
    "bom": bom,
    "star-list": star,
    "dollar-list": dollar,
    "bracket-list": bracket,
}


def fastest(work: Callable[[], object]) -> float:
    """Seconds of one core, with the collector off, as the command has it."""
    best = float("inf")
    for _ in range(ROUNDS):
        start = process_time()
        work()
        best = min(best, process_time() - start)
    return best


def read(data: bytes) -> float:
    """Seconds to read a source."""
    limits = Limits(file_size=512, parts=10**6, connections=10**7, nets=10**6)
    return fastest(lambda: readers.read(Source(name="board", data=data, limits=limits)))


def main() -> None:
    """Print a row a format, then the ratio."""
    gc.disable()
    try:
        for name, written in FORMATS.items():
            small, large = (read(written(parts).encode()) for parts in (PARTS, 10 * PARTS))
            growth = held(large / small, MOST_GROWTH)
            print(f"{name:<14} {PARTS} parts {small:6.3f} s, {10 * PARTS} {large:6.3f} s: {growth}")
        data = xml(MEGABYTES * 1_000_000 * PARTS // len(xml(PARTS))).encode()
        bare, whole = fastest(lambda: etree.fromstring(data)), read(data)
        ratio = held(whole / bare, MOST_RATIO)
        print(f"{len(data) / 1e6:.0f} MB of XML: bare parse {bare:.2f} s, read {whole:.2f} s: {ratio}")
    finally:
        gc.enable()


if __name__ == "__main__":
    main()
