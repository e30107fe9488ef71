"""Files that hold more than any board are refused in seconds, with the line from which on it is too much."""

import pytest

from rcrules.errors import Mistake
from rcrules.readers import Limits, Source, _table, _xml, read
from tests.readers.test_hostile import refused

XML = "<export><components>{parts}</components><nets>{nets}</nets></export>"
TESTED = "P  JOB A\n{}999\n"
BOARD = '<IPC-2581><Step name="a">\n{}</Step></IPC-2581>'
PINS = "".join(f'<PinRef componentRef="R{number}" pin="1"/>\n' for number in range(4)).replace("/>\n", "/>", 1)
EDIF = """(edif A (edifVersion 2 0 0) (library L (cell C (view N
(interface {1}) (contents
{0})))) (design A (cellRef C (libraryRef L))))"""
LONG = "R" * 1_000_000 + "1"


FEW = Limits(parts=3, connections=3, nets=3)
"""Limits that a short file passes."""


def nodes(count: int) -> str:
    return "".join(f'<node ref="R{number}" pin="1"/>\n' for number in range(count))


def nets(count: int) -> str:
    return "".join(f'<net code="{number}" name="N{number}"></net>\n' for number in range(count))


@pytest.mark.parametrize(
    ("data", "what", "line"),
    [
        (XML.format(parts='<comp ref="R1"/>\n' * 4, nets=""), "parts", 4),
        (XML.format(parts="", nets=f'<net name="A">{nodes(4)}</net>'), "connections", 4),
        (XML.format(parts="", nets=nets(4)), "nets", 4),
        ("(export (components\n" + "(comp (ref R1))\n" * 4 + "))", "parts", 5),
        ("(export (nets (net (name A)\n" + "(node (ref R1) (pin 1))\n" * 4 + ")))", "connections", 5),
        ("net,pins\nA,R1.1 R1.2 R1.3 R1.4\n", "connections", 2),
        ("net,part,pin\nA,R1,1\nB,R1,2\nC,R2,1\nD,R2,2\nE,R2,3\n", "connections", 5),
        (TESTED.format("".join(f"327A                R1    -{n}\n" for n in range(4))), "connections", 5),
        (TESTED.format("".join(f"327A{n}               VIA\n" for n in range(4))), "nets", 5),
        (BOARD.format("".join(f'<Component refDes="R{n}"/>\n' for n in range(4))), "parts", 5),
        (BOARD.format("".join(f'<LogicalNet name="N{n}"/>\n' for n in range(4))), "nets", 5),
        (BOARD.format(f'<LogicalNet name="N">{PINS}</LogicalNet>'), "connections", 4),
        (BOARD.format('<Package name="P"/>\n' * 4), "elements <Package>", 5),
        (EDIF.format("(instance R (viewRef N (cellRef X)))\n" * 4, ""), "parts", 6),
        (EDIF.format("", "(port A)\n" * 4), "ports", 5),
    ],
)
def test_more_than_a_board_holds_is_refused(data: str, what: str, line: int) -> None:
    mistake = refused(data, limits=FEW)
    assert (mistake.problem, mistake.place.line) == (f"the file holds too many {what}", line)
    assert mistake.expected == f"at most 3 {what}"


def test_parts_that_only_stand_in_nets_count_too() -> None:
    whole = XML.format(parts="", nets=f'<net name="A">{nodes(4)}</net>')
    assert refused(whole, limits=Limits(parts=3)).problem.endswith("parts")


def test_a_limit_that_is_raised_lets_more_pass_and_the_message_says_how() -> None:
    parts = XML.format(parts='<comp ref="R1"/>' * 4, nets="")
    assert (refused(parts, limits=FEW).do or "").endswith("--limit parts=N allows more")
    assert len(read(Source(name="a", data=parts.encode(), limits=Limits(parts=4))).parts) == 1


def test_a_part_with_fields_without_end_is_refused() -> None:
    fields = "".join(f'<field name="f{number}">x</field>' for number in range(2001))
    parts = f'<comp ref="R1"><fields>{fields}</fields></comp>'
    assert refused(XML.format(parts=parts, nets="")).problem == "the file holds too many fields of one part"


@pytest.mark.parametrize(
    ("data", "problem"),
    [
        (XML.format(parts=f'<comp ref="{LONG}"/>', nets=""), "a reference is too long"),
        (XML.format(parts=f'<comp ref="R1"><value>{"1 " * 100_000}</value></comp>', nets=""), "a text is too long"),
        (XML.format(parts="", nets=f'<net name="{LONG}"></net>'), "a net name is too long"),
        (XML.format(parts="", nets=f'<net><node ref="R1" pin="{"1" * 5000}"/></net>'), "a pin number is too long"),
        (f"(export (components (comp (ref {LONG[2:]}))))", "a reference is too long"),
        (f"net,part,pin\n{LONG[:2000]},R1,1\n", "a net name is too long"),
        (f"net,part,pin\nA,{LONG[:2000]},1\n", "a reference is too long"),
        (f"net,part,pin\nA,R1,{'1' * 5000}\n", "a pin number is too long"),
        ("Ref,Value\nR" + "1" * 5000 + ",1k\nR2,1k\n", "a reference is too long"),
    ],
)
def test_endless_names_are_refused_where_they_stand(data: str, problem: str) -> None:
    mistake = refused(data)
    assert mistake.problem == problem
    assert mistake.place.line is not None
    assert len(str(mistake)) < 500


def idle(filling: str) -> Mistake:
    return refused(f"<export>\n<components/>{filling}<nets/></export>")


def test_what_means_nothing_is_not_kept_without_end(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(_xml, "MAX_MARKS", 150_000)
    assert "outside of any" in idle("<a/>\n" * 160_000).problem
    assert "inside one component" in idle("<comp ref='R1'>" + "<a b='c'/>" * 80_000 + "</comp>").problem


def test_a_table_of_more_cells_than_any_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(_table, "MAX_CELLS", 8)
    mistake = refused('Ref,Value\nR1,1k\nR2,"1k"\n,\n\nR3,1k\n')
    assert (mistake.problem, mistake.place.line) == ("the table is too large", 6)


def test_blank_lines_and_blanks_without_end_are_passed_over() -> None:
    lines = "(export (components\n" + "\r\n" * 2_000_000 + " " * 2_000_000 + "(comp (ref R1) (value 1k))))"
    part = read(Source(name="a", data=lines.encode())).parts[0]
    assert (part.ref, part.place.line) == ("R1", 2_000_002)
    rows = "net,part,pin\n" + "\r\n" * 2_000_000 + "A,R1,1\n"
    part = read(Source(name="a", data=rows.encode())).parts[0]
    assert (part.ref, part.place.line) == ("R1", 2_000_002)


def test_rows_with_and_without_quotes_are_cut_alike() -> None:
    text = 'Ref, Value ,Note\r\nR1, 10k ,"a, ""b"""\rR2,\t4k7,\n\n C1 ,"1u",c'
    rows = read(Source(name="a", data=text.encode())).parts
    assert [(part.ref, part.value and part.value.text) for part in rows] == [("R1", "10k"), ("R2", "4k7"), ("C1", "1u")]
    assert [part.place.line for part in rows] == [2, 3, 5]
    assert [part.value.place.column for part in rows if part.value] == [4, 4, 6]
    assert rows[0].fields["Note"].text == 'a, "b"'
