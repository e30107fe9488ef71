"""A small board in text, for tests of the whole command."""

from pathlib import Path

NETLIST = """<?xml version="1.0" encoding="UTF-8"?>
<export version="D">
  <components>
    <comp ref="R1"><value>10k 1%</value></comp>
    <comp ref="C1"><value>1uF 10% 16V</value></comp>
    <comp ref="C2"><value>100nF 10% 16V</value></comp>
    <comp ref="U1"><value>QX7301</value></comp>
    <comp ref="U2"><value>QX7302</value></comp>
  </components>
  <nets>
    <net code="1" name="+3V3">
      <node ref="R1" pin="1"/><node ref="C2" pin="1"/>
      <node ref="U1" pin="1" pinfunction="VDD" pintype="power_in"/>
      <node ref="U2" pin="1" pinfunction="VOUT" pintype="power_out"/>
    </net>
    <net code="2" name="NRST">
      <node ref="R1" pin="2"/><node ref="C1" pin="1"/>
      <node ref="U1" pin="2" pinfunction="NRST" pintype="input"/>
    </net>
    <net code="3" name="GND">
      <node ref="C1" pin="2"/><node ref="C2" pin="2"/>
      <node ref="U1" pin="3" pinfunction="GND" pintype="power_in"/>
      <node ref="U2" pin="3" pinfunction="GND" pintype="power_in"/>
    </net>
  </nets>
</export>
"""

PROJECT = """[board]
name    = "small board"
netlist = "board.xml"
rules   = ["our-rules.toml"]

[conditions]
temperature = "20 degC .. 30 degC"

[supply."+3V3"]
voltage = "3.3 V"
"""

RULES = """[pack]
name  = "our-rules"
title = "Rules of our team"

[[rule]]
id       = "reset-slow-enough"
title    = "The reset node is slow enough"
level    = "error"
role     = ["power-on-delay"]
measure  = "time_constant"
at-least = "{limit}"
why      = "Told by the test."
source   = "the test"
"""


def write_board(folder: Path, limit: str = "1 ms") -> Path:
    """Netlist, project file and rules; the project file's path."""
    (folder / "board.xml").write_text(NETLIST, encoding="utf-8")
    (folder / "our-rules.toml").write_text(RULES.format(limit=limit), encoding="utf-8")
    project = folder / "rcrules.toml"
    project.write_text(PROJECT, encoding="utf-8")
    return project
