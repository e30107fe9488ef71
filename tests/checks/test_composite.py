"""What is proved of a value's slopes is true of the value."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules.checks._composite import Composite, Posed
from rcrules.engine import Shape
from rcrules.expressions import Call, calls, parse_expression
from rcrules.measures import Measure, Theory
from rcrules.problems import Structure
from rcrules.quantities import QuantityError

EMPTY = Structure(shape=Shape(0, 0, (), ()), ohms=(), farads=(), waveforms=())
LOW, HIGH = np.array([1.0, 3.0]), np.array([2.0, 5.0])
MEASURES = {
    "rising": (lambda a, _: a**2, (1, 0)),
    "falling": (lambda a, _: 10.0 / a, (-1, 0)),
    "other": (lambda _, b: b, (0, 1)),
    "both": (lambda a, b: b * (2.0 + np.sin(7 * a)), (None, 1)),
}


def measure(name: str) -> Measure:
    work_out, signs = MEASURES[name]
    return Measure(
        name=name,
        subject="node",
        unit="1",
        summary="",
        compute=lambda _, cases: work_out(cases[:, 0], cases[:, 1]),
        theory=lambda *_: Theory(signs=signs),
    )


def composite(text: str) -> Composite:
    mistakes: list[QuantityError] = []
    tree = parse_expression(text, mistakes)
    assert not mistakes
    own: list[Call] = [item for item in calls(tree) if item.name in MEASURES]
    posed = tuple(Posed(call=item, structure=EMPTY, measure=measure(item.name), columns=(0, 1)) for item in own)
    return Composite(expression=tree, posed=posed, constants=(("k", -2.0),), columns=(), counts=())


@pytest.mark.parametrize(
    ("text", "signs"),
    [
        ("rising() - falling()", (1, 0)),
        ("rising() + falling()", (None, 0)),
        ("other() - rising()", (-1, 1)),
        ("2 * rising()", (1, 0)),
        ("k * rising()", (-1, 0)),
        ("rising() / 3", (1, 0)),
        ("3 / rising()", (None, None)),
        ("-(falling() + 2)", (1, 0)),
        ("max(rising(), other())", (1, 1)),
        ("sqrt(falling())", (-1, 0)),
        ("both() + other()", (None, 1)),
        ("rising() * other()", (None, None)),
        ("falling()^3", (-1, 0)),
        ("falling()^2", (None, None)),
    ],
)
def test_signs_follow_from_those_of_the_measures(text, signs):
    assert composite(text).theory(EMPTY, LOW, HIGH).signs == signs


TEXTS = st.recursive(
    st.sampled_from([*(f"{name}()" for name in MEASURES), "2", "0.5", "k"]),
    lambda inner: st.one_of(
        st.tuples(inner, st.sampled_from("+-*/"), inner).map(lambda item: f"({item[0]} {item[1]} {item[2]})"),
        st.tuples(st.sampled_from(["min", "max"]), inner, inner).map(lambda item: f"{item[0]}({item[1]}, {item[2]})"),
        inner.map(lambda item: f"-({item})"),
        st.tuples(inner, st.sampled_from(["2", "3", "-1", "(1/2)"])).map(lambda item: f"({item[0]})^{item[1]}"),
    ),
    max_leaves=6,
)


@settings(max_examples=200, deadline=None)
@given(TEXTS)
def test_no_claim_is_false(text):
    found = composite(text)
    rng = np.random.default_rng(0)
    cases = rng.uniform(LOW, HIGH, size=(40, 2))
    here = found.compute(EMPTY, cases)
    for column, sign in enumerate(found.theory(EMPTY, LOW, HIGH).signs):
        moved = cases.copy()
        moved[:, column] = rng.uniform(cases[:, column], HIGH[column])
        with np.errstate(invalid="ignore"):  # from infinite to infinite is no step
            step = found.compute(EMPTY, moved) - here
        slack = 1e-9 * np.abs(here) + 1e-12
        fine = ~np.isfinite(step)
        if sign is not None:
            assert np.all(fine | (sign * step >= -slack if sign else np.abs(step) <= slack)), (text, column, sign)
