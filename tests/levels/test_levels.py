"""Voltage levels as texts."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rcrules.levels import Level, parse_level
from rcrules.quantities import QuantityError


def followed(level):
    return [(round(share.nominal, 9), net) for share, net in level.nets]


def test_a_voltage_is_an_offset():
    level = parse_level("1.2 V .. 1.9 V")
    assert (level.offset.low, level.offset.high, level.offset.unit) == (1.2, 1.9, "V")
    assert level.nets == ()


@pytest.mark.parametrize(
    ("text", "nets", "offset"),
    [
        ("30 % of +3V3", [(0.3, "+3V3")], None),
        ("0.3 of +3V3", [(0.3, "+3V3")], None),
        ("+3V3 + 0.3 V", [(1.0, "+3V3")], 0.3),
        ("+3V3 - 0.5 V", [(1.0, "+3V3")], -0.5),
        ("+3V3", [(1.0, "+3V3")], None),
        ("3V3", [(1.0, "3V3")], None),
        ("30 % of Net-(C1-Pad1) - 0.1 V", [(0.3, "Net-(C1-Pad1)")], -0.1),
        ("70 % of /CPU/VDD A", [(0.7, "/CPU/VDD A")], None),
        ("'5 V'", [(1.0, "5 V")], None),
        ('50 % of "VDD of CPU" + 10 mV', [(0.5, "VDD of CPU")], 0.01),
        ("30 % of 'final'", [(0.3, "final")], None),
    ],
)
def test_a_level_may_follow_a_net(text, nets, offset):
    level = parse_level(text)
    assert followed(level) == nets
    assert (level.offset.nominal if level.offset else None) == (pytest.approx(offset) if offset is not None else None)


def test_a_negative_offset_keeps_its_low_end_low():
    level = parse_level("VDD - 0.3 V .. 0.5 V")
    assert (level.offset.low, level.offset.high) == (-0.5, -0.3)


@pytest.mark.parametrize("of", ["final", "step"])
def test_a_level_may_be_a_share_of_the_response_itself(of):
    level = parse_level(f"63 % of {of}")
    assert (level.of, level.fraction.nominal, level.nets) == (of, pytest.approx(0.63), ())


@pytest.mark.parametrize("edge", ["may switch", "must have switched"])
def test_a_level_may_be_an_edge_of_the_fed_pin(edge):
    assert parse_level(f"  {edge.replace(' ', '  ')} ") == Level(text=f"  {edge.replace(' ', '  ')} ", edge=edge)


@pytest.mark.parametrize(
    ("text", "at"),
    [
        ("", 0),
        ("maybe switch", 0),
        ("1.2 W", 0),
        ("24Vin", 2),
        ("30 V of +3V3", 0),
        ("30 % of ", 8),
        ("+3V3 + 0.3 s", 7),
        ("30 % of '3V3", 8),
        ("'3V3' minus 2", 5),
    ],
)
def test_a_mistake_is_told_with_its_place(text, at):
    with pytest.raises(QuantityError) as error:
        parse_level(text)
    assert error.value.at == at
    assert error.value.expected


def test_a_text_without_end_is_refused():
    with pytest.raises(QuantityError, match="too long"):
        parse_level("+3V3 " * 100_000)


@given(st.text(alphabet="0123456789.+-% ofVmfinalstep'\"/()", max_size=24))
def test_any_text_is_a_level_or_a_quantity_error(text):
    try:
        place = parse_level(text) and 0
    except QuantityError as error:
        place = error.at
    assert 0 <= place <= len(text)
