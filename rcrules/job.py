"""What one run is asked for, and everything that it reads: project, exports, rules and waivers."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING

from rcrules.errors import Mistake, Place, Problems, UserMistake

if TYPE_CHECKING:
    from rcrules.project import Project
    from rcrules.readers import Export
    from rcrules.rulebook import Rule
    from rcrules.waivers import Waiver


@dataclass(frozen=True, slots=True, kw_only=True)
class Job:
    """What one run is asked for: one board."""

    inputs: tuple[str, ...] = ()
    """Netlists and BOMs, ``-`` for standard input; empty = those of the project file."""
    project: str | None = None
    """Project file; None = looked for beside the first input and above."""
    rules: tuple[str, ...] = ()
    """Packs and rule files; empty = the project's, else the packs that need no facts."""
    with_rules: bool = True
    """False: only what was found."""
    proposals: bool = False
    """True: also what changes of parts would mend what fails."""
    derived: bool = False
    """True: also how the numbers of findings come about."""
    samples: int = 0
    """Random cases of each finding; 0 = no statistics."""
    seed: int = 0
    variant: str = ""
    """Of the board; '' = that of the project file, else the base."""
    limits: tuple[tuple[str, int], ...] = ()
    """What is read of one input, by names of vocabulary.LIMITS; before those of the project file."""


def project_of(job: Job) -> "Project":
    """The project file of a job alone. Raises UserMistake with all its mistakes."""
    from rcrules.project import Project, read

    path = _project_path(job)
    return read(path, str(path)) if path else Project()


def read_job(job: Job) -> "tuple[Project, list[Export], list[Rule], list[Waiver]]":
    """Project, exports, rules and waivers; what is wrong with any of them is told at once."""
    from rcrules.project import Project, read
    from rcrules.readers import join

    path, problems = _project_path(job), Problems()
    project = read(path, str(path), problems) if path else Project()
    exports: list[Export] = []
    rules: list[Rule] = []
    waivers: list[Waiver] = []
    for name in job.inputs or _listed(project, problems):
        with problems.collecting():
            exports.append(_export(name, project, job))
    problems.mistakes += _twice(exports)
    exports = [*join(exports)]
    with problems.collecting():
        exports, project = _varied(exports, project, job)
    if job.with_rules:
        with problems.collecting():
            rules = _rules(job, project)
        with problems.collecting():
            waivers = _waivers(project)
    problems.stop_if_any()
    return project, exports, rules, waivers


def _project_path(job: Job) -> Path | None:
    """The project file asked for, or the nearest one beside the first input or above it, relative where it can be."""
    from rcrules.project import find

    if job.project is not None:
        return Path(job.project)
    first = next((name for name in job.inputs if name != "-"), None)
    found = find(Path(first).parent if first else Path())
    if found is None:
        return None
    return found.relative_to(Path.cwd()) if found.is_relative_to(Path.cwd()) else found


def _listed(project: "Project", problems: Problems) -> tuple[str, ...]:
    """The inputs of the project file. Raises UserMistake where there are none, with what else is wrong in it."""
    if project.netlists or project.boms:
        return tuple(str(_folder(project) / name) for name in (*project.netlists, *project.boms))
    problems.stop_if_any()
    place = Place(file=project.file or "command line")
    expected = "[board] netlist or bom" if project.file else None
    do = "name a netlist or BOM: rcrules check board.xml bom.csv"
    raise UserMistake(Mistake(place=place, problem="no inputs", expected=expected, do=do))


def _twice(exports: "Sequence[Export]") -> list[Mistake]:
    """Inputs with the same content as an earlier one: a slip, and each would agree with itself."""
    first: dict[str, str] = {}
    found = []
    for export in exports:
        other = first.get(export.sha256)
        if other is not None:
            found.append(
                Mistake(
                    place=Place(file=export.source), problem="the same content twice", found=other, do="name it once"
                )
            )
        first.setdefault(export.sha256, export.source)
    return found


def _varied(exports: "list[Export]", project: "Project", job: Job) -> "tuple[list[Export], Project]":
    """The exports for the variant asked for, and the project with its name in that of the board."""
    from rcrules.design import vary

    name = job.variant or project.variant or ""
    written = None if job.variant else project.variant_at
    found = vary(exports, name, written or Place(file="--variant"))
    return found, replace(project, variant=name) if name else project


def _folder(project: "Project") -> Path:
    """Where the paths of the project file start."""
    return Path(project.file).parent if project.file else Path()


def _export(path: str, project: "Project", job: Job) -> "Export":
    """One input, of the command line or as the project file lists it."""
    from rcrules.inventory import shown
    from rcrules.readers import Limits, load, read

    said = {**project.limits, **dict(job.limits)}
    limits = Limits(**{name.replace("-", "_"): most for name, most in said.items()})
    source = load(path, limits, named_in=None if job.inputs else f"[board] of {project.file}")
    own = source.folder
    within = project.file and own and own.resolve().is_relative_to(_folder(project).resolve())
    folder = _folder(project) if within else own
    return read(replace(source, name=shown(source.name), folder=folder), project.columns, project.formats)


def _rules(job: Job, project: "Project") -> "list[Rule]":
    """The rules asked for, else the project's; else those that need no facts, at most as warnings."""
    from rcrules.rulebook import load, packs

    if job.rules or project.rules:
        folder, asked_by = (Path(), "--rules") if job.rules else (_folder(project), f"{project.file}")
        return load(job.rules or project.rules, folder, project, asked_by=asked_by)
    ready = load([pack.name for pack in packs() if not pack.needs_facts], project=project)
    return [replace(rule, level="warning") if rule.level == "error" else rule for rule in ready]


def _waivers(project: "Project") -> "list[Waiver]":
    """Those of the file that the project names."""
    if project.waivers is None:
        return []
    from rcrules.waivers import read

    path = _folder(project) / project.waivers
    return read(path, str(path))
