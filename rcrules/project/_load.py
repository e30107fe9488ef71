"""Reads rcrules.toml: every mistake of the file in one run."""

import posixpath
from collections.abc import Callable, Mapping
from dataclasses import replace
from pathlib import Path
from typing import Any, Final, TypeVar

from rcrules.errors import Mistake, Place, Problems
from rcrules.project._contradictions import check_pin, check_supply
from rcrules.project._facts import DEFAULTS, free_words, net_facts, part_facts, pin_facts, supply_facts
from rcrules.project._formats import formats
from rcrules.project._model import Notice, Project, SupplyFacts
from rcrules.project._outside import refuse_outside
from rcrules.project._part_numbers import patterns
from rcrules.quantities import Spread
from rcrules.tomlfile import Table, cut, root
from rcrules.tomlfile import load as load_toml
from rcrules.tomlfile import read as read_toml
from rcrules.vocabulary import LIMITS, PART_KINDS

Facts = TypeVar("Facts")

FILE_NAME: Final = "rcrules.toml"
MAX_GLOB: Final = 200
"""Characters of a name or glob."""
_TABLES: Final = (
    "board", "conditions", "supply", "ground", "net", "pin", "part", "defaults", "columns", "settings", "limits",
    "part-number", "codes", "format",
)  # fmt: skip
_BOARD: Final = ("name", "netlist", "bom", "variant", "rules", "waivers", "part-numbers")


def find(start_folder: Path) -> Path | None:
    """The nearest rcrules.toml in a folder or above it."""
    start = start_folder.resolve()
    return next((folder / FILE_NAME for folder in (start, *start.parents) if (folder / FILE_NAME).is_file()), None)


def read(path: Path, name: str | None = None, problems: Problems | None = None) -> Project:
    """The project file at a path; ``name`` is the path as messages show it. Raises UserMistake.

    With ``problems`` the mistakes are kept there, and what is right is read all the same, so that the run can go on to
    what else is wrong; only a file that is no TOML raises, or one that names files outside its repository.
    """
    top = root(read_toml(path, name or str(path)), Problems())
    refuse_outside(top, path)
    top.stop_if_wrong()  # before any of the files is looked at
    if problems is None:
        return _load(top, path.parent)
    project = _project(top, path.parent)
    with problems.collecting():
        top.stop_if_wrong()
    return project


def load(file: str, text: str | None = None) -> Project:
    """The project file called ``file``, with this text or read from there. Raises UserMistake with all mistakes."""
    path = Path(file)
    return read(path, file) if text is None else _load(root(load_toml(file, text), Problems()), path.parent)


def _load(top: Table, folder: Path) -> Project:
    project = _project(top, folder)
    top.stop_if_wrong()
    return project


def _project(top: Table, folder: Path) -> Project:
    """What is right in the file and in those beside it that it names; the mistakes are noted."""
    top.only(_TABLES)
    board, conditions = top.table("board"), top.table("conditions")
    project = Project(
        file=top.file.name,
        **(_board(board) if board else {}),
        **(_conditions(conditions) if conditions else {}),
        supplies=_facts(top, "supply", supply_facts, check_supply),
        grounds=_grounds(top),
        nets=_facts(top, "net", net_facts),
        pins=_facts(top, "pin", pin_facts, check_pin),
        parts=_facts(top, "part", part_facts),
        defaults=_defaults(top),
        columns=_columns(top),
        formats=formats(top),
        limits=_limits(top),
        part_numbers=patterns(top, board, folder),
        places=_places(top),
        **_settings(top),
    )
    _check_order(top, project.supplies)
    return replace(project, notices=_outside(board) if board else ())


def _board(board: Table) -> dict[str, Any]:
    board.only(_BOARD)
    waivers = _paths(board, "waivers")
    _paths(board, "part-numbers")
    return {
        "name": board.text("name"),
        "netlists": _paths(board, "netlist"),
        "boms": _paths(board, "bom"),
        "variant": board.text("variant"),
        "variant_at": board.place_of("variant") if "variant" in board.data else None,
        "rules": _paths(board, "rules"),
        "waivers": waivers[0] if waivers else None,
    }


def _paths(board: Table, key: str) -> tuple[str, ...]:
    """Paths of a key, relative to the folder of the file; an absolute one would bind the file to one machine."""
    written = board.texts(key)
    many = isinstance(board.data.get(key), list)
    for number, path in enumerate(written):
        if posixpath.isabs(path) or Path(path).is_absolute() or not path.strip():
            where: tuple[str | int, ...] = (key, number) if many else (key,)
            board.wrong(where, f"'{key}' must be a path relative to this file", found=f"'{cut(path)}'")
    return tuple(path if key == "rules" and not _is_path(path) else posixpath.normpath(path) for path in written)


def _is_path(rule: str) -> bool:
    """Else it is the name of a shipped pack."""
    return rule.endswith(".toml") or "/" in rule or "\\" in rule


def _outside(board: Table) -> tuple[Notice, ...]:
    """Paths that leave the folder of the file: allowed, but said."""
    return tuple(
        Notice(place=board.place_of(key), text=f"{key} lies outside the project file's folder: {cut(path)}")
        for key in ("netlist", "bom", "rules", "waivers", "part-numbers")
        for path in board.texts(key)
        if posixpath.normpath(path).split("/")[0] == ".."
    )


def _conditions(conditions: Table) -> dict[str, Any]:
    conditions.only(("temperature", "life", "distribution"))
    temperature = conditions.quantity("temperature", "degC", least=-273.15)
    return {
        "temperature": temperature,
        "life": conditions.quantity("life", "s", least=0),
        "distribution": conditions.word("distribution", ("uniform", "normal")),
    }


def _facts(
    top: Table,
    key: str,
    read_facts: Callable[[Table], Facts],
    check: Callable[[Table, Facts], None] | None = None,
) -> dict[str, Facts]:
    found = {}
    for name, table in top.named(key).items():
        if _is_name(top, (key, name), name):
            found[name] = read_facts(table)
            if check is not None:
                check(table, found[name])
    return found


def _is_name(table: Table, below: tuple[str | int, ...], name: str) -> bool:
    """Whether a name or glob is one that can match; notes the mistake otherwise."""
    if len(name.strip()) > 0 and len(name) <= MAX_GLOB:
        return _has_pin(table, below, name)
    expected = f"a name or glob of 1 to {MAX_GLOB} characters"
    table.wrong(below, f"not a name for [{below[0]}]", on="key", found=f"'{cut(name)}'", expected=expected)
    return False


def _has_pin(table: Table, below: tuple[str | int, ...], name: str) -> bool:
    """``[pin.U3.NRST]`` without quotes is a table in a table: the commonest slip, so it is told by itself."""
    if below[0] != "pin" or "." in name:
        return True
    inner = table.data["pin"][name]
    nested = isinstance(inner, Mapping) and next((key for key in inner if isinstance(inner[key], Mapping)), None)
    do = f'write [pin."{cut(name)}.{cut(nested)}"]' if nested else None
    expected = 'PART.PIN in quotes, such as "U3.NRST"'
    table.wrong(below, f"'{cut(name)}' names no pin", on="key", expected=expected, do=do)
    return False


def _grounds(top: Table) -> tuple[str, ...]:
    ground = top.table("ground")
    if ground is None:
        return ()
    ground.only(("nets",))
    return ground.texts("nets")


def _defaults(top: Table) -> dict[str, Any]:
    found = {}
    for kind, table in top.named("defaults").items():
        if kind in PART_KINDS:
            found[kind] = part_facts(table, DEFAULTS)
    if (defaults := top.table("defaults")) is not None:
        defaults.only(PART_KINDS)
    return found


def _columns(top: Table) -> dict[str, str]:
    columns = top.table("columns")
    texts = {key: columns.text(key) for key in columns.data} if columns else {}
    return {key: text for key, text in texts.items() if text is not None}


def _limits(top: Table) -> dict[str, int]:
    """What is read of one input, by name."""
    limits = top.table("limits")
    if limits is None:
        return {}
    limits.only(LIMITS)
    counts = {key: limits.count(key) for key in LIMITS}
    return {key: count for key, count in counts.items() if count is not None}


def _settings(top: Table) -> dict[str, Any]:
    words: dict[str, Mapping[str, str | float]] = {}
    spreads: dict[str, dict[str, Spread]] = {}
    places: dict[str, dict[str, Mistake]] = {}
    for rule, table in top.named("settings").items():
        words[rule], spreads[rule] = free_words(table)
        places[rule] = {key: table.file.mistake((*table.path, key), "") for key in table.data}
        places[rule][""] = table.file.mistake(table.path, "", on="key")
    return {
        "settings": words,
        "setting_spreads": spreads,
        "setting_units": {rule: {name: item.unit for name, item in own.items()} for rule, own in spreads.items()},
        "setting_places": places,
    }


def _places(top: Table) -> dict[tuple[str, str], Place]:
    places = {
        (key, name): table.place_of(name)
        for key in ("supply", "net", "pin", "part")
        if isinstance(table := _quiet(top, key), Table)
        for name in table.data
    }
    ground = _quiet(top, "ground")
    nets = ground.data.get("nets") if ground else None
    for number, name in enumerate(nets if isinstance(nets, list) else [nets]):
        if ground is not None and isinstance(name, str):
            below = ("ground", "nets", number) if isinstance(nets, list) else ("ground", "nets")
            places["ground", name] = top.file.values[below]
    return places


def _quiet(top: Table, key: str) -> Table | None:
    """A table without a word about what is wrong with it; that has been said."""
    return top.table(key) if isinstance(top.data.get(key), Mapping) else None


def _check_order(top: Table, supplies: Mapping[str, SupplyFacts]) -> None:
    """No supply may wait for itself."""
    for name in supplies:
        seen = [name]
        while (after := supplies[seen[-1]].after) in supplies and after is not None:
            if after == name == min(seen):
                way = " after ".join(cut(step) for step in (*seen, name))
                top.wrong(("supply", name, "after"), "supplies wait for each other", found=way)
                break
            if after in seen:
                break
            seen.append(after)
