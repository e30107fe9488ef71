import copy
import json
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path as Folder
from typing import Any

import jsonschema
import pytest

from rcrules.errors import UserMistake
from rcrules.findings import dumps, loads, schema_text
from rcrules.pipeline import Job, run
from tests.cli._board import NETLIST
from tests.reports._sample import DOCUMENT, answering

SAVED: Any = json.loads(dumps(DOCUMENT))
FREE = ("origins", "options", "low_case", "high_case", "margin_case", "quantities", "unmeasured", "detail", "deciding")
"""Objects whose keys differ from case to case."""
OPTIONAL = ("line", "column", "at_least", "at_most")
Path = tuple[str | int, ...]


@pytest.fixture(scope="module")
def validator() -> jsonschema.Draft202012Validator:
    schema = json.loads(schema_text())
    jsonschema.Draft202012Validator.check_schema(schema)
    return jsonschema.Draft202012Validator(schema)


def paths(value: Any, at: Path = ()) -> Iterator[Path]:
    """The path of every member of every object and list, of lists the first."""
    members = value.items() if isinstance(value, dict) else enumerate(value[:1]) if isinstance(value, list) else ()
    for key, item in members:
        yield (*at, key)
        yield from paths(item, (*at, key))


def damaged(path: Path, new: object = None, *, drop: bool = False) -> Any:
    """The sample with the member at the path replaced or left out."""
    document = copy.deepcopy(SAVED)
    inner = document
    for key in path[:-1]:
        inner = inner[key]
    if drop:
        del inner[path[-1]]
    else:
        inner[path[-1]] = new
    return document


def refused(document: object) -> bool:
    """Whether reading the document complains."""
    try:
        loads(json.dumps(document), "old.json")
    except UserMistake:
        return True
    return False


def test_a_saved_document_is_valid(validator: jsonschema.Draft202012Validator) -> None:
    assert [f"{list(error.path)}: {error.message}" for error in validator.iter_errors(SAVED)] == []


COMPARED: Any = {
    "board": "harbour gauge",
    "tool": "0.1.0",
    "share": 0.1,
    "findings": [
        {
            "change": "broke",
            "rule": "reset-lifts-late-enough",
            "net": "NRST",
            "parts": ["R12", "C7"],
            "was": {key: SAVED["findings"][6][key] for key in ("outcome", "level", "measured", "limit")},
            "now": None,
            "causes": ["C7 10 µF → 4.7 µF"],
            "finding": 2,
        }
    ],
    "networks": {"added": ["AIN2"], "removed": []},
    "changes": [{"about": "C7", "what": "value", "was": "10 µF", "now": "4.7 µF"}],
}


def keys_met(value: Any, schema: Any, whole: Any, met: dict[int, set[str]]) -> None:
    """Note, for each object of the schema, which of its keys the value has."""
    if "$ref" in schema:
        schema = whole["$defs"][schema["$ref"].rpartition("/")[2]]
    for choice in schema.get("anyOf", ()):
        keys_met(value, choice, whole, met)
    if isinstance(value, dict) and "properties" in schema:
        met.setdefault(id(schema), set()).update(set(value) & set(schema["properties"]))
        for key in set(value) & set(schema["properties"]):
            keys_met(value[key], schema["properties"][key], whole, met)
    elif isinstance(value, dict) and isinstance(schema.get("additionalProperties"), dict):
        for item in value.values():
            keys_met(item, schema["additionalProperties"], whole, met)
    elif isinstance(value, list) and "items" in schema:
        for item in value:
            keys_met(item, schema["items"], whole, met)


def objects(schema: Any) -> Iterator[Any]:
    """Every object with named keys of the schema."""
    if isinstance(schema, dict):
        if isinstance(schema.get("properties"), dict) and "type" in schema:
            yield schema
        for item in schema.values():
            yield from objects(item)
    elif isinstance(schema, list):
        for item in schema:
            yield from objects(item)


def test_every_key_of_the_schema_occurs(validator: jsonschema.Draft202012Validator) -> None:
    """The schema names nothing that no document holds."""
    derived = json.loads(dumps(replace(DOCUMENT, findings=[answering()])))["findings"]
    document = {**SAVED, "comparison": COMPARED, "findings": [*SAVED["findings"], *derived]}
    assert [error.message for error in validator.iter_errors(document)] == []
    schema = json.loads(schema_text())
    met: dict[int, set[str]] = {}
    keys_met(document, schema, schema, met)
    missing = [set(item["properties"]) - met.get(id(item), set()) for item in objects(schema)]
    assert [names for names in missing if names] == []


def test_what_a_run_writes_is_valid(
    tmp_path: Folder, monkeypatch: pytest.MonkeyPatch, validator: jsonschema.Draft202012Validator
) -> None:
    """Also where a remark stands at no place of an input."""
    (tmp_path / "board.xml").write_text(NETLIST.replace(" 16V", ""))
    monkeypatch.chdir(tmp_path)
    document = json.loads(dumps(run(Job(inputs=("board.xml",)))))
    assert [f"{list(error.path)}: {error.message}" for error in validator.iter_errors(document)] == []
    assert any(item["place"] == {} for item in document["problems"])


@pytest.mark.parametrize("path", list(paths(SAVED)), ids=lambda path: ".".join(map(str, path)))
def test_what_is_damaged_is_refused(path: Path, validator: jsonschema.Draft202012Validator) -> None:
    """No member may be of another type; none may be missing where the keys are fixed."""
    assert not validator.is_valid(damaged(path, [[]]))
    assert refused(damaged(path, [[]]))
    if isinstance(path[-1], str) and not set(path[-2:-1]) & set(FREE):
        without = damaged(path, drop=True)
        assert refused(without) != validator.is_valid(without)
        assert refused(without) or path[-1] in OPTIONAL


@pytest.mark.parametrize(
    ("path", "new", "message"),
    [
        (("findings", 0, "outcome"), "passes", r'document.findings\[0\].outcome: expected "fails" or'),
        (("findings", 0, "verdict"), "fails", r"document.findings\[0\]: unknown key 'verdict'"),
        (("findings", 2, "measured", "low"), "low", r"document.findings\[2\].measured.low: expected"),
        (("board", "parts"), -1, "document.board.parts: expected 0 or more"),
        (("board", "parts"), True, "document.board.parts: expected integer"),
        (("problems", 0, "place"), {"line": 1}, r"document.problems\[0\].place: "),
        (("networks", 0, "branches", 0, "nets"), ["A"], r"nets: expected 2 items"),
    ],
)
def test_the_message_tells_where(
    path: Path, new: object, message: str, validator: jsonschema.Draft202012Validator
) -> None:
    assert not validator.is_valid(damaged(path, new))
    with pytest.raises(UserMistake, match=message):
        loads(json.dumps(damaged(path, new)), "old.json")
