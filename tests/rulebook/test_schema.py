"""The schema and the compiler say the same."""

import json
import re
import subprocess
import sys
import tomllib
from pathlib import Path

import jsonschema
import pytest

from rcrules import rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.measures import registry
from rcrules.rulebook import packs_folder, schema, shipped
from rcrules.rulebook._compile import _RULE
from rcrules.rulebook._keys import EXAMPLE, PACK
from rcrules.rulebook._selection import KEYS
from tests.rulebook.test_extend import BASE

SCHEMA = schema(registry())
VALIDATOR = jsonschema.Draft7Validator(SCHEMA)
BROKEN = sorted((Path(__file__).parent.parent / "messages" / "rulebook").glob("*.toml"))
RULE = SCHEMA["properties"]["rule"]["items"]


def refuses(text: str) -> bool:
    return not VALIDATOR.is_valid(tomllib.loads(text))


def compiles(text: str) -> bool:
    try:
        rulebook.compile_pack(tomlfile.load("team.toml", text), registry())
    except UserMistake:
        return False
    return True


def test_the_schema_is_one():
    jsonschema.Draft7Validator.check_schema(SCHEMA)


@pytest.mark.parametrize("name", shipped())
def test_every_shipped_pack_is_accepted(name):
    data = tomllib.loads((packs_folder() / f"{name}.toml").read_text(encoding="utf-8"))
    assert [error.message for error in VALIDATOR.iter_errors(data)] == []


def test_the_compiler_takes_the_keys_of_the_schema_and_no_others():
    assert set(RULE["properties"]) == set(_RULE)
    assert set(SCHEMA["definitions"]["selection"]["properties"]) == set(KEYS)
    assert set(SCHEMA["properties"]["pack"]["properties"]) == set(PACK)
    assert set(RULE["properties"]["example"]["items"]["properties"]) == set(EXAMPLE)


def test_every_key_says_what_it_means():
    tables = [RULE["properties"], SCHEMA["definitions"]["selection"]["properties"]]
    assert [key for table in tables for key, shape in table.items() if len(shape.get("description", "")) < 10] == []


def test_options_are_those_of_the_measures():
    measured = [item for item in RULE["allOf"] if "measure" in item.get("if", {}).get("properties", ())]
    options = {item["if"]["properties"]["measure"]["const"]: item["then"]["properties"]["with"] for item in measured}
    assert set(options) == set(registry())
    for name, measure in registry().items():
        assert set(options[name]["properties"]) == set(measure.options)


CHANGES = {
    "an unknown key": ('level = "error"', 'level = "error"\nlevl = 3'),
    "an unknown level": ('level = "error"', 'level = "fatal"'),
    "an unknown role": ('role = "low-pass"', 'role = "lowpass"'),
    "an unknown measure": ('measure = "settling_time"', 'measure = "settling"'),
    "an unknown option": ("band", "bund"),
    "an unknown event": ('"step-up"', '"step"'),
    "no id": ('id = "settles"', ""),
    "no level": ('level = "error"', ""),
    "no measure": ('measure = "settling_time"', ""),
    "no limit": ('at-most = "longest"', ""),
    "an id that is no kebab": ('"settles"', '"Settles Now"'),
    "an unknown outcome": ('outcome = "holds"', 'outcome = "good"'),
    "an empty not": ('role = "low-pass"', "not = {}"),
    "a pack without a name": ('name = "base"', ""),
    "a table without by": ('at-most = "longest"', 'at-most = { fast = "1 s" }'),
    "an unknown subject": ('role = "low-pass"', 'subject = "wire"'),
}


@pytest.mark.parametrize("change", CHANGES.values(), ids=CHANGES)
def test_what_one_refuses_the_other_does_too(change):
    assert not refuses(BASE)
    assert compiles(BASE)
    text = BASE.replace(*change, 1)
    assert text != BASE
    assert refuses(text)
    assert not compiles(text)


@pytest.mark.parametrize(
    "keys",
    [
        'measure = "time_constant"\nat-most = "1 s"',
        'measure = "time_constant"\nat-most = { by = "mode", slow = "2 s" }\ngiven = { mode = "ask" }',
        'value = "corner_frequency * 2"\nat-most = "1 kHz"',
        'subject = "capacitor"\nvalue = "dielectric"\none-of = ["C0G"]',
        'every = { subject = "supply pin", has = { kind = "capacitor", within = "the net" } }',
        'measure = "time_constant"\nvalue = ">= 1 uF"\nany-of = [{ net = "A*" }, { part = "C1" }]\nat-most = "1 s"',
        'measure = "time_constant"\nbounds = "nominal"\nequals = "1 s"\nexcept = { sheet = "/a" }',
        'measure = "time_constant"\nmust-meet = 1\nnever = "holds"\nwhen = "supply_high > 1 V"\nat-most = "1 s"',
    ],
)
def test_what_one_takes_the_other_does_too(keys):
    text = f'[pack]\nname = "team"\n[[rule]]\nid = "one"\nlevel = "note"\n{keys}'
    assert compiles(text)
    assert not refuses(text)


def test_an_extending_rule_need_not_say_everything():
    assert not refuses('[pack]\nname = "own"\n[[rule]]\nextends = "settles"\nlevel = "off"')


OF_MEANING = {
    "dielectric-of-resistors", "extends-misspelt", "ids-twice", "kind-that-cannot-be", "limit-a-range",
    "limit-of-another-dimension", "limit-unknown-unit", "limits-crossed", "name-given-never-used",
    "name-nobody-gives", "name-of-two-dimensions", "never-beside-joint-limits", "one-of-numbers-wrong",
    "power-no-quantity", "power-of-power", "power-read-in-two-ways", "power-too-large", "power-without-number",
    "temperature-difference-limit", "temperature-scaled", "temperatures-added", "value-code", "value-decibels",
    "value-deep", "value-dimensions", "value-limit-dimension", "value-many-mistakes", "value-many-signs-wrong",
    "value-no-quantity", "value-option-missing", "value-syntax", "value-too-many-signs", "value-unknown-measure",
    "value-unknown-name", "when-dimension", "when-many-mistakes",
    "when-unknown-fact", "when-word-compared", "when-word-unknown",
    "when-word-without-quotes", "word-unknown-fact",
}  # fmt: skip
"""Broken files whose mistake is one of meaning, which no schema can tell."""


def test_of_the_files_whose_messages_are_kept_it_refuses_all_but_those_of_meaning():
    folder = Path(__file__).parent.parent / "broken_rules"
    texts = {path.stem: path.read_text(encoding="utf-8") for path in folder.glob("*.toml")}
    taken = {name for name, text in texts.items() if not name.startswith("toml-") and not refuses(text)}
    assert taken == OF_MEANING


def test_of_the_broken_files_it_refuses_those_whose_mistake_has_a_shape():
    """Mistakes of meaning (dimensions, units, names that are looked up) are the compiler's alone."""
    found = {path.stem for path in BROKEN if not _toml(path) or refuses(path.read_text(encoding="utf-8"))}
    assert {"all-kinds", "names", "no-pack", "selection"} <= found


def _toml(path: Path) -> bool:
    try:
        tomllib.loads(path.read_text(encoding="utf-8"))
    except tomllib.TOMLDecodeError:
        return False
    return bool(re.match(r"#: ", path.read_text(encoding="utf-8")))


@pytest.mark.parametrize(
    ("tool", "options"), [("tombi", ["lint", "--offline", "--quiet"]), ("taplo", ["lint"])], ids=["tombi", "taplo"]
)
def test_language_servers_of_editors_take_the_packs_and_refuse_what_the_schema_does(tool, options, tmp_path):
    """Source: the checks that two open language servers for TOML make by a schema named in the first line."""
    (tmp_path / "rcrules.schema.json").write_text(json.dumps(SCHEMA), encoding="utf-8")
    texts = {name: (packs_folder() / f"{name}.toml").read_text(encoding="utf-8") for name in shipped()}
    texts["broken"] = BASE.replace('level = "error"', 'level = "fatal"')
    for name, text in texts.items():
        (tmp_path / f"{name}.toml").write_text(f"#:schema ./rcrules.schema.json\n{text}", encoding="utf-8")

    def accepts(*names: str) -> bool:
        command = [str(Path(sys.executable).parent / tool), *options, *(f"{name}.toml" for name in names)]
        return subprocess.run(command, cwd=tmp_path, capture_output=True, timeout=60).returncode == 0

    assert accepts(*shipped())
    assert not accepts("broken")
