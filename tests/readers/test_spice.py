"""SPICE decks: elements, suffixes, sums, subcircuits, included files and what simulators do not agree on."""

from pathlib import Path

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.readers import Export, Limits, Source

DECK = """\
tiny rc filter (first line is always the title)
* worst-case corner deck
.param rtol=0.01 cnom=100n
.subckt rcf in out com params: rv=4.7k
R1 in out {rv*(1+rtol)} tc1=100u
C1 out com {cnom} ic=0
.ends rcf
X1 vin sense 0 rcf rv=4.7k
R2 sense gnd 10MEG ; bleed: MEG, since 10M is 10 milliohm
R3 sense
* a comment between
+ 0 1T $ leakage
V1 vin 0 dc 3.3
.control
R9 a b 1k
.endc
.op
.end
R8 after the end
"""


def read(text: str, folder: Path | None = None) -> Export:
    path = folder / "deck.cir" if folder else None
    return readers.read(Source(name="deck.cir", data=text.encode(), path=path, folder=folder))


def refused(text: str, folder: Path | None = None) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text, folder)
    return caught.value.mistakes[0]


def values(export: Export) -> dict[str, str | None]:
    return {part.ref: part.value.text if part.value else None for part in export.parts}


def said(export: Export) -> list[str]:
    return [remark.text for remark in export.remarks]


def deck(*lines: str) -> Export:
    return read("\n".join(("a title", *lines, ".end", "")))


def test_the_deck_is_read_flat_with_its_values_worked_out() -> None:
    export = read(DECK)
    assert (export.reader, export.kind, export.remarks) == ("spice", "netlist", ())
    assert values(export) == {"X1/R1": "4.747 kΩ", "X1/C1": "100 nF", "R2": "10 MΩ", "R3": "1 TΩ", "V1": "3.3V"}
    ends = [(pin.ref, pin.number, pin.net, pin.place.line) for pin in export.pins]
    assert ends == [
        ("X1/R1", "1", "vin", 5),
        ("X1/R1", "2", "sense", 5),
        ("X1/C1", "1", "sense", 6),
        ("X1/C1", "2", "0", 6),
        ("R2", "1", "sense", 9),
        ("R2", "2", "0", 9),
        ("R3", "1", "sense", 10),
        ("R3", "2", "0", 10),
        ("V1", "1", "vin", 13),
        ("V1", "2", "0", 13),
    ]
    assert [(name, place.line) for name, place in export.nets] == [("vin", 5), ("sense", 5), ("0", 6)]
    assert export.parts[0].fields["TC"].text == "100 ppm/K"


@pytest.mark.parametrize(
    ("word", "shown"),
    [
        ("1M", "1 mΩ"),
        ("1MEG", "1 MΩ"),
        ("1MegOhm", "1 MΩ"),
        ("100Ohm", "100 Ω"),
        ("1.5e3k", "1.5 MΩ"),
        ("1mil", "25.4 µΩ"),
        ("10Ω", "10 Ω"),
        ("1G", "1 GΩ"),
        ("10µ", "10 µΩ"),
        ("{2*3k}", "6 kΩ"),
        ("'max(1k, 2*pi)+-2**2'", "996 Ω"),
    ],
)
def test_suffixes_mean_what_they_mean_in_decks(word: str, shown: str) -> None:
    """The suffixes as two manuals of simulators give them, from memory."""
    assert values(deck(f"R1 a 0 {word}"))["R1"] == shown


@pytest.mark.parametrize("word", ["4k7", "10K5", "1a", "2u2", "x", "{y}", "{1/0}", "{1+}", "{10**999}", "{f(1)}"])
def test_what_simulators_do_not_agree_on_has_no_value_and_is_told(word: str) -> None:
    export = deck(f"R1 a 0 {word}")
    assert values(export) == {"R1": None}
    assert [(remark.place.line, remark.text[:14]) for remark in export.remarks] == [(2, "R1: no value: ")]


def test_dialect_traps_are_told() -> None:
    told = said(deck("R1 a 0 10M", "R3 a 0 3Meg", "R4 a 0 5mil", "C1 a 0 1F", "R2 a 0 10k 5%"))
    assert told == [
        "R1: '10M' is in milliohms here; write MEG for megohms",
        "C1: '1F' is in femtofarads here; write the number without F for farads",
        "R2: '5%' is taken as the tolerance; simulators take it as the name of a model",
    ]
    title = read("R1 a 0 1k\nR2 a 0 1k\nC2 a 0 1n\n")
    assert said(title) == [
        "the first line of a deck is its title: 'R1 a 0 1k' is no part",
        "the deck has no .end; check that it was not cut",
    ]


def test_multipliers_and_models_give_values() -> None:
    export = deck(
        "R1 a 0 1k m=2",
        "C1 a 0 1u m=2",
        "R2 a 0 rmod",
        ".model rmod r(r=555)",
        "C2 a 0 cmod",
        ".model cmod c (cap=2n)",
        "R3 a 0 film l=12u w=2u",
        ".model film r(rsh=100 narrow=1u)",
        "R4 a 0 R=47",
    )
    assert [value for ref, value in values(export).items()] == ["500 Ω", "2 µF", "555 Ω", "2 nF", "1.1 kΩ", "47 Ω"]


def test_elements_have_the_nodes_of_their_letters() -> None:
    export = deck(
        "Q1 c b e QX",
        "Q2 c b e s QX",
        "M1 d g s b MX",
        "M2 d g s MX",
        ".model MX nmos",
        "D1 a k DX",
        "E1 o 0 i 0 10",
        "E2 o 0 value={v(i)}",
        "F1 o 0 V1 2",
        "K1 L1 L2 0.9",
        "L1 i 0 1m",
        "L2 o 0 1m",
        "U1 p q r QX7301",
        "V1 i 0 sin(0 1 1k)",
    )
    pins: dict[str, list[str]] = {}
    for pin in export.pins:
        pins.setdefault(pin.ref, []).append(pin.name or pin.net)
    assert pins["Q1"] == ["C", "B", "E"]
    assert (pins["Q2"], pins["M1"], pins["M2"]) == (["C", "B", "E", "S"], ["D", "G", "S", "B"], ["D", "G", "S"])
    assert (pins["D1"], pins["E1"], pins["E2"], pins["F1"]) == (
        ["A", "K"],
        ["o", "0", "i", "0"],
        ["o", "0"],
        ["o", "0"],
    )
    assert "K1" not in pins
    assert (pins["U1"], values(export)["L1"]) == (["p", "q", "r"], "1 mH")
    assert next(pin.type for pin in export.pins if pin.ref == "V1") == "output"


def test_subcircuits_nest_and_nodes_within_them_are_their_own() -> None:
    export = deck(
        ".global vcc",
        ".subckt outer p",
        ".subckt inner a params: r=1k",
        "R1 a mid {r}",
        "R2 mid VCC 1k",
        ".ends",
        ".param big=2*base base=5k",
        "X1 p inner r={big}",
        ".ends outer",
        "XA n1 outer",
        "XB N1 OUTER",
    )
    assert values(export) == {"XA/X1/R1": "10 kΩ", "XA/X1/R2": "1 kΩ", "XB/X1/R1": "10 kΩ", "XB/X1/R2": "1 kΩ"}
    assert [pin.net for pin in export.pins] == [
        *("n1", "XA/X1/mid", "XA/X1/mid", "VCC"),
        *("n1", "XB/X1/mid", "XB/X1/mid", "VCC"),
    ]


def test_a_model_of_a_device_and_an_unknown_subcircuit_are_one_part_each() -> None:
    export = deck(".subckt amp p n o", "E1 o 0 p n 1e5", "R1 p n 1MEG", ".ends", "X1 i f f amp", "X2 i f other")
    assert values(export) == {"X1": "amp", "X2": "other"}
    assert [pin.name for pin in export.pins] == ["p", "n", "o", "", ""]
    assert said(export) == [
        "'amp' is the model of a device (it has controlled sources); each instance is taken as one part",
        "'other' is not defined here; each instance is taken as one part",
    ]


@pytest.mark.parametrize(
    ("lines", "problem", "line"),
    [
        ((".subckt a p", "X1 p a", ".ends", "X1 n a"), "a subcircuit that contains itself", 3),
        ((".subckt a p q", "R1 p q 1", ".ends", "X1 n a"), "X1 has a wrong number of nodes", 5),
        (("R1 a",), "R1 has a wrong number of nodes", 2),
        (("R1 a 0 1", "r1 b 0 1"), "two elements are called R1", 3),
        ((".ends", "R1 a 0 1"), ".ends without a .subckt before it", 2),
        ((".subckt a p", "R1 p 0 1"), "a subcircuit is not closed", None),
        ((".subckt a p", "R1 p 0 1", ".ends"), "the deck has no elements of its own, only definitions", None),
        (("R1 a 0 r=",), "no value after 'r' =", 2),
        (("R1 a 0 ==",), "no value after '0' =", 2),
        (("R1 a 0 {y",), "{ without its counterpart", 2),
    ],
)
def test_broken_decks_are_refused_with_their_place(lines: tuple[str, ...], problem: str, line: int | None) -> None:
    mistake = refused("\n".join(("a title", *lines, ".end", "")))
    assert (mistake.problem, mistake.place.line) == (problem, line)


def test_included_files_are_read_where_they_are_named(tmp_path: Path) -> None:
    (tmp_path / "lib").mkdir()
    (tmp_path / "lib" / "parts.inc").write_text("R5 a 0 {r5}\n.include more.inc\n.end\n")
    (tmp_path / "lib" / "more.inc").write_text("R6 a 0 6k\n")
    (tmp_path / "corner.lib").write_text(".lib fast\nR7 a 0 7k\n.endl\n.lib slow\nR7 a 0 8k\n.endl\n")
    text = 't\n.include "lib\\parts.inc"\n.lib corner.lib slow\n.param r5=5k\n.include gone.inc\n.end\n'
    export = read(text, tmp_path)
    assert values(export) == {"R5": "5 kΩ", "R6": "6 kΩ", "R7": "8 kΩ"}
    assert [str(part.place) for part in export.parts] == ["lib/parts.inc:1", "lib/more.inc:1", "corner.lib:5"]
    assert said(export) == ["'gone.inc' is not there; what it defines is not known"]


def test_files_that_include_each_other_are_refused(tmp_path: Path) -> None:
    (tmp_path / "a.inc").write_text("R1 a 0 1\n.include b.inc\n")
    (tmp_path / "b.inc").write_text(".include a.inc\n")
    mistake = refused("t\n.include a.inc\n.end\n", tmp_path)
    assert (mistake.problem, mistake.found) == ("files that include each other", "a.inc -> b.inc -> a.inc")
    assert str(mistake.place) == "b.inc:1"


@pytest.mark.parametrize("name", ["../secret.inc", "{outside}", "~/secret.inc", "C:\\secret.inc", "link.inc"])
def test_includes_that_leave_the_folder_are_refused(tmp_path: Path, name: str) -> None:
    folder = tmp_path / "project"
    folder.mkdir()
    outside = tmp_path / "secret.inc"
    outside.write_text("R1 a 0 1\n")
    (folder / "link.inc").symlink_to(outside)
    mistake = refused(f't\n.include "{name.format(outside=outside)}"\nR2 a 0 1\n.end\n', folder)
    assert (mistake.problem, mistake.place.line) == ("an include that leaves the folder of the project", 2)


def test_a_deck_from_standard_input_includes_nothing() -> None:
    export = read("t\n.include other.inc\nR1 a 0 1k\n.end\n")
    assert [text.split(";")[0] for text in said(export)] == ["'other.inc' is not read: standard input has no folder"]


def test_subcircuits_that_multiply_are_refused_in_little_time() -> None:
    blocks = [f".subckt s{n} p\n" + "".join(f"X{k} p s{n + 1}\n" for k in range(9)) + ".ends" for n in range(9)]
    text = "\n".join(("t", *blocks, ".subckt s9 p", "R1 p 0 1", ".ends", "X1 a s0", ".end"))
    with pytest.raises(UserMistake, match="the file holds too many parts"):
        readers.read(Source(name="a", data=text.encode(), limits=Limits(parts=10_000)))


@pytest.mark.parametrize(
    "sums",
    ["a={b} b={a}", "a={" + "(" * 900 + "1" + ")" * 900 + "}", "a={" + "-" * 1900 + "1}", "a={" + "1+" * 2000 + "1}"],
)
def test_sums_end_in_bounded_work(sums: str) -> None:
    export = deck(f".param {sums}", "R1 n 0 {a}")
    assert len(export.parts) == 1


def test_a_table_of_parts_is_no_deck() -> None:
    with pytest.raises(UserMistake):
        read("parts\nR1 10k 0603 1%\nC1 100n 0402 10%\n")


@pytest.mark.parametrize(
    "source", ["in 0 DC 0V AC SIN(0V 10V 1kHz)", "in 0 DC 1.5 AC .1", "in 0 PULSE(0 5 0 1n 1n 1m 2m)"]
)
def test_a_source_that_an_analysis_moves_drives_its_node(source: str) -> None:
    """What it does in time is a field, no value: 1kHz would read as the frequency of a crystal."""
    export = read(f"* deck\nVsig {source}\nR1 in out 1k\n.end\n")
    part = next(part for part in export.parts if part.ref == "VSIG")
    assert part.value is None
    assert (
        part.fields["Waveform"].text.split() == source.removeprefix("in 0 ").replace("(", " ").replace(")", " ").split()
    )
    assert [pin.type for pin in export.pins if pin.ref == "VSIG"] == ["output", "passive"]
