"""The design as a graph of parts and nets."""

import subprocess
import sys

from rcrules import design, readers
from rcrules.readers import Source

PINS = b"net,part,pin\nA,R1,1\nB,R1,2\nB,U1,4\nB,U1,5\nLONE,,\n,TP1,1\n"


def test_the_graph_is_bipartite_and_keeps_lone_parts_and_nets() -> None:
    made = design.build([readers.read(Source(name="pins.csv", data=PINS))])
    graph = design.graph(made)
    assert set(graph.nodes) == {
        ("part", "R1"),
        ("part", "U1"),
        ("part", "TP1"),
        ("net", "A"),
        ("net", "B"),
        ("net", "LONE"),
    }
    assert {graph.nodes[node]["bipartite"] for node in graph if node[0] == "part"} == {0}
    assert all(first[0] != second[0] for first, second in graph.edges)


def test_an_edge_keeps_every_pin_of_the_part_on_the_net() -> None:
    graph = design.graph(design.build([readers.read(Source(name="pins.csv", data=PINS))]))
    assert [pin.number for pin in graph.edges[("part", "U1"), ("net", "B")]["pins"]] == ["4", "5"]


def test_the_graph_library_and_the_xml_library_load_only_when_they_are_needed() -> None:
    script = "import sys, rcrules.design; print([name for name in ('networkx', 'lxml') if name in sys.modules])"
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"
