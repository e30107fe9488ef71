"""One circuit, written by hand in every format that can carry it: the same findings, but for places.

A connector P1 brings supply, ground and a signal; R1 and C1 reset the controller U1, R2 and C2 filter the signal
for it.
"""

import json
import re
from collections.abc import Mapping
from functools import cache
from pathlib import Path
from typing import Any, cast

import pytest

from rcrules.findings import dumps
from rcrules.job import Job
from rcrules.pipeline import run
from tests.readers import test_open_workbook, test_workbook

XML = """<?xml version="1.0"?><export version="E"><components>
<comp ref="P1"><value>HDR3</value></comp><comp ref="U1"><value>QX7301</value></comp>
<comp ref="R1"><value>10k</value></comp><comp ref="C1"><value>1uF</value></comp>
<comp ref="R2"><value>4k7</value></comp><comp ref="C2"><value>100n</value></comp></components><nets>
<net code="1" name="+3V3"><node ref="P1" pin="1"/><node ref="R1" pin="1"/><node ref="U1" pin="1"/></net>
<net code="2" name="0"><node ref="P1" pin="2"/><node ref="C1" pin="2"/><node ref="C2" pin="2"/>
<node ref="U1" pin="2"/></net>
<net code="3" name="RST"><node ref="R1" pin="2"/><node ref="C1" pin="1"/><node ref="U1" pin="3"/></net>
<net code="4" name="SIG"><node ref="P1" pin="3"/><node ref="R2" pin="1"/></net>
<net code="5" name="FLT"><node ref="R2" pin="2"/><node ref="C2" pin="1"/><node ref="U1" pin="4"/></net></nets></export>
"""
SEXPR = """(export (version D) (components
 (comp (ref P1) (value HDR3)) (comp (ref U1) (value QX7301)) (comp (ref R1) (value "10k"))
 (comp (ref C1) (value 1uF)) (comp (ref R2) (value 4K7)) (comp (ref C2) (value 100n)))
 (nets (net (code 1) (name +3V3) (node (ref P1) (pin 1)) (node (ref R1) (pin 1)) (node (ref U1) (pin 1)))
 (net (code 2) (name "0") (node (ref P1) (pin 2)) (node (ref C1) (pin 2)) (node (ref C2) (pin 2))
  (node (ref U1) (pin 2)))
 (net (code 3) (name RST) (node (ref R1) (pin 2)) (node (ref C1) (pin 1)) (node (ref U1) (pin 3)))
 (net (code 4) (name SIG) (node (ref P1) (pin 3)) (node (ref R2) (pin 1)))
 (net (code 5) (name FLT) (node (ref R2) (pin 2)) (node (ref C2) (pin 1)) (node (ref U1) (pin 4)))))
"""
EDIF = """(edif ONE (edifVersion 2 0 0) (edifLevel 0) (keywordMap (keywordLevel 0))
 (library L (edifLevel 0) (technology (numberDefinition))
  (cell TWO (cellType GENERIC) (view N (viewType NETLIST) (interface (port &1) (port &2))))
  (cell FOUR (cellType GENERIC) (view N (viewType NETLIST) (interface (port &1) (port &2) (port &3) (port &4))))
  (cell TOP (cellType GENERIC) (view N (viewType NETLIST) (interface) (contents
   (instance P1 (viewRef N (cellRef FOUR)) (property VALUE (string "HDR3")))
   (instance U1 (viewRef N (cellRef FOUR)) (property VALUE (string "QX7301")))
   (instance R1 (viewRef N (cellRef TWO)) (property VALUE (string "10k")))
   (instance C1 (viewRef N (cellRef TWO)) (property VALUE (string "1uF")))
   (instance R2 (viewRef N (cellRef TWO)) (property VALUE (string "4.7k")))
   (instance C2 (viewRef N (cellRef TWO)) (property VALUE (string "0.1uF")))
   (net (rename V33 "+3V3") (joined (portRef &1 (instanceRef P1)) (portRef &1 (instanceRef R1))
    (portRef &1 (instanceRef U1))))
   (net &0 (joined (portRef &2 (instanceRef P1)) (portRef &2 (instanceRef C1)) (portRef &2 (instanceRef C2))
    (portRef &2 (instanceRef U1))))
   (net RST (joined (portRef &2 (instanceRef R1)) (portRef &1 (instanceRef C1)) (portRef &3 (instanceRef U1))))
   (net SIG (joined (portRef &3 (instanceRef P1)) (portRef &1 (instanceRef R2))))
   (net FLT (joined (portRef &2 (instanceRef R2)) (portRef &1 (instanceRef C2)) (portRef &4 (instanceRef U1)))))))
 ) (design ONE (cellRef TOP (libraryRef L))))
"""
IPC_2581 = """<IPC-2581 revision="B"><Content><StepRef name="s"/></Content>
<Bom name="b"><BomHeader><StepRef name="s"/></BomHeader>
<BomItem OEMDesignNumberRef="a"><RefDes name="R1"/><Characteristics><Measured measuredCharacteristicName="RESISTANCE"
 measuredCharacteristicValue="10000" engineeringUnitOfMeasure="OHM"/></Characteristics></BomItem>
<BomItem OEMDesignNumberRef="b"><RefDes name="C1"/><Characteristics><Textual textualCharacteristicName="VALUE"
 textualCharacteristicValue="1uF"/></Characteristics></BomItem>
<BomItem OEMDesignNumberRef="c"><RefDes name="R2"/><Characteristics><Textual textualCharacteristicName="VALUE"
 textualCharacteristicValue="4K7"/></Characteristics></BomItem>
<BomItem OEMDesignNumberRef="d"><RefDes name="C2"/><Characteristics><Textual textualCharacteristicName="VALUE"
 textualCharacteristicValue="100n"/></Characteristics></BomItem></Bom>
<Ecad><CadData><Step name="s"><Component refDes="P1"/><Component refDes="U1"/><Component refDes="R1"/>
<Component refDes="C1"/><Component refDes="R2"/><Component refDes="C2"/>
<LogicalNet name="+3V3"><PinRef componentRef="P1" pin="1"/><PinRef componentRef="R1" pin="1"/>
 <PinRef componentRef="U1" pin="1"/></LogicalNet>
<LogicalNet name="0"><PinRef componentRef="P1" pin="2"/><PinRef componentRef="C1" pin="2"/>
 <PinRef componentRef="C2" pin="2"/><PinRef componentRef="U1" pin="2"/></LogicalNet>
<LogicalNet name="RST"><PinRef componentRef="R1" pin="2"/><PinRef componentRef="C1" pin="1"/>
 <PinRef componentRef="U1" pin="3"/></LogicalNet>
<LogicalNet name="SIG"><PinRef componentRef="P1" pin="3"/><PinRef componentRef="R2" pin="1"/></LogicalNet>
<LogicalNet name="FLT"><PinRef componentRef="R2" pin="2"/><PinRef componentRef="C2" pin="1"/>
 <PinRef componentRef="U1" pin="4"/></LogicalNet></Step></CadData></Ecad></IPC-2581>
"""
TESTED = """P  JOB   ONE
317+3V3             P1    -1
327+3V3             R1    -1
327+3V3             U1    -1
3170                P1    -2
3270                C1    -2
3270                C2    -2
3270                U1    -2
327RST              R1    -2
327RST              C1    -1
327RST              U1    -3
317SIG              P1    -3
327SIG              R2    -1
327FLT              R2    -2
327FLT              C2    -1
327FLT              U1    -4
999
"""
STARS = """*ONE*
*PART*
P1 HDR3@HDR
U1 QX7301@QFN
R1 10k@R0402
C1 1uF@C0402
R2 4k7@R0402
C2 100n@C0402
*NET*
*SIGNAL* +3V3
P1.1 R1.1 U1.1
*SIGNAL* 0
P1.2 C1.2 C2.2 U1.2
*SIGNAL* RST
R1.2 C1.1 U1.3
*SIGNAL* SIG
P1.3 R2.1
*SIGNAL* FLT
R2.2 C2.1 U1.4
*END*
"""
DOLLARS = """(NETLIST)
$PACKAGES
HDR ! HDR3 ; P1
QFN ! QX7301 ; U1
R0402 ! RES ! 10k ; R1
C0402 ! CAP ! 1uF ; C1
R0402 ! RES ! '4k7' ; R2
C0402 ! CAP ! 100n ; C2
$NETS
+3V3 ; P1.1 R1.1 U1.1
0 ; P1.2 C1.2 ,
 C2.2 U1.2
RST ; R1.2 C1.1 U1.3
SIG ; P1.3 R2.1
FLT ; R2.2 C2.1 U1.4
$END
"""
_PARTS_IN_BRACKETS = "".join(
    f"[\n{ref}\n{footprint}\n{value}\n]\n"
    for ref, footprint, value in (
        ("P1", "HDR", "HDR3"),
        ("U1", "QFN", "QX7301"),
        ("R1", "R0402", "10k"),
        ("C1", "C0402", "1uF"),
        ("R2", "R0402", "4k7"),
        ("C2", "C0402", "100n"),
    )
)
BRACKETS = (
    _PARTS_IN_BRACKETS
    + """(
+3V3
P1-1
R1-1
U1-1
)
(
0
P1-2
C1-2
C2-2
U1-2
)
(
RST
R1-2
C1-1
U1-3
)
(
SIG
P1-3
R2-1
)
(
FLT
R2-2
C2-1
U1-4
)
"""
)
PINS = """net,part,pin,value
+3V3,P1,1,HDR3
+3V3,R1,1,10k
+3V3,U1,1,QX7301
0,P1,2,
0,C1,2,1uF
0,C2,2,100n
0,U1,2,
RST,R1,2,
RST,C1,1,
RST,U1,3,
SIG,P1,3,
SIG,R2,1,4k7
FLT,R2,2,
FLT,C2,1,
FLT,U1,4,
"""
STAMPED = """# of old
(
 ( /4B617B01 HDR P1 HDR3
  ( 1 +3V3 )
  ( 2 0 )
  ( 3 SIG )
 )
 ( /4B617B02 QFN U1 QX7301
  ( 1 +3V3 )
  ( 2 0 )
  ( 3 RST )
  ( 4 FLT )
 )
 ( /4B617B03 $noname R1 10k {Lib=R}
  ( 1 +3V3 )
  ( 2 RST )
 )
 ( /4B617B04 $noname C1 1uF {Lib=C}
  ( 1 RST )
  ( 2 0 )
 )
 ( /4B617B05 $noname R2 4k7
  ( 1 SIG )
  ( 2 FLT )
 )
 ( /4B617B06 $noname C2 100n
  ( 1 FLT )
  ( 2 0 )
 )
)
"""
SPICE = """one circuit
.param rr=2*5k
P1 +3V3 0 SIG HDR3
U1 +3V3 0 RST FLT QX7301
R1 +3V3 RST {rr}
C1 RST gnd 1uF
R2 SIG FLT
+ 4.7K
C2 FLT 0 100n
.end
"""
NETS = """FILE_TYPE = EXPANDEDNETLIST;
NET_NAME
'+3V3'
NODE_NAME P1 1
NODE_NAME R1 1
NODE_NAME U1 1
NET_NAME
'0'
NODE_NAME P1 2
NODE_NAME C1 2
NODE_NAME C2 2
NODE_NAME U1 2
NET_NAME
'RST'
NODE_NAME R1 2
NODE_NAME C1 1
NODE_NAME U1 3
NET_NAME
'SIG'
NODE_NAME P1 3
NODE_NAME R2 1
NET_NAME
'FLT'
NODE_NAME R2 2
NODE_NAME C2 1
NODE_NAME U1 4
END.
"""
MADE_OF = """PART_NAME
 P1 'HDR3':;
PART_NAME
 U1 'QX7301':;
PART_NAME
 R1 'RES_10K':;
PART_NAME
 C1 'CAP_1U':;
PART_NAME
 R2 'RES_4K7':;
PART_NAME
 C2 'CAP_100N':;
END.
"""
PRIMITIVES = """primitive 'HDR3','QX7301';
end_primitive;
primitive 'RES_10K';
 body
  VALUE='10K';
 end_body;
end_primitive;
primitive 'CAP_1U';
 body
  VALUE='1uF';
 end_body;
end_primitive;
primitive 'RES_4K7';
 body
  VALUE='4K7';
 end_body;
end_primitive;
primitive 'CAP_100N';
 body
  VALUE='0.1uF';
 end_body;
end_primitive;
END.
"""
CSV = "Reference;Value;Qty\nP1;HDR3;1\nU1;QX7301;1\nR1;10k;1\nC1;1uF;1\nR2;4k7;1\nC2;100n;1\n"
BOM_XML = """<bom><part ref="P1" value="HDR3"/><part ref="U1" value="QX7301"/><part ref="R1" value="10k"/>
<part ref="C1" value="1 uF"/><part ref="R2" value="4k7"/><part ref="C2" value="100n"/></bom>
"""
_ROWS = [line.split(";") for line in CSV.splitlines()]
XLSX = test_workbook.workbook(("BOM", test_workbook.sheet(_ROWS)))
ODS = test_open_workbook.workbook("".join(test_open_workbook.row(*cells) for cells in _ROWS))
INPUTS: Mapping[str, tuple[str | bytes, ...]] = {
    "xml": (XML,),
    "sexpr": (SEXPR,),
    "edif": (EDIF,),
    "ipc-2581": (IPC_2581,),
    "ipc-d-356 and csv": (TESTED, CSV),
    "ipc-d-356 and xml bom": (TESTED, BOM_XML),
    "ipc-d-356 and xlsx": (TESTED, XLSX),
    "ipc-d-356 and ods": (TESTED, ODS),
    "star": (STARS,),
    "dollar": (DOLLARS,),
    "bracket": (BRACKETS,),
    "pin list": (PINS,),
    "parenthesised": (STAMPED,),
    "three files": (PRIMITIVES, NETS, MADE_OF),
    "spice": (SPICE,),
}
PROJECT = """
[board]
name = "one circuit"
rules = ["power-on-reset", "own.toml"]
[ground]
nets = ["0"]
[supply."+3V3"]
voltage = "3.3 V +/- 3 %"
valid = "3 V"
rise = "1 ms .. 2 ms"
[net."SIG"]
swing = "0 V .. 3 V"
[pin."U1.3"]
kind = "input"
low = "30 % of +3V3"
high = "70 % of +3V3"
leakage = "-1 uA .. 1 uA"
[pin."U1.4"]
kind = "input"
[part."U1"]
kind = "ic"
[part."P1"]
kind = "connector"
[settings."reset-lifts-late-enough"]
hold_time = "5 ms"
"""
RULES = """
[pack]
name = "own"
title = "Own"
[[rule]]
id = "corner"
title = "Corner of the signal's filter"
level = "error"
net = "FLT"
measure = "corner_frequency"
at-most = "200 Hz"
why = "The converter samples slowly."
"""
PLACES = {"places", "origins", "text", "cause"}
"""Keys of the document that hold places, or values as written: ``4k7``, ``4K7``, ``4.7 kΩ``."""


@cache
def document(folder: Path, name: str) -> dict[str, Any]:
    """What is found where the circuit comes in this format."""
    (folder / "rcrules.toml").write_text(PROJECT)
    (folder / "own.toml").write_text(RULES)
    paths = []
    for at, data in enumerate(INPUTS[name]):
        path = folder / f"{name}-{at}.dat"
        path.write_bytes(data if isinstance(data, bytes) else data.encode())
        paths.append(str(path))
    found = run(Job(inputs=tuple(paths), project=str(folder / "rcrules.toml")))
    return cast("dict[str, Any]", json.loads(dumps(found)))


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("one")


@pytest.mark.parametrize("name", INPUTS)
def test_the_circuit_gives_the_same_findings_in_every_format(folder: Path, name: str) -> None:
    found, first = document(folder, name), document(folder, "xml")
    assert {*found} == {*first}
    for what in {*found} - {"inputs", "problems"}:
        assert placeless(found[what]) == placeless(first[what]), what


def test_the_circuit_is_judged(folder: Path) -> None:
    outcomes = {finding["rule"]: finding["outcome"] for finding in document(folder, "xml")["findings"]}
    assert outcomes == {"reset-lifts-late-enough": "fails", "corner": "fails", "reset-lifts-soon-enough": "undecided"}


def placeless(found: object) -> object:
    """A part of a document without files, lines and columns."""
    if isinstance(found, Mapping):
        return {key: placeless(item) for key, item in found.items() if key not in PLACES}
    if isinstance(found, list | tuple):
        return [placeless(item) for item in found]
    return re.sub(r" ?\(?[\w .-]+\.dat(:\d+)*\)?", "", found) if isinstance(found, str) else found
