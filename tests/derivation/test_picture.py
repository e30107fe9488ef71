"""The network as a drawing in text: the order of its nodes, what hangs on them, and which way diodes conduct."""

from typing import Any

from rcrules.derivation import derive
from rcrules.events import pose
from rcrules.measures import registry
from rcrules.problems import Bounds, Request, solve_bounds
from tests.events.boards import bench

FACTS = '[supply."+3V3"]\nvoltage = "3.3 V"\nrise = "1 ms"\n[part."D1"]\nforward = "0.5 V .. 0.7 V"\n'


def derived() -> dict[str, Any]:
    """A reset that discharges through a diode into its supply."""
    nets = """
        +3V3: U2.1/VO/power_out R1.1 U1.3/VDD/power_in D1.1/K/passive
        NRST: R1.2 C1.1 U1.7/NRST/input D1.2/A/passive
        GND: U2.2/GND/power_in U1.2/GND/power_in C1.2
    """
    small = bench("R1 10k 1%, C1 1u 10% C0G, D1 D, U1 QX7301, U2 QX3300", nets, FACTS)
    measure = registry()["final_voltage"]
    problem = pose(small.board, small.project, small.node("NRST"), measure, {"event": "power-down"})
    (bounds,) = solve_bounds([Request(problem, measure)])
    assert isinstance(bounds, Bounds)
    found = derive(problem, measure, bounds)
    assert found is not None
    return found


def test_a_chain_leads_from_the_source_to_the_observed_node() -> None:
    first, last = derived()["picture"]
    assert (first["node"], [arm["ref"] for arm in first["down"]]) == ("+3V3", ["R1", "D1"])
    assert (last["node"], last["seen"], [arm["ref"] for arm in last["branches"]]) == ("NRST", True, ["C1"])


def test_a_diode_is_drawn_with_its_drop_and_its_direction() -> None:
    """Its anode is at the node further down."""
    (diode,) = [arm for arm in derived()["picture"][0]["down"] if arm["ref"] == "D1"]
    assert (diode["kind"], diode["value"], diode["unit"]) == ("diode to here", 0.6, "V")
