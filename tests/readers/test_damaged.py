"""Files cut anywhere, and files with bytes changed, added, lost and moved: read whole, or refused with a place."""

import random
from importlib.resources import files

import pytest

from rcrules import readers
from rcrules.errors import UserMistake
from rcrules.readers import Export, Source

DEMO = files("rcrules") / "demo"
XML = (DEMO / "tide-gauge.xml").read_bytes()
BOM = (DEMO / "tide-gauge-bom.csv").read_bytes()
SEXPR = b"""(export (version "E")
 (components
  (comp (ref "R1") (value "10k") (fields (field (name "Tol") "1%")) (libsource (lib "Device") (part "R")))
  (comp (ref "C1") (value "1\xc2\xb5") (property (name "dnp"))))
 (libparts (libpart (lib "Device") (part "R") (pins (pin (num "1") (name "A") (type "passive")))))
 (nets (net (code "1") (name "NRST") (node (ref "R1") (pin "1") (pintype "input")) (node (ref "C1") (pin "1")))))
"""
PINS = b'net,part,pin,pin name,value\n+3V3,R1,1,,10k\nNRST,R1,2,,\nNRST,"C1",1,,"1u, 10%"\nGND,U1,3,GND,QX7301\n'
TEXTS = {"xml": XML, "sexpr": SEXPR, "pins": PINS, "bom": BOM, "utf-16": BOM.decode().encode("utf-16")}
PIECES = (
    b"\0",
    b'"',
    b"'",
    b"<",
    b">",
    b"&",
    b"(",
    b")",
    b",",
    b";",
    b"\t",
    b"\n",
    b"\r",
    b"=",
    b"\xff",
    b"\xe2\x80\xae",
)


def outcome(data: bytes) -> Export | None:
    """The export, None where the data is refused with a place; anything else fails the test."""
    try:
        return readers.read(Source(name="a.dat", data=data))
    except UserMistake as error:
        mistakes = error.mistakes
    assert all(mistake.place.file == "a.dat" and mistake.problem for mistake in mistakes)
    return None


@pytest.mark.parametrize("name", ["xml", "sexpr"])
def test_a_netlist_cut_anywhere_is_refused(name: str) -> None:
    whole = TEXTS[name].rstrip()
    assert outcome(whole) is not None
    stride = 1 if len(whole) < 2000 else 41
    assert [end for end in range(0, len(whole), stride) if outcome(whole[:end]) is not None] == []


@pytest.mark.parametrize("name", ["pins", "bom", "utf-16"])
def test_a_table_cut_anywhere_gives_no_part_that_the_whole_has_not(name: str) -> None:
    """A table has no end mark: rows before the cut are read as they are."""
    whole = outcome(TEXTS[name])
    assert whole is not None
    known = {part.ref for part in whole.parts}
    for end in range(0, len(TEXTS[name]), 7):
        cut = outcome(TEXTS[name][:end])
        for part in cut.parts if cut is not None else ():
            assert any(ref.startswith(part.ref) for ref in known)


@pytest.mark.parametrize("name", TEXTS)
def test_changed_bytes_never_surprise_a_reader(name: str) -> None:
    chance = random.Random(f"damage {name}")
    for _ in range(120):
        outcome(damaged(TEXTS[name], chance))


def damaged(data: bytes, chance: random.Random) -> bytes:
    """The data with one to four injuries."""
    for _ in range(chance.randint(1, 4)):
        start = chance.randrange(len(data) + 1)
        end = min(len(data), start + chance.choice((0, 1, 5, 50)))
        piece = chance.choice((b"", data[start:end] * 2, chance.choice(PIECES), bytes([chance.randrange(256)])))
        data = data[:start] + piece + data[end:]
    return data
