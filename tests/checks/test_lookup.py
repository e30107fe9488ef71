from dataclasses import replace
from typing import Any

import pytest

from rcrules.checks._lookup import Found, Missing, look_up
from rcrules.checks._resolve import resolve
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.networks import Contact
from rcrules.project import NetFacts, PartFacts, PinFacts, Project
from rcrules.quantities import Spread
from rcrules.rulebook import Limit
from tests.checks._objects import PLACE, board, rule, spread

RULE = rule(given={"hold_time": spread(0.05, "s")}, given_units={"hold_time": "s"})
PIN = {"U3.NRST": PinFacts(place=PLACE, set={"hold-time": 0.01})}
NET = {"NR*": NetFacts(place=PLACE, set={"hold_time": 0.02})}
PART = {"C1": PartFacts(place=PLACE, set={"hold_time": 0.03})}
SETTINGS = {"late-enough": {"hold_time": 0.04}}


def node() -> Subject:
    return Subjects(board()).of("node")[0]


@pytest.mark.parametrize(
    ("project", "value", "origin"),
    [
        (Project(pins=PIN, nets=NET, parts=PART, settings=SETTINGS), 0.01, '[pin."U3.NRST"]'),
        (Project(nets=NET, parts=PART, settings=SETTINGS), 0.02, '[net."NR*"]'),
        (Project(parts=PART, settings=SETTINGS), 0.03, '[part."C1"]'),
        (Project(settings=SETTINGS), 0.04, '[settings."late-enough"]'),
        (Project(), 0.05, "rule late-enough"),
    ],
)
def test_the_nearest_place_wins(project: Project, value: float, origin: str) -> None:
    assert look_up("hold_time", RULE, node(), board(), project) == Found(value=spread(value, "s"), origin=origin)


def test_a_pin_may_be_named_by_number() -> None:
    facts = {"U3.1": PinFacts(place=PLACE, set={"hold-time": 0.01})}
    parts = board().design.parts
    subject = node()
    named = subject.feeds[0]
    assert parts["U3"].pins[0].key == "U3.1"
    assert named == "U3.NRST"
    found = look_up("hold_time", RULE, _fed("U3.1"), board(), Project(pins=facts))
    assert isinstance(found, Found)


def _fed(pin: str) -> Subject:
    return replace(node(), feeds=(pin,))


def test_a_contact_of_the_network_speaks_for_its_nodes() -> None:
    network = replace(board().networks[0], contacts=(Contact(ref="SW1", a="NRST", b="GND", normally="open"),))
    subject = Subjects(board(networks=(network,))).of("node")[0]
    bounce = Spread(low=0.005, nominal=0.0075, high=0.01, unit="s")
    project = Project(parts={"SW1": PartFacts(place=PLACE, set={"bounce": 0.0075}, spreads={"bounce": bounce})})
    asking = rule(given={"bounce": "ask"}, given_units={"bounce": "s"}, limits=(limit(name="bounce"),))
    assert look_up("bounce", asking, subject, board(), project) == Found(value=bounce, origin='[part."SW1"]')
    assert resolve(asking, subject, board(), project).bounds[0].strict == 0.01


def test_a_name_goes_before_a_glob() -> None:
    pins = {"U*.NRST": PinFacts(place=PLACE, set={"hold-time": 1.0}), **PIN}
    found = look_up("hold_time", RULE, node(), board(), Project(pins=pins))
    assert isinstance(found, Found)
    assert found.value == spread(0.01, "s")


def test_what_is_asked_for_tells_the_line_to_add() -> None:
    asking = rule(given={"hold_time": "ask"}, given_units={"hold_time": "s"})
    found = look_up("hold_time", asking, node(), board(), Project())
    assert found == Missing(
        reason="hold_time is not given",
        ask=('[settings."late-enough"] hold_time = "…"', '[pin."U3.NRST"] set = { hold_time = "…" }'),
    )


def limit(**fields: Any) -> Limit:
    return Limit(**{"kind": "at-least", "text": "", **fields})


def test_the_hardest_end_of_a_limit_counts() -> None:
    wide = Spread(low=1.0, nominal=2.0, high=3.0, unit="s")
    limits = (limit(value=wide), limit(kind="at-most", value=wide))
    case = resolve(rule(limits=limits), node(), board(), Project())
    assert [bound.strict for bound in case.bounds] == [3.0, 1.0]


def test_a_limit_may_be_chosen_by_a_word() -> None:
    table = {"standard": spread(1e-6, "s"), "fast": spread(3e-7, "s")}
    asking = rule(limits=(limit(kind="at-most", table=("mode", table)),), given={"mode": "ask"})
    nets = {"NRST": NetFacts(place=PLACE, set={"mode": "fast"})}
    assert resolve(asking, node(), board(), Project(nets=nets)).bounds[0].strict == 3e-7
    assert resolve(asking, node(), board(), Project()).missing[0].reason == "mode is not given"
    slow = {"NRST": NetFacts(place=PLACE, set={"mode": "slow"})}
    assert "expected standard, fast" in resolve(asking, node(), board(), Project(nets=slow)).missing[0].reason


def test_an_option_may_be_a_name() -> None:
    asking = rule(options={"band": "?settling_band"}, given={"settling_band": "ask"})
    assert resolve(asking, node(), board(), Project()).missing[0].reason == "settling_band is not given"
    given = Project(settings={"late-enough": {"settling_band": 0.01}})
    assert resolve(asking, node(), board(), given).options == {"band": 0.01}
