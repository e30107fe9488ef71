import json
import math
from dataclasses import replace

import pytest

from rcrules.errors import UserMistake
from rcrules.findings import dumps, loads, settled
from tests.reports._sample import DOCUMENT, finding

KEYS = (
    "rcrules tool board inputs conditions parts held packs networks findings assumptions coverage waivers problems "
    "comparison"
)


def test_what_is_saved_reads_back_the_same() -> None:
    assert loads(dumps(DOCUMENT)) == DOCUMENT


def test_saving_twice_gives_the_same_bytes() -> None:
    assert dumps(loads(dumps(DOCUMENT))) == dumps(DOCUMENT)


def test_every_key_is_always_there() -> None:
    assert set(json.loads(dumps(DOCUMENT))) == set(KEYS.split())
    assert json.loads(dumps(DOCUMENT))["rcrules"] == 1


def test_floats_carry_twelve_significant_digits() -> None:
    document = replace(DOCUMENT, findings=[finding(margin=1 / 3)])
    assert json.loads(dumps(document))["findings"][0]["margin"] == 0.333333333333
    assert settled(document).findings[0].margin == 0.333333333333


def test_infinity_is_a_text_and_not_a_number_is_null() -> None:
    measured = replace(finding().measured, low=-math.inf, nominal=math.nan, high=math.inf)
    saved = dumps(replace(DOCUMENT, findings=[finding(measured=measured, margin=-math.inf)]))
    found = json.loads(saved)["findings"][0]
    assert (found["measured"]["low"], found["measured"]["nominal"], found["measured"]["high"]) == ("-inf", None, "inf")
    back = loads(saved).findings[0]
    assert back.margin == -math.inf
    assert back.measured.high == math.inf
    assert math.isnan(back.measured.nominal)


def test_a_net_named_inf_stays_a_name() -> None:
    document = replace(DOCUMENT, findings=[finding(net="inf", margin_case={"inf": math.inf})])
    assert loads(dumps(document)) == document


def test_negative_zero_is_zero() -> None:
    assert '"margin": 0.0' in dumps(replace(DOCUMENT, findings=[finding(margin=-0.0)]))


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("{", "not JSON"),
        ("[]", "not a findings document"),
        ("{}", "no key 'rcrules'"),
        (dumps(DOCUMENT).replace('"rcrules": 1', '"rcrules": 99', 1), "schema number 1"),
        (dumps(DOCUMENT).replace('"rule": ', '"rule_of": '), "another shape"),
        ("[" * 100_000, "not JSON"),
    ],
)
def test_what_is_no_saved_document_is_refused(text: str, message: str) -> None:
    with pytest.raises(UserMistake, match=message):
        loads(text, "old.json")


def test_a_settled_document_is_what_reads_back() -> None:
    measured = replace(finding().measured, low=1 / 3, nominal=math.nan, high=math.inf)
    document = replace(DOCUMENT, findings=[finding(measured=measured, margin=2 / 3, margin_case={"R1": -0.0})])
    assert settled(document) != document
    assert settled(document) == loads(dumps(document))


def test_a_changed_copy_of_a_settled_document_is_settled_anew() -> None:
    document = replace(settled(DOCUMENT), findings=[finding(margin=1 / 3)])
    assert json.loads(dumps(document))["findings"][0]["margin"] == 0.333333333333


def test_what_could_steer_a_terminal_is_written_as_an_escape() -> None:
    document = replace(DOCUMENT, findings=[finding(net="A\u202eB\x9b2J\x1b[2J\ud800\U000e0041 Ω")])
    text = dumps(document)
    assert r'"A\u202eB\u009b2J\u001b[2J\ud800\udb40\udc41 Ω"' in text
    assert loads(text).findings[0].net == document.findings[0].net
