"""All that a document can keep of how the number of a finding comes about."""

import math
from typing import Final

from rcrules.findings import Json

TIMES: Final = [round(0.01 * index, 9) for index in range(-1, 24)]


STATISTICS: Final[Json] = {
    "samples": 1000,
    "seed": 1,
    "failing": 31,
    "fraction": {"low": 0.0219, "nominal": 0.031, "high": 0.0437},
    "quantiles": {"low": 0.0225, "nominal": 0.0356, "high": 0.049},
    "root_sum_square": {"low": 0.0227, "high": 0.0488},
    "distributions": ["normal", "uniform"],
}


def curve(tau: float, volts: float) -> list[float]:
    """v(t) = V (1 - exp(-t / tau)) (hand derivation)."""
    return [round(volts * (1 - math.exp(-max(time, 0.0) / tau)), 9) for time in TIMES]


def response(**changed: object) -> Json:
    """Of an R·C of 100 ms to 3.3 V."""
    return {
        "unit": "V",
        "time": TIMES,
        "nominal": curve(0.1, 3.3),
        "low_case": curve(0.06, 3.4),
        "high_case": curve(0.14, 3.2),
        "thresholds": [{"name": "may switch", "low": 0.96, "nominal": 0.99, "high": 1.02}],
        "limit": {"at_least": 0.03, "at_most": 0.5},
        "crossing": {"low": 0.0219, "nominal": 0.0357, "high": 0.0497},
        **changed,
    }


def _step(symbol: str, formula: str, put_in: str, text: str, note: str = "") -> Json:
    return {"symbol": symbol, "formula": formula, "put_in": put_in, "text": text, "note": note}


def _case(name: str, value: float, off: list[str]) -> Json:
    steps = [
        _step("R12", "", "", "10 kΩ", "from the BOM"),
        _step("C7", "", "", "10 µF", "from the BOM"),
        _step("tau", "R12 · C7", "10 kΩ · 10 µF", "100 ms"),
        _step("v", "+3V3 · (1 - exp(-t / tau))", "3.3 V · (1 - exp(-t / 100 ms))", "0.99 V", "at the level"),
        _step("t", "tau · ln(+3V3 / (+3V3 - v))", "100 ms · ln(3.3 V / (3.3 V - 0.99 V))", "35.7 ms"),
    ]
    return {"case": name, "value": value, "by_hand": True, "off": off, "steps": steps}


def _parameter(name: str, nominal: float, unit: str, share: float | None, *, given: bool = True) -> Json:
    spread = {"low": 0.9 * nominal, "nominal": nominal, "high": float(f"{1.1 * nominal:.12g}"), "unit": unit}
    moves = {"to_low": -0.003, "to_high": 0.003, "share": share, "given": given, "from": "BOM field 'Tol'"}
    return {"parameter": name, **spread, **moves}


def _arm(ref: str, kind: str, value: float, unit: str) -> Json:
    return {"ref": ref, "kind": kind, "value": value, "unit": unit}


DERIVATION: Final[Json] = {
    "measure": "delay",
    "summary": "Time from the event until the voltage reaches a level.",
    "picture": [
        {"node": "+3V3", "seen": False, "branches": [], "down": [_arm("R12", "resistor", 1e4, "Ω")], "drawn": []},
        {
            "node": "NRST",
            "seen": True,
            "branches": [{**_arm("C7", "capacitor", 1e-05, "F"), "to": "0 V"}],
            "down": [],
            "drawn": ["U3.NRST leakage"],
        },
    ],
    "sources": [
        {"net": "+3V3", "low": 3.2, "nominal": 3.3, "high": 3.4, "before": 0.0, "way": [[0.0, 0.0], [0.00125, 3.3]]}
    ],
    "voltages": [{"net": "NRST", "before": 0.0, "start": 0.0, "final": 3.3}],
    "modes": [{"tau": 0.1, "share": 1.0}],
    "cases": [
        _case("nominal", 0.0357, []),
        _case("lowest", 0.0219, ["C7 6.188 µF", "R12 9.9 kΩ"]),
        _case("highest", 0.0497, ["C7 13.8 µF", "R12 10.1 kΩ"]),
    ],
    "parameters": [
        _parameter("C7", 1e-05, "F", 0.75),
        _parameter("R12", 1e4, "Ω", 0.25, given=False),
        _parameter("U3.NRST leakage", 0.0, "A", 0.0),
    ],
}
