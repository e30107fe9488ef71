"""Where rules come from: packs that ship with the tool, and files of the team."""

from collections.abc import Iterable, Mapping, Sequence
from functools import cache
from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import Final

import rcrules
from rcrules.errors import Mistake, Place, Problems, UserMistake
from rcrules.measures import Measure, registry
from rcrules.project import Project
from rcrules.rulebook._compile import Rules, pack_of, rules_of
from rcrules.rulebook._extend import Bases
from rcrules.rulebook._model import Pack, Rule
from rcrules.rulebook._settings import check_settings
from rcrules.tomlfile import Table, TomlFile, cut, guess, listed, root
from rcrules.tomlfile import load as load_toml
from rcrules.tomlfile import read as read_toml

_SUFFIX: Final = ".toml"
MAX_FILES: Final = 200


def packs_folder() -> Traversable:
    """Folder of the shipped packs: inside the installed package, or beside it in a checkout."""
    packaged = files("rcrules") / "rules"
    checkout = Path(rcrules.__file__).parent.parent
    if not packaged.is_dir() and (checkout / "pyproject.toml").is_file():
        return checkout / "rules"
    return packaged


@cache
def shipped() -> tuple[str, ...]:
    """Names of the shipped packs, sorted."""
    found = (item.name.removesuffix(_SUFFIX) for item in packs_folder().iterdir() if item.name.endswith(_SUFFIX))
    return tuple(sorted(found))


def packs() -> list[Pack]:
    """The shipped packs, by name."""
    problems = Problems()
    found = [pack_of(root(_file(name, None), problems)) for name in shipped()]
    problems.stop_if_any()
    return [pack for pack in found if pack is not None]


def load(
    names: Iterable[str],
    folder: Path | None = None,
    project: Project | None = None,
    measures: Mapping[str, Measure] | None = None,
    *,
    asked_by: str = "rules",
) -> list[Rule]:
    """The rules of shipped packs and files (``….toml``, taken from ``folder``), in that order, each pack once.

    With a project its settings are held against the rules too. asked_by: what names them. Raises
    UserMistake with the mistakes of all files.
    """
    known, problems = registry() if measures is None else measures, Problems()
    wanted = list(dict.fromkeys(names))
    if len(wanted) > MAX_FILES:
        raise UserMistake(Mistake(place=Place(file=asked_by), problem=f"more than {MAX_FILES} packs and files"))
    rules = _compiled([_read(name, folder, asked_by) for name in wanted], known, problems)
    _distinct(rules, problems)
    if project is not None:
        problems.mistakes.extend(check_settings(project, rules))
    problems.stop_if_any()
    return rules


def _read(name: str, folder: Path | None, asked_by: str) -> Table | UserMistake:
    """A pack or file as a table, or what is wrong with it."""
    try:
        return root(_file(name, folder, asked_by), Problems())
    except UserMistake as error:
        return error


def _compiled(tops: Sequence[Table | UserMistake], measures: Mapping[str, Measure], problems: Problems) -> list[Rule]:
    """The rules of several files, without those in whose place another stands; mistakes in the order of the files."""
    bases = Bases([top for top in tops if isinstance(top, Table)], _shipped_tops)
    found: list[Rules] = []
    for top in tops:
        if isinstance(top, UserMistake):
            problems.mistakes.extend(top.mistakes)
            continue
        found.append(rules_of(top, pack_of(top), measures, bases))
        with problems.collecting():
            top.stop_if_wrong()
    instead = [(place, name) for place, item in enumerate(found) for name in item.replaced]
    return [
        rule
        for place, item in enumerate(found)
        for rule in item.rules
        if rule.id in item.replaced or all(name != rule.id or other == place for other, name in instead)
    ]


def _shipped_tops() -> list[Table]:
    return [root(_file(name, None), Problems()) for name in shipped()]


def compile_pack(file: TomlFile, measures: Mapping[str, Measure]) -> list[Rule]:
    """The rules of one file. Raises UserMistake with all its mistakes."""
    problems = Problems()
    rules = _compiled([root(file, Problems())], measures, problems)
    problems.stop_if_any()
    return rules


def _file(name: str, folder: Path | None, asked_by: str = "rules") -> TomlFile:
    """A pack by its name, or a file by its path."""
    if name.endswith(_SUFFIX) or "/" in name or "\\" in name:
        return read_toml((folder or Path()) / name, name)
    if name not in shipped():
        problem = f"no pack is called '{cut(name)}'{guess(name, shipped())}"
        do = "name a shipped pack, or a file that ends in .toml"
        raise UserMistake(Mistake(place=Place(file=asked_by), problem=problem, expected=listed(shipped()), do=do))
    return load_toml(f"{name}{_SUFFIX}", (packs_folder() / f"{name}{_SUFFIX}").read_text(encoding="utf-8"))


def _distinct(rules: Iterable[Rule], problems: Problems) -> None:
    """Settings and findings go by the id of a rule, so no two packs may share one."""
    first: dict[str, Rule] = {}
    for rule in rules:
        other = first.setdefault(rule.id, rule)
        if other is not rule:
            problem, found = f"the rule id '{rule.id}' is taken", f"first in {other.place}"
            do = "give it a name of its own"
            problems.mistakes.append(Mistake(place=rule.place, problem=problem, found=found, do=do))
