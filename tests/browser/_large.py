"""A document of many networks, each with findings that carry all a finding can."""

from dataclasses import replace

from rcrules.findings import Document
from tests.reports._sample import DOCUMENT, answering


def large(count: int) -> Document:
    """Networks like the reset of the sample, with three findings each."""
    network, part = DOCUMENT.networks[0], {row["ref"]: row for row in DOCUMENT.parts}
    networks, findings, parts = [], [], []
    for index in range(count):
        net, resistor, capacitor = f"NRST{index}", f"R{index + 1}", f"C{index + 1}"
        node = {**network["nodes"][0], "net": net, "parts": [resistor, capacitor]}
        branches = [{"part": capacitor, "nets": [net, "GND"]}, {"part": resistor, "nets": ["+3V3", net]}]
        networks.append({"id": net, "branches": branches, "nodes": [node]})
        outcomes = ("fails", "undecided", "holds") if index % 10 == 0 else ("holds", "holds", "holds")
        findings += [answering(net=net, parts=[resistor, capacitor], outcome=outcome) for outcome in outcomes]
        parts += [{**part["R12"], "ref": resistor}, {**part["C7"], "ref": capacitor}]
    return replace(DOCUMENT, networks=networks, findings=findings, parts=parts)
