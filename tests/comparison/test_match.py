from collections.abc import Sequence

from rcrules.comparison import pairs
from rcrules.findings import Finding
from tests.reports._sample import finding


def told(old: Sequence[Finding], new: Sequence[Finding]) -> list[tuple[str | None, str | None]]:
    """Pairs by net."""
    return [(was and was.net, now and now.net) for was, now in pairs(old, new)]


def test_a_finding_is_paired_with_itself() -> None:
    assert told([finding()], [finding()]) == [("NRST", "NRST")]


def test_another_rule_at_the_same_node_is_another_finding() -> None:
    assert told([finding()], [finding(rule="reset-lifts-soon-enough")]) == [(None, "NRST"), ("NRST", None)]


def test_a_renamed_net_keeps_its_pair_by_references_and_pins() -> None:
    new = [finding(net="RESET_N", fingerprint="0123456789abcdef.1111111111111111")]
    assert told([finding()], new) == [("NRST", "RESET_N")]


def test_a_renumbered_part_keeps_its_pair_by_the_topology() -> None:
    new = [finding(fingerprint="1111111111111111.fedcba9876543210", parts=["R31", "C9"])]
    assert told([finding()], new) == [("NRST", "NRST")]


def test_channels_alike_are_told_apart_by_their_nets() -> None:
    """Renumbered channels share the topology; the net says which is which, in whatever order they stand."""
    old = [finding(net=net, fingerprint=f"{net}.same") for net in ("A", "B", "C")]
    new = [finding(net=net, fingerprint=f"{net}{net}.same") for net in ("C", "A", "B")]
    assert told(old, new) == [("C", "C"), ("A", "A"), ("B", "B")]


def test_where_the_numbers_of_alike_differ_none_is_paired() -> None:
    """Three nameless channels that became two: which of them went is not known, so none is said to be another."""
    old = [finding(net=f"#{index}", fingerprint=f"{index}.same") for index in range(3)]
    new = [finding(net=f"#{index}", fingerprint=f"{index}.same") for index in (7, 8)]
    assert told(old, new) == [(None, "#7"), (None, "#8"), ("#0", None), ("#1", None), ("#2", None)]
