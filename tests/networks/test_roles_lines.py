from rcrules.errors import Place
from rcrules.project import NetFacts, PinFacts, Project
from tests.networks.drafts import nodes

PLACE = Place(file="rcrules.toml", line=1)
LINES = {"P": "driven", "M": "driven"}


def test_equal_resistors_from_two_lines_to_a_capacitor_are_a_termination():
    node = nodes("R1 49.9 P N\nR2 49.9 M N\nC1 100n N GND", hold=LINES)["N"]
    assert (node.role, node.parts, node.fed_from) == ("termination", ("R1", "R2", "C1"), ("P", "M"))


def test_two_unequal_resistors_are_no_termination():
    assert nodes("R1 1k P N\nR2 4.7k M N\nC1 1n N GND\nU1 IN:input=N", hold=LINES)["N"].role == "low-pass"


def test_resistor_beside_capacitor_at_a_current_monitor_is_a_shunt():
    node = nodes("R1 10k N GND\nC1 10n N GND\nU1 IMON:output=N")["N"]
    assert (node.role, node.certainty) == ("sense-shunt", "unsure")


def test_low_resistor_under_a_transistor_is_a_shunt():
    assert nodes("R1 100m N GND\nC1 1n N GND\nQ1 G=A D=B S=N\nU1 CS:input=N")["N"].role == "sense-shunt"


def test_bias_resistor_with_its_capacitor_has_no_role():
    node = nodes("R1 6.5k N GND\nC1 100p N GND\nU1 REXT:bidirectional=N")["N"]
    assert (node.role, node.certainty) == ("other", "unsure")


def test_pull_up_on_a_shared_open_drain_line():
    node = nodes("R1 4.7k +3V3 N\nC1 22p N GND\nU1 SDA:bidirectional=N\nU2 SDA:bidirectional=N")["N"]
    assert node.role == "bus-pull-up"


def test_supply_with_resistor_and_capacitor_to_ground_is_a_bleeder_with_all_its_capacitors():
    node = nodes("R1 10k +5V GND\nC1 10u +5V GND\nC2 100n GND +5V")["+5V <-> GND"]
    assert (node.role, node.parts, node.joint, node.across) == ("bleeder", ("R1", "C1", "C2"), "+5V", "GND")


def test_resistor_and_capacitor_between_shield_and_ground_are_a_chassis_bond():
    node = nodes("R1 1M CASE GND\nC1 100n CASE GND\nJ1 SHIELD=CASE", hold={"CASE": "ground"})["CASE <-> GND"]
    assert (node.role, node.certainty) == ("chassis-bond", "sure")


def test_two_grounds_without_a_sign_of_a_chassis_are_not_sure():
    node = nodes("R1 1k AGND GND\nC1 100n AGND GND", hold={"AGND": "ground"})["AGND <-> GND"]
    assert (node.role, node.certainty) == ("chassis-bond", "unsure")


def test_capacitors_alone_between_held_nets_are_no_node():
    assert not nodes("C1 100n +5V GND\nR1 10k +5V +3V3")


def test_driven_net_with_resistor_and_capacitor_to_ground_is_no_node():
    assert not nodes("R1 10k P GND\nC1 1n P GND", hold=LINES)


def test_role_of_the_project_file_wins_and_says_so():
    project = Project(nets={"N*": NetFacts(place=PLACE, role="timing")})
    node = nodes("R1 10k +3V3 NX\nC1 1u NX GND\nU1 RESET:input=NX", project=project)["NX"]
    assert (node.role, node.certainty) == ("timing", "sure")
    assert node.evidence[0] == 'project [net."N*"] role'


def test_pin_that_the_project_calls_an_output_is_not_fed():
    project = Project(pins={"U1.P*": PinFacts(place=PLACE, kind="output")})
    node = nodes("R1 10k +3V3 N\nC1 1u N GND\nU1 P0:input=N\nU2 RESET:input=N", project=project)["N"]
    assert node.feeds == ("U2.RESET",)
