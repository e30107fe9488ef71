"""The engine's docstrings name every number that goes in, with its unit."""

import dataclasses
import inspect
import re

import pytest

from rcrules import engine

FUNCTIONS = [engine.solve, engine.transfer, engine.corner, engine.bounds, engine.search]
CLASSES = [engine.Modes, engine.Response, engine.Signal, engine.Drive]


METHODS = [
    item
    for kind in CLASSES
    for name, item in vars(kind).items()
    if inspect.isfunction(item) and not name.startswith("_")
]


@pytest.mark.parametrize("function", [*FUNCTIONS, *METHODS], ids=lambda function: function.__qualname__)
def test_every_array_and_number_is_named_with_its_unit(function):
    text = inspect.getdoc(function) or ""
    for name, parameter in inspect.signature(function).parameters.items():
        if parameter.annotation is not inspect.Parameter.empty and re.search(r"Array|float", str(parameter.annotation)):
            if "Callable" in str(parameter.annotation):
                continue
            found = re.search(rf"^\s*{name}: .*?\[[^\]]+\]", text, re.MULTILINE)
            assert found, f"{function.__qualname__}: {name} has no unit"


@pytest.mark.parametrize("kind", [engine.Drive], ids=lambda kind: kind.__name__)
def test_every_array_field_is_documented_with_its_unit(kind):
    source = inspect.getsource(kind)
    for field in dataclasses.fields(kind):
        assert re.search(rf"{field.name}: Array\n\s+\"\"\".*\[[^\]]+\]", source), field.name


def test_what_comes_out_has_a_unit_too():
    for function in [*FUNCTIONS, *METHODS]:
        if str(inspect.signature(function).return_annotation).endswith("float64]]"):
            assert re.search(r"\[[^\]]+\]", inspect.getdoc(function) or ""), function.__qualname__


def test_the_door_offers_what_it_says():
    for name in engine.__all__:
        assert hasattr(engine, name)
        assert name in (engine.__doc__ or "") or name == "Array"
