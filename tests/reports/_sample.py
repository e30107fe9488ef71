"""One document for all reports: every outcome, every odd number and hostile name once."""

import math

from rcrules.findings import Document, Finding, Quantity
from tests.reports._answer import DERIVATION, STATISTICS, response

PLACE = {"file": "gauge.xml", "line": 812}


def finding(**changed: object) -> Finding:
    """A failing reset; changed fields by name."""
    fields = {
        "rule": "reset-lifts-late-enough",
        "title": "Reset stays active until the supply has settled",
        "pack": "power-on-reset",
        "level": "error",
        "outcome": "fails",
        "subject": "node",
        "net": "NRST",
        "parts": ["R12", "C7"],
        "feeds": ["U3.NRST"],
        "measure": "delay",
        "options": {"event": "power-up", "from": "supply valid", "to": "may switch"},
        "measured": Quantity(
            low=0.0219,
            nominal=0.0357,
            high=0.0497,
            unit="s",
            low_case={"C7": 6.188e-06, "R12": 9900.0},
            high_case={"C7": 1.38e-05, "R12": 10100.0},
        ),
        "limit": {"at_least": 0.03, "unit": "s", "text": "", "from": '[settings."reset-lifts-late-enough"]'},
        "margin": -0.0081,
        "margin_case": {"C7": 6.188e-06, "R12": 9900.0},
        "reason": None,
        "ask": [],
        "why": "The controller needs its supply and clock stable before it starts.",
        "source": "the controller's data sheet",
        "places": [PLACE],
        "fingerprint": "0123456789abcdef.fedcba9876543210",
        "assumptions": [],
        "cause": "reset",
        "detail": {
            "side": "at_least",
            "never": False,
            "level_text": "30 % of +3V3",
            "worst": [
                _moved("C7", 6.188e-06, "F", -0.3812, "tolerance -20 %, temperature -15 %, bias -9 %"),
                _moved("R12", 9900.0, "Ω", -0.01, ""),
            ],
        },
    }
    return Finding(**{**fields, **changed})


def answering(**changed: object) -> Finding:
    """The failing reset with its response and derivation; changed fields by name."""
    return finding(**{"derivation": DERIVATION, "response": response(), "statistics": STATISTICS, **changed})


def _moved(name: str, value: float, unit: str, relative: float | None, why: str) -> dict[str, object]:
    return {
        "parameter": name,
        "value": value,
        "unit": unit,
        "relative": relative,
        "why": why,
        "from": "BOM field 'Tol'",
    }


def _asking(net: str, pin: str) -> Finding:
    return finding(
        rule="input-settles-in-window",
        pack="analog-inputs",
        level="warning",
        outcome="undecided",
        net=net,
        parts=["R20", "C21"],
        feeds=[pin],
        measure="settling_time",
        options={"event": "step-up"},
        measured=None,
        limit=None,
        margin=None,
        margin_case={},
        reason="settling_window is not given",
        ask=['[settings."input-settles-in-window"] settling_window = "…"', f'[pin."{pin}"] settling-window = "…"'],
        cause="settling_window is not given",
        detail={},
    )


def _voltage(ref: str, **changed: object) -> Finding:
    fields = {
        "rule": "voltage-within-rating",
        "pack": "capacitor-voltage",
        "subject": "capacitor",
        "net": None,
        "parts": [ref],
        "feeds": [],
        "measure": "voltage_ratio",
        "options": {},
        "measured": Quantity(low=0.0, nominal=1.0, high=1.05, unit="1", high_case={"+48V": 50.4}),
        "limit": {"at_most": 1.0, "unit": "1", "text": "100 %", "from": "rule voltage-within-rating"},
        "margin": -0.05,
        "margin_case": {"+48V": 50.4},
        "cause": "48 V on 48 V",
        "detail": {"side": "at_most", "never": False, "worst": [_moved("+48V", 50.4, "V", 0.05, "")]},
    }
    return finding(**{**fields, **changed})


PROPOSALS = {
    "found": [
        {
            "changes": [{"ref": "R12", "what": "value", "was": "10 kΩ", "now": "15 kΩ", "source": "on the BOM as R31"}],
            "needs": ["R12: ±1 %"],
            "findings": [
                {
                    "rule": "reset-lifts-late-enough",
                    "net": "NRST",
                    "parts": ["R12", "C7"],
                    "outcome": "holds",
                    "measured": {"low": 0.0328, "nominal": 0.0535, "high": 0.0745, "unit": "s"},
                    "margin": 0.0028,
                }
            ],
        }
    ],
    "reason": None,
}
FINDINGS = [
    _asking("AIN0", "U5.AIN0"),
    _asking("AIN1", "U5.AIN1"),
    answering(proposals=PROPOSALS),
    finding(
        rule="reset-lifts-soon-enough",
        level="warning",
        measured=Quantity(
            low=0.05, nominal=0.2, high=math.inf, unit="s", high_case={"U3.NRST leakage": 1e-06}, method="searched"
        ),
        limit={"at_most": 0.5, "unit": "s", "text": "", "from": '[settings."reset-lifts-soon-enough"]'},
        margin=-math.inf,
        margin_case={"U3.NRST leakage": 1e-06},
        cause="",
        detail={"side": "at_most", "never": True, "worst": [_moved("U3.NRST leakage", 1e-06, "A", None, "")]},
    ),
    finding(
        rule="reset-lifts-soon-enough",
        level="warning",
        outcome="undecided",
        net="POR \x1b[2J\u202egnp.exe",
        reason="C9: no tolerance given, 20 % assumed; holds where C9 is at most 1.1 µF",
        ask=['[part."C9"] tolerance = "…"'],
        assumptions=[0],
        detail={
            "side": "at_most",
            "never": False,
            "worst": [],
            "deciding": {
                "parameter": "C9",
                "text": "no tolerance given, 20 % assumed",
                "end": "low",
                "alone": True,
                "flips_at": 1.1e-06,
                "unit": "F",
            },
        },
    ),
    finding(
        rule="stored-energy-bleeds-down",
        pack="stored-energy",
        level="warning",
        outcome="undecided",
        net=None,
        subject="capacitor",
        parts=["C1"],
        feeds=[],
        measure="discharge_time",
        options={"to": "5 V"},
        measured=Quantity(low=math.nan, nominal=math.nan, high=math.nan, unit="s"),
        limit={"at_most": 10.0, "unit": "s", "text": "10 s", "from": "rule stored-energy-bleeds-down"},
        margin=None,
        margin_case={},
        reason="a diode could conduct: D1",
        detail={},
    ),
    _voltage("C1"),
    _voltage("C2"),
    _voltage(
        "C3",
        outcome="holds",
        margin=0.5,
        measured=Quantity(low=0.0, nominal=0.5, high=0.5, unit="1"),
        detail={"side": "at_most", "never": False},
        cause="",
    ),
    _voltage("C7", outcome="waived", margin=-0.05, waiver=0),
]


def _first_of_each_rule() -> list[Finding]:
    return list({item.rule: item for item in reversed(FINDINGS)}.values())


def _rule(item: Finding) -> dict[str, object]:
    met = sum(other.rule == item.rule for other in FINDINGS)
    text = f"for every {item.subject}, the {item.measure} must keep its limit"
    row = {"id": item.rule, "title": item.title, "level": item.level, "text": text}
    return {**row, "met": met, "source": item.source}


DOCUMENT = Document(
    tool="0.1.0",
    board={"name": "harbour gauge", "parts": 214, "nets": 131, "pins": 702, "resistors": 3, "capacitors": 6},
    inputs=[
        {
            "file": "gauge.xml",
            "reader": "xml-netlist",
            "kind": "netlist",
            "sha256": "00" * 32,
            "parts": 214,
            "nets": 131,
            "pins": 702,
        }
    ],
    conditions={
        "temperature": {"low": -20.0, "nominal": 25.0, "high": 60.0, "unit": "degC"},
        "life": {"low": 0.0, "nominal": 0.0, "high": 315576000.0, "unit": "s"},
    },
    parts=[],
    held=[
        {
            "net": "+3V3",
            "kind": "supply",
            "low": 3.2,
            "nominal": 3.3,
            "high": 3.4,
            "unit": "V",
            "given": True,
            "sure": True,
            "evidence": ["project"],
            "joined": None,
        },
        {
            "net": "+48V",
            "kind": "supply",
            "low": 45.6,
            "nominal": 48.0,
            "high": 50.4,
            "unit": "V",
            "given": False,
            "sure": True,
            "evidence": ["name"],
            "joined": None,
        },
        {
            "net": "GND",
            "kind": "ground",
            "low": 0.0,
            "nominal": 0.0,
            "high": 0.0,
            "unit": "V",
            "given": False,
            "sure": True,
            "evidence": ["name"],
            "joined": None,
        },
        {
            "net": "LEVEL_IN",
            "kind": "driven",
            "low": None,
            "nominal": None,
            "high": None,
            "unit": "V",
            "given": False,
            "sure": False,
            "evidence": ["connector J1 alone"],
            "joined": None,
        },
    ],
    packs=[
        {
            "name": name,
            "title": name,
            "file": f"{name}.toml",
            "needs_facts": True,
            "caution": "A calculation is not a measurement." if name == "stored-energy" else "",
            "rules": [_rule(item) for item in _first_of_each_rule() if item.pack == name],
        }
        for name in ("analog-inputs", "capacitor-voltage", "power-on-reset", "stored-energy")
    ],
    networks=[
        {
            "id": "NRST",
            "branches": [{"part": "C7", "nets": ["NRST", "GND"]}, {"part": "R12", "nets": ["+3V3", "NRST"]}],
            "nodes": [
                {
                    "net": "NRST",
                    "role": "power-on-delay",
                    "certainty": "sure",
                    "evidence": ["R12 to +3V3, C7 to GND"],
                    "parts": ["R12", "C7"],
                    "fed_from": ["+3V3"],
                    "feeds": ["U3.NRST"],
                    "quantities": {
                        "time_constant": {
                            "low": 0.0613,
                            "nominal": 0.1,
                            "high": 0.1394,
                            "unit": "s",
                            "low_case": {"C7": 6.188e-06, "R12": 9900.0},
                            "high_case": {"C7": 1.38e-05, "R12": 10100.0},
                            "method": "proved",
                        }
                    },
                    "unmeasured": {},
                },
                {
                    "net": "FB",
                    "role": "feedback",
                    "certainty": "unsure",
                    "evidence": [],
                    "parts": ["R20", "C21"],
                    "fed_from": [],
                    "feeds": [],
                    "quantities": {},
                    "unmeasured": {"time_constant": "active network"},
                },
            ],
        }
    ],
    findings=FINDINGS,
    coverage={
        "not_fitted": 1,
        "unreadable": 1,
        "judged": 5,
        "undecided": 2,
        "unruled": 0,
        "decoupling": 0,
        "elsewhere": 0,
    },
    assumptions=[{"about": "C9", "text": "no tolerance given, 20 % assumed", "ask": '[part."C9"] tolerance = "…"'}],
    waivers=[
        {
            "rule": "voltage-within-rating",
            "net": None,
            "part": "C7",
            "reason": "the surge is limited by the supply, measured on three boards",
            "who": "analogue team",
            "date": "2026-03-01",
            "expires": "2027-03-01",
            "state": "used",
            "told": [],
            "place": {"file": "waivers.toml", "line": 3},
        }
    ],
    problems=[
        {
            "place": {"file": "gauge-bom.csv", "line": 14, "column": 5},
            "text": "C7: value 10uF of the BOM, 1uF of the netlist",
        },
        {"place": {}, "text": "pulse-survives meets nothing on this board"},
    ],
)


def _part(ref: str, text: str, value: float | None, coverage: str, **changed: object) -> dict[str, object]:
    return {
        "ref": ref,
        "kind": "capacitor" if ref.startswith("C") else "resistor",
        "text": text,
        "value": value,
        "low": value and float(f"{0.9 * value:.12g}"),
        "high": value and float(f"{1.1 * value:.12g}"),
        "unit": "F" if ref.startswith("C") else "Ω",
        "rated_voltage": None,
        "rated_power": None,
        "dielectric": None,
        "fitted": coverage != "not_fitted",
        "origins": {"value": {"from": "BOM value", "file": "gauge-bom.csv", "line": 14, "column": None}},
        "shares": [{"name": "tolerance", "low": -0.1, "high": 0.1, "given": True, "from": "10 % from BOM field 'Tol'"}],
        "why_unknown": None if value else "not understood",
        "coverage": coverage,
        "reason": None,
        **changed,
    }


DOCUMENT.parts.extend(
    [
        _part("C1", "100uF 48V", 1e-4, "judged", rated_voltage=48.0),
        _part("C2", "100uF 48V", 1e-4, "judged", rated_voltage=48.0),
        _part("C3", "100nF", 1e-7, "judged"),
        _part("C7", "10uF 16V", 1e-5, "judged"),
        _part("C21", "1nF", 1e-9, "undecided"),
        _part("C44", "DNP?", None, "unreadable"),
        _part("R12", "10k", 1e4, "judged"),
        _part("R20", "1k", 1e3, "undecided"),
        _part("R31", "15k", 1.5e4, "not_fitted"),
    ]
)
