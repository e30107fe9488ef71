from dataclasses import replace

from rcrules.checks._identity import fingerprint
from rcrules.checks._subject import Subject
from rcrules.checks._subjects import Subjects
from rcrules.networks import Board, Branch
from tests.checks._objects import board


def key(found: Board, rule: str = "late-enough") -> list[str]:
    """Both keys of the node's finding."""
    return fingerprint(rule, node(found), found).split(".")


def node(found: Board) -> Subject:
    return Subjects(found).of("node")[0]


def annotated_again() -> Board:
    """The same circuit with R7 and C9 for R1 and C1."""
    old = board()
    network = old.networks[0]
    names = {"R1": "R7", "C1": "C9"}
    branches = tuple(replace(branch, ref=names[branch.ref]) for branch in network.branches)
    moved = replace(network, branches=branches, nodes=(replace(network.nodes[0], parts=("R7", "C9")),))
    return replace(old, networks=(moved,), parts={names.get(ref, ref): part for ref, part in old.parts.items()})


def test_the_first_key_knows_references_and_the_second_does_not() -> None:
    own, around = key(board())
    own_again, around_again = key(annotated_again())
    assert own != own_again
    assert around == around_again


def test_values_do_not_matter() -> None:
    from tests.checks._objects import part

    other = {**board().parts, "R1": part("R1", "resistor", 2.2e4, "+3V3", "NRST")}
    assert key(board(parts=other)) == key(board())


def test_another_topology_is_another_key() -> None:
    network = board().networks[0]
    wider = replace(network, branches=(*network.branches, Branch(ref="R2", kind="resistor", a="NRST", b="GND")))
    own, around = key(board(networks=(wider,)))
    assert own == key(board())[0]
    assert around != key(board())[1]


def test_another_rule_is_another_key() -> None:
    assert set(key(board())).isdisjoint(key(board(), "soon-enough"))
