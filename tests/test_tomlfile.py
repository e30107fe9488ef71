"""TOML files with the place of every key and value."""

import json
import tomllib
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rcrules import tomlfile
from rcrules.errors import UserMistake


def items(data: Any, path: tomlfile.Path = ()) -> Iterator[tuple[tomlfile.Path, Any]]:
    """Every key and element of the data with its path, without recursion."""
    stack = [(path, data)]
    while stack:
        path, data = stack.pop()
        inner = data.items() if isinstance(data, dict) else enumerate(data) if isinstance(data, list) else ()
        for step, value in inner:
            yield (*path, step), value
            stack.append(((*path, step), value))


def message(text: str) -> str:
    with pytest.raises(UserMistake) as caught:
        tomlfile.load("a.toml", text)
    return str(caught.value)


DOCUMENTS = [
    "",
    "a = 1",
    'a.b.c = 1\na.b."d e" = 2 # a = 3',
    "[x]\ny = 1\n[x.z]\n'w.v' = 2\n[x.z.u]",
    "[a.b.c]\nd = 1\n[a]\ne = 2",
    '[[r]]\nid = "one"\n[r.s]\nt = 1\n[[r]]\n[[r.e]]\nn = 1\n[[r.e]]\nn = 2\n[r.e.deep]\nm = 3',
    "a = [1, [2, [], {}], {b = [3], c.d = 4}, # ]\n  5,\n]",
    "a = []\nb = {}\nc = [\n]\n",
    'a = """x\n[[no]]\nk = 1\\\\"""\nb = 2',
    'a = """"""\nb = """"q""""\nc = \'\'\'\'\'\'\'\'\nd = 1'.replace("'" * 8, "'" * 6),
    "a = '''x\n\"\"\"\n# no'''\nb = 2",
    r'a = "x\"]#" # c' + "\nb = ['}', \"{\"]",
    r'"q\u0041\"" = 1' + "\n\"\" = 2\n'' .x = 3".replace("'' .x", "'e' . x"),
    "t = 1979-05-27 07:32:00\nu = [1979-05-27T07:32:00Z, 07:32:00, 1979-05-27 00:00:00.5-07:00]",
    "f = 1e3\ng = -inf\nh = [nan, +1_000, 0xFF]\n",
    "a = 1\r\nb = [1,\r\n2]\r\n[c]\r\n",
    "\ufeffa = 1",
    "  [ a . 'b' ]  # x\n\tk\t=\t1",
    "1.2 = 3\n-x = true\n",
]


@pytest.mark.parametrize("text", DOCUMENTS)
def test_every_key_and_element_has_a_place(text):
    file = tomlfile.load("a.toml", text)
    paths = {path for path, _ in items(file.data)}
    assert set(file.values) == set(file.spans) == paths
    assert set(file.keys) == {path for path in paths if isinstance(path[-1], str)}


def scalars() -> st.SearchStrategy[Any]:
    letters = st.text(st.characters(codec="utf-8", exclude_categories=["Cs", "Cc"]), max_size=6)
    marks = st.sampled_from(["#", "]", "}", '"', "'", "a.b", "\n", "\\"])
    return st.integers(-99, 99) | st.booleans() | letters | marks


def trees() -> st.SearchStrategy[dict[str, Any]]:
    keys = st.sampled_from(["a", "b-c", "d.e", "", "ф", 'q"', "[x]", "#"])
    values = st.recursive(
        scalars(), lambda inner: st.lists(inner, max_size=3) | st.dictionaries(keys, inner, max_size=3), max_leaves=8
    )
    return st.dictionaries(keys, values, max_size=4)


def inline(value: Any) -> str:
    if isinstance(value, dict):
        return "{" + ", ".join(f"{json.dumps(key)} = {inline(item)}" for key, item in value.items()) + "}"
    if isinstance(value, list):
        return "[" + "".join(f"{inline(item)},\n # ], \n" for item in value) + "]" if _flat(value) else _one_line(value)
    return json.dumps(value, ensure_ascii=False)


def _flat(value: list[Any]) -> bool:
    return not any(isinstance(item, dict | list) for item in value)


def _one_line(value: list[Any]) -> str:
    return "[" + ",".join(inline(item) for item in value) + "]"


def document(data: dict[str, Any], draw_header: list[bool]) -> str:
    """Plain values first, then tables under headers or inline as the flags say."""
    plain, tables = [], []
    for number, (key, value) in enumerate(data.items()):
        headed = draw_header[number % len(draw_header)]
        if headed and isinstance(value, dict):
            body = "\n".join(f"{json.dumps(k)}={one_line(v)}" for k, v in value.items())
            tables.append(f"[{json.dumps(key)}]\n{body}")
        elif headed and isinstance(value, list) and value and all(isinstance(item, dict) for item in value):
            for item in value:
                body = "\n".join(f"{json.dumps(k)} = {one_line(v)}" for k, v in item.items())
                tables.append(f"[[ {json.dumps(key)} ]] # one\n{body}")
        else:
            plain.append(f"{json.dumps(key)} = {one_line(value)}")
    return "\n".join(plain + tables) + "\n"


def one_line(value: Any) -> str:
    """Inline tables take no line breaks in TOML 1.0."""
    return inline(value) if isinstance(value, list) and _flat(value) else inline_flat(value)


def inline_flat(value: Any) -> str:
    if isinstance(value, dict):
        return "{" + ", ".join(f"{json.dumps(key)}={inline_flat(item)}" for key, item in value.items()) + "}"
    if isinstance(value, list):
        return "[" + ", ".join(inline_flat(item) for item in value) + "]"
    return json.dumps(value, ensure_ascii=False)


@settings(max_examples=150, deadline=None)
@given(trees(), st.lists(st.booleans(), min_size=1, max_size=4))
def test_places_point_at_what_the_data_holds(data, flags):
    """Each value's piece of text, read by itself, is the value in the data."""
    text = document(data, flags)
    file = tomlfile.load("a.toml", text)
    assert file.data == data
    found = dict(items(data))
    assert set(file.values) == set(found)
    for path, value in found.items():
        start, end = file.spans[path]
        piece = file.text[start:end]
        if not (piece.startswith("[") and isinstance(value, dict)) and file.spans[path] != file.key_spans.get(path):
            assert tomllib.loads(f"k = {piece}")["k"] == value
        place = file.values[path]
        line = file.text.split("\n")[place.line - 1]
        assert line[place.column - 1 :].startswith(piece.split("\n")[0])


def test_a_key_points_at_its_own_spelling():
    file = tomlfile.load("a.toml", '[supply."+3V3"]\n  rise = "1 ms"\n[[rule]]\n[[rule]]\nat-least = 3')
    assert str(file.keys["supply", "+3V3"]) == "a.toml:1:9"
    assert str(file.values["supply", "+3V3", "rise"]) == "a.toml:2:10"
    assert str(file.keys["rule", 1, "at-least"]) == "a.toml:5:1"
    assert str(file.values["rule", 1]) == "a.toml:4:1"


def test_syntax_mistakes_point_at_the_character():
    assert message("a = 1\nbc = fast\n") == (
        "a.toml:2:6: not valid TOML: invalid value\n"
        "  bc = fast\n"
        "       ^\n"
        '  do        put texts in quotes: key = "text"'
    )


def test_a_mistake_at_the_end_of_the_document_has_a_place_too():
    assert message('a = """x\n').startswith("a.toml:1:9: not valid TOML: unterminated string")


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("a = " + "[" * 100_000, "a.toml:1:29: arrays or tables are nested too deeply"),
        ("a = " + "{a=" * 100_000, "nested too deeply"),
        ("a" + ".a" * 300_000 + " = 1", "a key has too many steps"),
        ("[a" + ".a" * 300_000 + "]", "a key has too many steps"),
        ("a = " + "9" * 5000, "not valid TOML: exceeds the limit (4300 digits)"),
        ("a = '" + "x" * 1_000_000 + "'", "has more than 1000000 characters"),
        ('a = "' + '\\"' * 200_000, "unterminated string"),
        ("a = 1\na = 2", "cannot overwrite a value"),
        ("\x00", "invalid statement"),
        ("a = 2000-99-99", "1:9: not valid TOML"),
    ],
)
def test_hostile_files_end_in_one_short_message(text, told):
    found = message(text)
    assert told in found
    assert len(found) < 500


def test_a_mistake_inside_a_string_points_into_it():
    file = tomlfile.load("a.toml", 'at-least = "12 mz"')
    told = str(file.mistake(("at-least",), "unit not known", at=3, length=2, expected="a time"))
    assert told == ('a.toml:1:16: unit not known\n  at-least = "12 mz"\n                 ^~\n  expected  a time')


def test_inside_a_string_with_escapes_the_whole_string_is_marked():
    file = tomlfile.load("a.toml", r'k = "a\tb c"')
    assert file.mistake(("k",), "no", at=4).span == (5, 8)


def test_long_lines_are_cut_around_the_mark():
    file = tomlfile.load("a.toml", "k = [" + "1, " * 500 + "2]")
    told = file.mistake(("k", 500), "no")
    assert told.place.column == 1506
    assert len(told.shown) <= 160
    assert told.shown[told.span[0] - 1] == "2"


def test_control_characters_are_not_shown():
    assert "\x1b" not in message("a = \x1b[31m")


def test_reads_files_as_utf8_with_or_without_a_mark(tmp_path):
    (tmp_path / "a.toml").write_bytes("\ufeffk = 'µ'\r\n".encode())
    assert tomlfile.read(tmp_path / "a.toml", "a.toml").data == {"k": "µ"}


@pytest.mark.parametrize(
    ("name", "told"),
    [("no.toml", "cannot be read"), ("folder", "cannot be read"), ("latin.toml", "2: is not UTF-8 text")],
)
def test_files_that_cannot_be_read_are_mistakes(tmp_path: Path, name, told):
    (tmp_path / "folder").mkdir()
    (tmp_path / "latin.toml").write_bytes(b"a = 1\nk = '\xb5'\n")
    with pytest.raises(UserMistake, match=told):
        tomlfile.read(tmp_path / name, name)
