"""An article a network: its drawing, its nodes, and the findings about it."""

from collections.abc import Mapping
from dataclasses import dataclass

from markupsafe import Markup

from rcrules.findings import Document, Json
from rcrules.reports._page._drawing import drawings
from rcrules.reports._page._findings import Shown
from rcrules.reports._words import bounds, part_texts, parts_text


@dataclass(frozen=True, slots=True, kw_only=True)
class Node:
    """One node in words."""

    net: str
    role: str
    certainty: str
    parts: str
    fed_from: str
    feeds: str
    evidence: list[str]
    quantities: list[tuple[str, str, str]]
    """Name, bounds, ``proved`` or ``searched``; why there is none in place of the bounds."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Article:
    """One network."""

    id: str
    name: str
    drawings: list[Markup]
    branches: list[tuple[str, str, str]]
    """Part in words and the two nets it joins."""
    nodes: list[Node]
    findings: list[Shown]

    @property
    def packed(self) -> bool:
        """Whether all but its name and the headlines of its findings is kept packed: where each of these is."""
        return bool(self.findings) and all(item.packed for item in self.findings)


def articles(document: Document, found: list[Shown]) -> list[Article]:
    """Every network, those with the gravest findings first."""
    texts, owners = part_texts(document), _owners(document)
    mine: dict[int, list[Shown]] = {}
    for item in found:
        if (owner := _owner(item, owners)) is not None:
            mine.setdefault(owner, []).append(item)
    made = [_article(document, index, texts, mine.get(index, [])) for index in range(len(document.networks))]
    return sorted(made, key=lambda item: min((shown.gravity for shown in item.findings), default=len(found)))


def elsewhere(document: Document, found: list[Shown]) -> list[Shown]:
    """Findings about parts that are in no network."""
    owners = _owners(document)
    return [item for item in found if _owner(item, owners) is None]


def _owners(document: Document) -> dict[tuple[str, str], int]:
    """Nets of nodes and references of branches -> the network they are in."""
    owners: dict[tuple[str, str], int] = {}
    for index, network in enumerate(document.networks):
        for node in network["nodes"]:
            owners.setdefault(("net", str(node["net"])), index)
        for branch in network["branches"]:
            owners.setdefault(("part", branch["part"]), index)
    return owners


def _owner(item: Shown, owners: Mapping[tuple[str, str], int]) -> int | None:
    finding = item.finding
    keys = [("net", finding.net)] if finding.net else []
    return next((owners[key] for key in (*keys, *(("part", ref) for ref in finding.parts)) if key in owners), None)


def _article(document: Document, index: int, texts: Mapping[str, str], findings: list[Shown]) -> Article:
    network = document.networks[index]
    return Article(
        id=f"n{index}",
        name=str(network["id"]),
        drawings=drawings(network, document.held, texts),
        branches=[(texts.get(row["part"], row["part"]), *row["nets"]) for row in network["branches"]],
        nodes=[_node(row, texts) for row in network["nodes"]],
        findings=findings,
    )


def _node(row: Json, texts: Mapping[str, str]) -> Node:
    quantities = [
        (name.replace("_", " "), bounds(found["low"], found["nominal"], found["high"], found["unit"]), found["method"])
        for name, found in row["quantities"].items()
    ]
    quantities += [(name.replace("_", " "), str(why), "") for name, why in row["unmeasured"].items()]
    return Node(
        net=str(row["net"]),
        role=row["role"],
        certainty=row["certainty"],
        parts=parts_text(row["parts"], texts),
        fed_from=", ".join(row["fed_from"]),
        feeds=", ".join(row["feeds"]),
        evidence=row["evidence"],
        quantities=quantities,
    )
