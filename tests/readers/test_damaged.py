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
EDIF = b"""(edif T (edifVersion 2 0 0) (edifLevel 0) (keywordMap (keywordLevel 0))
 (library P (edifLevel 0) (technology (numberDefinition (scale 1 (E 1 -12) (unit CAPACITANCE))))
  (cell R (cellType GENERIC) (view N (viewType NETLIST) (interface (port &1) (port (array (rename B "B[1:0]") 2)))))
  (cell F (cellType GENERIC) (view N (viewType NETLIST) (interface (port A)) (contents
   (instance R1 (viewRef N (cellRef R)) (property VALUE (string "4k7 1%37%")))
   (net A (joined (portRef A) (portRef &1 (instanceRef R1))))))))
 (library D (edifLevel 0) (technology (numberDefinition))
  (cell TOP (cellType GENERIC) (view N (viewType NETLIST) (interface) (contents (page P1
   (instance F1 (viewRef N (cellRef F (libraryRef P))))
   (instance (array C 2) (viewRef N (cellRef R (libraryRef P))) (property Value (number (e 1 2)) (unit CAPACITANCE)))
   (net (rename V "+3V3") (joined (portRef A (instanceRef F1)) (portRef (member B 1) (instanceRef (member C 0)))))
   (net (array (rename N "N[1:0]") 2) (joined (portRef B (instanceRef (member C 1))))))))))
 (design T (cellRef TOP (libraryRef D))))
"""
TESTED = b"""P  JOB   T
P  NNAME1 /a/LONG_NAME
317NNAME1           R1    -1    D0400PA00X+001000Y+005000X0700Y0000R000 S0
327GND              R1    -2          A01X+005000Y+005000X0200Y0200R000 S0
327N/C              U1    -2
999
"""
BOARD = b"""<IPC-2581 revision="B"><Content><StepRef name="t"/></Content>
 <Bom name="B"><BomHeader><StepRef name="t"/></BomHeader><BomItem OEMDesignNumberRef="X" quantity="1">
  <RefDes name="R1" populate="false"/><Characteristics><Measured measuredCharacteristicName="RESISTANCE"
   measuredCharacteristicValue="47" engineeringUnitOfMeasure="OHM" engineeringNegativeTolerance="1"
   engineeringPositiveTolerance="2"/></Characteristics></BomItem></Bom>
 <Ecad><CadData><Step name="t"><Package name="P"><Pin number="1" name="A"/></Package>
  <Component refDes="R1" packageRef="P"/><LogicalNet name="N"><PinRef componentRef="R1" pin="1"/></LogicalNet>
  <LayerFeature><Set net="M"><Pad><PinRef componentRef="R1" pin="2"/></Pad></Set></LayerFeature></Step></CadData></Ecad>
 <Avl><AvlItem OEMDesignNumber="X"><AvlVmpn><AvlMpn name="Q"/></AvlVmpn></AvlItem></Avl></IPC-2581>
"""
LISTED = b"""<bom><part ref="R1"><value>4k7</value><f name="Tol">1%</f></part><part ref="C1" value="1u"/></bom>"""
STARS = b"""*T*
*PART*
R1 RES-4K7-1%@R0402
C1 CAP-100N
*NET*
*SIGNAL* N ;A
R1.2 C1.1
*SIGNAL* GND
C1.A4/B9
*END
"""
DOLLARS = b"""(NETLIST)
$PACKAGES
R0402 ! 'RES' ! 4K7 ! 1% ; R1
C0402 ! CAP ; C1
$A_PROPERTIES
VOLT '16 V' ; C1
$NETS
'A NET' ; R1.2 ,
  C1.1
$END
"""
BRACKETS = b"""[
R1
R0402

4K7
]
(
A
R1-1
J1,2
)
"""
DECK = b"""a title
.param r={2*k1} k1=1k
.subckt F a b params: c=1u
R1 a b {r+1} tc1=10u
C1 b 0 {c}
.ends F
X1 in out F c='2*3n' ; an instance
D1 out
+ in DX
V1 in gnd dc 3.3
.include x.inc
.end
"""
STAMPED = b"""# of old
(
 ( /513B6FE5 $noname  R27 10k {Lib=R}
  (    1 N-000008 )
  (    2 ? )
 )
)
"""
NODES = b"""NET_NAME
'A'
NODE_NAME R1 2
 'B':;
NODE_NAME C1 1
END.
"""
MADE = b"""primitive 'X';
 pin
  'A':
   PIN_NUMBER='(1)';
   PINUSE='IN';
 end_pin;
 body
  VALUE='1u';
 end_body;
end_primitive;
END.
"""
NETLISTS = {"xml": XML, "sexpr": SEXPR, "edif": EDIF, "ipc-d-356": TESTED, "ipc-2581": BOARD, "bom-xml": LISTED}
NETLISTS |= {"star-list": STARS, "dollar-list": DOLLARS}
NETLISTS |= {"parenthesised-list": STAMPED, "nodes": NODES, "primitives": MADE}
TABLES = {"spice": DECK, "pins": PINS, "bracket-list": BRACKETS, "bom": BOM, "utf-16": BOM.decode().encode("utf-16")}
TEXTS = {**NETLISTS, **TABLES}
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


@pytest.mark.parametrize("name", NETLISTS)
def test_a_netlist_cut_anywhere_is_refused(name: str) -> None:
    whole = TEXTS[name].rstrip()
    assert outcome(whole) is not None
    stride = 1 if len(whole) < 2000 else 41
    assert [end for end in range(0, len(whole), stride) if outcome(whole[:end]) is not None] == []


@pytest.mark.parametrize("name", TABLES)
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
