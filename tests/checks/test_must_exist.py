"""Rules for what must be there: nodes at pins, capacitors near supply pins, bleeders, pull-ups."""

from tests.checks.test_day_one_rules import outcomes

HEAD = 'id = "tried"\nlevel = "error"\n'
FED = '[supply."+3V3"]\nvoltage = "3.3 V"\n'


def test_a_node_of_a_role_at_every_reset_pin() -> None:
    rule = HEAD + 'every = { subject = "pin", has = { role = "power-on-delay" } }\nname = ["RST", "RESET"]'
    circuit = """
    U1 q : VDD power-in +3V3, GND power-in GND, NRST input NRST
    U2 q : VDD power-in +3V3, GND power-in GND, NRST input BARE
    R1 10k : +3V3, NRST
    C1 100nF : NRST, GND
    R2 10k : +3V3, BARE
    """
    assert outcomes(rule, circuit, FED) == {"NRST": "holds", "BARE": "fails"}


def test_a_bleeder_on_every_supply_above_a_voltage() -> None:
    rule = HEAD + 'every = { subject = "supply", has = { role = "bleeder" } }\nwhen = "supply_high > 60 V"'
    circuit = "C1 1uF 200V : +100V, GND\nR1 100k : +100V, GND\nC2 1uF 200V : +80V, GND\nC3 1uF : +12V, GND"
    project = "".join(f'[supply."+{volts}V"]\nvoltage = "{volts} V"\n' for volts in (100, 80, 12))
    assert outcomes(rule, circuit, project) == {"+100V": "holds", "+80V": "fails"}


SUPPLIED = HEAD + 'every = { subject = "supply pin", has = { kind = "capacitor", within = "the net", to = "ground" } }'


def test_a_supply_pin_behind_a_filter_is_one_too() -> None:
    circuit = (
        "U1 q : VDDA power-in VDDA, GND power-in GND, A output A\nR1 10 : +3V3, VDDA\nR2 1k : A, +3V3\nC2 1uF : A, GND"
    )
    assert outcomes(SUPPLIED, circuit, FED) == {"VDDA": "fails"}
    assert outcomes(SUPPLIED, f"{circuit}\nC1 100nF : VDDA, GND", FED) == {"VDDA": "holds"}


def test_a_ground_pin_that_takes_power_is_no_supply_pin() -> None:
    circuit = "U1 q : VDD power-in +3V3, VSS power-in GND\nC1 100nF : +3V3, GND"
    assert outcomes(SUPPLIED, circuit, FED) == {"+3V3": "holds"}


def test_an_open_drain_pin_may_be_told_by_the_project() -> None:
    rule = HEAD + "subject = \"open-drain net\"\nvalue = \"count(kind = 'resistor', to = 'supply')\"\nequals = 1"
    circuit = "U1 q : VDD power-in +3V3, ALERT bidirectional ALERT\nU2 q : IN input ALERT\nR1 10k : +3V3, ALERT"
    assert outcomes(rule, circuit, FED) == {}
    assert outcomes(rule, circuit, f'{FED}[pin."U1.ALERT"]\nkind = "open-drain"\n') == {"ALERT": "holds"}


RESET = HEAD + 'every = { subject = "reset pin", has = { kind = "capacitor", within = "the net" } }'


def test_every_reset_pin_is_met_whether_a_network_is_there_or_not() -> None:
    circuit = """
    U1 q : VDD power-in +3V3, GND power-in GND, NRST input NRST
    U2 q : VDD power-in +3V3, GND power-in GND, RESET# input BARE
    U3 q : VDD power-in +3V3, GND power-in GND, RST input HELD, IN input BARE
    U4 supervisor : VCC power-in +3V3, GND power-in GND, RESET output HELD
    R1 10k : +3V3, NRST
    C1 100nF : NRST, GND
    """
    assert outcomes(RESET, circuit, FED) == {"NRST": "holds", "BARE": "fails", "HELD": "fails"}


def test_a_measure_of_pins_can_be_taken_at_reset_pins() -> None:
    rule = HEAD + 'subject = "reset pin"\nmeasure = "pin_voltage"\nat-most = "{limit}"'
    circuit = "U1 q : VDD power-in +3V3, GND power-in GND, NRST input NRST, IN input IN\n"
    circuit += "R1 10k : +3V3, NRST\nC1 100nF : NRST, GND\nR2 10k : +3V3, IN\nC2 100nF : IN, GND"
    assert outcomes(rule.format(limit="3.4 V"), circuit, FED) == {"NRST": "holds"}
    assert outcomes(rule.format(limit="3 V"), circuit, FED) == {"NRST": "fails"}


CONTACT = HEAD + 'every = { subject = "contact pin", has-no = { kind = "capacitor", within = "the net" } }'


def test_no_contact_pin_has_a_capacitor_on_its_net() -> None:
    circuit = """
    U1 q : VDD power-in +3V3, GND power-in GND, A input A, B input B, C input C
    SW1 button : A, GND
    SW2 button : KEY, GND
    SW3 button : C, GND
    R1 10k : +3V3, A
    C1 100nF : A, GND
    R2 10k : +3V3, B
    C2 100nF : B, GND
    R3 1k : B, KEY
    """
    assert outcomes(CONTACT, circuit, FED) == {"A": "fails", "KEY": "holds", "C": "holds"}


def test_kind_fed_tells_pins_that_no_network_feeds() -> None:
    rule = HEAD + 'every = { subject = "pin", has = { kind = "capacitor", within = "the net" } }\nkind-fed = "adc"'
    circuit = """
    U1 q : VDD power-in +3V3, GND power-in GND, AIN0 input S0, AIN1 input S1, DIN input D
    R1 1k : X, S0
    C1 100nF : S0, GND
    """
    assert outcomes(rule, circuit, FED) == {"S0": "holds", "S1": "fails"}


PATH = HEAD + 'role = "low-pass"\nvalue = "path_resistance(from = \'connector\', to = \'pin\')"\nat-least = "470 ohm"'


def test_a_path_starts_at_a_connector_whose_net_is_driven_from_outside() -> None:
    circuit = """
    J1 header : IN, GND
    R1 {ohms} 1% : IN, AIN
    C1 100nF : AIN, GND
    U1 q : AIN0 input AIN, VDD power-in +3V3, GND power-in GND
    """
    assert outcomes(PATH, circuit.format(ohms="1k"), FED) == {"AIN": "holds"}
    assert outcomes(PATH, circuit.format(ohms="100"), FED) == {"AIN": "fails"}


def test_a_path_through_a_held_net_is_none() -> None:
    """R1 and R2 both end at ground: what the connector brings does not get past it."""
    circuit = """
    J1 header : KEY, GND
    R1 100 1% : KEY, GND
    R2 100 1% : AIN, GND
    R3 1k 1% : +3V3, AIN
    C1 100nF : AIN, KEY
    U1 q : AIN0 input AIN, VDD power-in +3V3, GND power-in GND
    """
    rule = PATH.replace('role = "low-pass"\n', 'net = "AIN"\n')
    assert outcomes(rule, circuit, FED) == {"AIN": "holds"}


def test_a_path_from_what_is_not_there_is_undecided() -> None:
    circuit = """
    R1 1k 1% : X, AIN
    C1 100nF : AIN, GND
    U1 q : AIN0 input AIN, VDD power-in +3V3, GND power-in GND
    U2 q : OUT output X
    """
    assert outcomes(PATH, circuit, FED) == {"AIN": "undecided"}
