"""A network as a chain of nodes, each with its branches: the order in which it is drawn."""

from collections import deque
from collections.abc import Iterator, Sequence

from rcrules.findings import Json
from rcrules.problems import Array, Names, Problem, evaluate


def picture(problem: Problem, names: Names) -> list[Json]:
    """Nodes in drawing order: ``node``, ``seen`` (observed here), ``branches`` to named joints, ``down`` to the next.

    A chain leads from the nearest source to the observed node; what else there is follows, each branch once.
    """
    arms = _arms(problem, names)
    free = problem.structure.shape.free
    chain = _chain(problem, names, arms)
    order = [*chain, *(name for name in names.terminals[:free] if name not in chain)]
    if not free:
        order = [names.terminals[problem.structure.at]]
    left, rows = list(arms), []
    for index, name in enumerate(order):
        after = order[index + 1] if index + 1 < len(chain) else None
        down = [arm for arm in left if after is not None and {arm["a"], arm["b"]} == {name, after}]
        held_in_chain = name not in names.terminals[:free] and after is not None
        here = [] if held_in_chain else [arm for arm in left if name in (arm["a"], arm["b"]) and arm not in down]
        left = [arm for arm in left if arm not in down and arm not in here]
        rows.append(_row(problem, names, name, here, down))
    return rows


def _row(problem: Problem, names: Names, name: str, here: Sequence[Json], down: Sequence[Json]) -> Json:
    structure = problem.structure
    ends = {structure.at} | ({structure.against} if structure.against is not None else set())
    return {
        "node": name,
        "seen": name in {names.terminals[end] for end in ends},
        "branches": [{**_told(arm, name), "to": arm["b"] if arm["a"] == name else arm["a"]} for arm in here],
        "down": [_told(arm, name) for arm in down],
        "drawn": _drawn(problem, names, name),
    }


def _told(arm: Json, here: str) -> Json:
    """An arm as it is met from a node; of a diode the word says which way it conducts."""
    told = {key: arm[key] for key in ("ref", "kind", "value", "unit")}
    if arm["kind"] == "diode":
        told["kind"] = "diode from here" if arm["a"] == here else "diode to here"
    return told


def _drawn(problem: Problem, names: Names, name: str) -> list[str]:
    """Names of the currents drawn from a node."""
    return [
        problem.parameters[form[0][1][0]].name
        for terminal, form in problem.structure.amps
        if names.terminals[terminal] == name and form and form[0][1]
    ]


def _arms(problem: Problem, names: Names) -> list[Json]:
    """Every branch at its nominal value."""
    structure, nominal = problem.structure, problem.box()[1][None, :]
    shape, found = structure.shape, []
    groups = (
        (shape.resistors, structure.ohms, names.resistors, "resistor", "Ω"),
        (shape.capacitors, structure.farads, names.capacitors, "capacitor", "F"),
    )
    for pairs, forms, called, kind, unit in groups:
        for (a, b), form, ref in zip(pairs, forms, called, strict=True):
            value = float(evaluate(form, nominal)[0])
            ends = {"a": names.terminals[a], "b": names.terminals[b]}
            found.append({"ref": ref, "kind": kind, "value": value, "unit": unit, **ends})
    return [*found, *_diodes(problem, names, nominal)]


def _diodes(problem: Problem, names: Names, nominal: Array) -> Iterator[Json]:
    """Every diode with its forward drop, its anode first; not the rails of what pins leak, which drop nothing."""
    for item, ref in zip(problem.structure.diodes, names.diodes, strict=False):
        drop = float(evaluate(item.drop, nominal)[0])
        if drop > 0.0:
            ends = {"a": names.terminals[item.anode], "b": names.terminals[item.cathode]}
            yield {"ref": ref, "kind": "diode", "value": drop, "unit": "V", **ends}


def _chain(problem: Problem, names: Names, arms: Sequence[Json]) -> list[str]:
    """Joints from the nearest source other than 0 V to the observed node; the node alone where nothing feeds it."""
    free, at = problem.structure.shape.free, names.terminals[problem.structure.at]
    inside = set(names.terminals[:free])
    if at not in inside:
        return [at]
    for kinds in (("resistor",), ("resistor", "capacitor")):
        path = _path(at, inside, [arm for arm in arms if arm["kind"] in kinds])
        if path:
            return path
    return [at]


def _path(at: str, inside: set[str], arms: Sequence[Json]) -> list[str]:
    """The shortest way from a held joint to the node."""
    came: dict[str, str] = {at: ""}
    queue = deque([at])
    while queue:
        here = queue.popleft()
        for arm in arms:
            if here not in (arm["a"], arm["b"]):
                continue
            there = arm["b"] if arm["a"] == here else arm["a"]
            if there in came or there == "0 V":
                continue
            came[there] = here
            if there not in inside:
                return _followed(there, came)
            queue.append(there)
    return []


def _followed(start: str, came: dict[str, str]) -> list[str]:
    path = [start]
    while came[path[-1]]:
        path.append(came[path[-1]])
    return path
