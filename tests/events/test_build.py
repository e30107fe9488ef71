"""Circuits built once for all questions about a network."""

from tests.events.boards import bench

NETS = """
    +3V3: U2.1/VO/power_out R1.1
    NRST: R1.2 C1.1 U1.7/NRST/input
    GND: U2.2/GND/power_in C1.2
"""


def test_questions_about_one_network_share_its_parameters():
    board = bench("R1 10k, C1 100n, U1 QX7301, U2 QX3300", NETS)
    first, second = board.pose("NRST", "time_constant"), board.pose("C1", "applied_voltage")
    assert first.structure != second.structure
    shared = [item for item in second.parameters if any(item is other for other in first.parameters)]
    assert {item.name for item in shared} == {"R1", "C1"}


def test_a_question_leaves_no_trace_in_the_next_one():
    board = bench("R1 10k, C1 100n, U1 QX7301, U2 QX3300", NETS)
    before = board.pose("NRST", "time_constant")
    assert "+3V3" in {item.name for item in board.pose("C1", "applied_voltage").parameters}
    assert "+3V3" not in {item.name for item in before.parameters}
    assert board.pose("NRST", "time_constant") == before
