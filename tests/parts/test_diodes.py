"""What kind of diode a part is, from its words and its standard designation."""

import pytest

from rcrules.design import Design
from rcrules.parts import DiodeModel, diode_model, rate
from rcrules.project import Project
from tests.parts.parts_by_hand import design, part


def model(ref: str, value: str = "", symbol: str = "", description: str = "") -> DiodeModel:
    board: Design = design(part(ref, value, symbol=symbol, description=description))
    return diode_model(rate(board, Project())[ref])


@pytest.mark.parametrize(
    ("ref", "value", "symbol", "kind"),
    [
        ("D1", "1N4148", "D", "silicon diode"),
        ("D1", "LL4148", "board:DIODE", "silicon diode"),
        ("D1", "M7", "DIODE", "silicon diode"),
        ("D1", "1N5819", "D", "Schottky diode"),
        ("D1", "BAT54C", "D_x2_KCom_AAK", "Schottky diode"),
        ("D1", "BAS70", "D", "Schottky diode"),
        ("D1", "BAS16", "D", "silicon diode"),
        ("D1", "D", "Device:D_Schottky", "Schottky diode"),
        ("D1", "red", "LED", "LED"),
        ("LED3", "green", "", "LED"),
        ("D1", "4V7", "device:ZENER", "Zener diode"),
        ("D1", "BZX84C5V1", "D", "Zener diode"),
        ("D1", "D", "D_TVS", "suppressor diode"),
        ("D1", "DIODE", "DIODE", "diode of unknown kind"),
        ("D1", "LEDGER", "D", "diode of unknown kind"),
    ],
)
def test_kinds(ref: str, value: str, symbol: str, kind: str):
    assert model(ref, value, symbol).kind == kind


def test_the_value_tells_before_the_symbol_and_the_description_last():
    assert model("D1", "1N5819", "D_Zener").kind == "Schottky diode"
    assert model("D1", "QX12", "D", "small-signal diode").kind == "silicon diode"


def test_a_kind_not_told_covers_schottky_and_silicon():
    unknown, schottky, silicon = (model("D1", value).drop for value in ("QX12", "1N5819", "1N4148"))
    assert unknown.low <= schottky.low
    assert unknown.high >= silicon.high


@pytest.mark.parametrize(
    ("value", "symbol", "least"),
    [
        ("4V7", "ZENER", 0.9 * 4.7),
        ("BZX84C5V1", "D", 0.9 * 5.1),
        ("ZENER 12 V", "D", 0.9 * 12.0),
        ("ZENER 3,3V", "D", 0.9 * 3.3),
        ("5V0", "D_TVS", 5.0),
        ("SMAJ", "D_TVS", None),
        ("1N4733", "D", None),
    ],
)
def test_breakdown_is_read_from_the_value_of_parts_made_for_it(value: str, symbol: str, least: float | None):
    assert model("D1", value, symbol).breakdown == (None if least is None else pytest.approx(least))


def test_other_diodes_do_not_break_down():
    assert not model("D1", "1N4148 75V").breaks_down
    assert model("D1", "1N4148 75V").breakdown is None
