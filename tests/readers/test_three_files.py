"""The netlist in three files: nets, parts and a library of primitives, joined by names."""

from pathlib import Path

import pytest

from rcrules import readers
from rcrules.errors import Mistake, UserMistake
from rcrules.job import Job
from rcrules.pipeline import run
from rcrules.readers import Export, Source

NETS = """\
FILE_TYPE = EXPANDEDNETLIST;
{ a comment }
NET_NAME
'N562363'
 '@GAUGE.TOP(SCH):N562363':
 C_SIGNAL='@gauge.top(sch):n562363';
NODE_NAME	R1 2
 '@GAUGE.TOP(SCH):INS12@PARTS.R.NORMAL(CHIPS)':
 'B':;
NODE_NAME	C1 1
 '@GAUGE.TOP(SCH):INS13@PARTS.C.NORMAL(CHIPS)':
 'P':;
NODE_NAME	U34 19
 'NRST':;
NET_NAME
'0'
NODE_NAME	C1 2
 'N':;
END.
"""
PARTS = """\
FILE_TYPE = EXPANDEDPARTLIST;
DIRECTIVES
 ROOT_DRAWING='GAUGE';
END_DIRECTIVES;
PART_NAME
 R1 'RES_R0402_10K':;
SECTION_NUMBER 1
 '@GAUGE.TOP(SCH):INS12@PARTS.R.NORMAL(CHIPS)':
 PRIM_FILE='chip.dat',
 SECTION='';
PART_NAME
 C1 'CAP_C0402_0.1UF':;
PART_NAME
 U34 'QX7301':;
END.
"""
LIBRARY = """\
FILE_TYPE=LIBRARY_PARTS;
primitive 'RES_R0402_10K';
  pin
    'A':
      PIN_NUMBER='(1)';
      PINUSE='UNSPEC';
    'B':
      PIN_NUMBER='(2)';
      PINUSE='UNSPEC';
  end_pin;
  body
    PART_NAME='RES';
    JEDEC_TYPE='R0402';
    VALUE='10K';
    TOLERANCE='1%';
  end_body;
end_primitive;
primitive 'CAP_C0402_0.1UF';
  body
    VALUE='0.1uF';
  end_body;
end_primitive;
primitive 'QX7301';
  pin
    'NRST':
      PIN_NUMBER='(19)';
      PINUSE='IN';
  end_pin;
end_primitive;
END.
"""


def read(text: str) -> Export:
    return readers.read(Source(name="net.dat", data=text.encode()))


def refused(text: str) -> Mistake:
    with pytest.raises(UserMistake) as caught:
        read(text)
    return caught.value.mistakes[0]


def test_nets_have_their_nodes_with_lines_and_pin_names() -> None:
    export = read(NETS)
    assert [(pin.net, pin.ref, pin.number, pin.name, pin.place.line) for pin in export.pins] == [
        ("N562363", "R1", "2", "B", 7),
        ("N562363", "C1", "1", "P", 10),
        ("N562363", "U34", "19", "NRST", 13),
        ("0", "C1", "2", "N", 17),
    ]
    assert [(name, place.line) for name, place in export.nets] == [("N562363", 4), ("0", 16)]


def test_parts_get_values_and_pins_get_types_from_the_library_in_any_order() -> None:
    library, nets, parts = readers.join([read(LIBRARY), read(NETS), read(PARTS)])
    assert (library.parts, library.remarks, nets.remarks, parts.remarks) == ((), (), (), ())
    found = [(part.ref, part.value and str(part.value.text), part.footprint, part.symbol) for part in parts.parts]
    assert found == [("R1", "10K", "R0402", "RES"), ("C1", "0.1uF", "", "CAP_C0402_0.1UF"), ("U34", None, "", "QX7301")]
    assert {name: cell.place.line for name, cell in parts.parts[0].fields.items()} == {"TOLERANCE": 15}
    assert [pin.type for pin in nets.pins] == ["", "", "input", ""]


def test_what_is_missing_of_the_three_is_told() -> None:
    nets, parts = readers.join([read(NETS), read(PARTS)])
    assert nets.remarks == ()
    assert [str(remark.text) for remark in parts.remarks] == [
        "the library of primitives is not given; values of parts are not known"
    ]
    nets, _ = readers.join([read(NETS), read(LIBRARY)])
    assert [remark.text for remark in nets.remarks] == ["the list of parts is not given; values of parts are not known"]
    parts, _ = readers.join([read(PARTS), read(LIBRARY.replace("'QX7301'", "'OTHER'"))])
    assert [remark.text for remark in parts.remarks] == ["the library does not define QX7301"]


def test_the_three_files_are_one_board(tmp_path: Path) -> None:
    for name, text in (("net.dat", NETS), ("prt.dat", PARTS), ("chip.dat", LIBRARY)):
        (tmp_path / name).write_text(text)
    inputs = tuple(str(tmp_path / name) for name in ("net.dat", "prt.dat", "chip.dat"))
    document = run(Job(inputs=inputs, with_rules=False))
    assert {part["ref"]: part["value"] for part in document.parts} == {"C1": 1e-7, "R1": 1e4}


@pytest.mark.parametrize(
    ("text", "problem", "line"),
    [
        ("NET_NAME\nVDD\nNODE_NAME R1 2\nEND.\n", "a net without a name", 2),
        ("NODE_NAME R1 2\nEND.\n", "a node without a part, a pin or a net", 1),
        ("NET_NAME\n'A'\nNODE_NAME R1 2\nNODE_NAME R1\nEND.\n", "a node without a part, a pin or a net", 4),
        ("PART_NAME\n R1\nEND.\n", "a part without a primitive", 2),
        ("NET_NAME\n'A'\nNODE_NAME R1 2\n", "the file has no end", 3),
    ],
)
def test_broken_files_are_refused_with_their_place(text: str, problem: str, line: int) -> None:
    mistake = refused(text)
    assert (mistake.problem, mistake.place.line) == (problem, line)
