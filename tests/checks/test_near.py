"""Which keys leave a subject out."""

import pytest

from rcrules.checks._near import excluded
from rcrules.checks._subjects import Subjects
from rcrules.quantities import Spread
from rcrules.rulebook import Comparison, Selection
from tests.checks._objects import board


def keys(kind: str, **selection: object) -> list[str]:
    return [item.key for item in excluded(Selection(**selection), Subjects(board()).of(kind)[0], board())]


@pytest.mark.parametrize(
    ("kind", "selection", "wanted"),
    [
        ("node", {}, []),
        ("node", {"role": ("snubber",)}, ["role"]),
        ("node", {"role": ("snubber",), "net": ("B*",)}, ["role", "net"]),
        ("node", {"name": ("BURST",)}, ["name"]),
        ("node", {"certainty": ("unsure",), "kind_fed": ("adc",)}, ["kind-fed", "certainty"]),
        ("capacitor", {"dielectric": ("C0G",)}, ["dielectric"]),
        ("capacitor", {"value_at_least": Spread(low=1.0, nominal=1.0, high=1.0, unit="F")}, ["value"]),
        ("node", {"when": Comparison(left="supply_high", right=9.0, sign=">=")}, ["when"]),
        ("node", {"any_of": (Selection(net=("X",)), Selection(net=("Y",)))}, ["any-of"]),
        ("node", {"exclude": (Selection(net=("NRST",)),)}, ["not"]),
    ],
)
def test_the_keys_that_leave_a_subject_out(kind, selection, wanted):
    assert keys(kind, **selection) == wanted
