"""The project file, key by key."""

from pathlib import Path

import pytest

from rcrules import project
from rcrules.errors import UserMistake
from rcrules.project import Project
from rcrules.quantities import Spread


def load(text: str, file: str = "rcrules.toml") -> Project:
    return project.load(file, text)


def spread(low: float, high: float, unit: str, nominal: float | None = None) -> Spread:
    return Spread(low=low, nominal=(low + high) / 2 if nominal is None else nominal, high=high, unit=unit)


def test_an_empty_file_says_nothing():
    assert load("") == Project(file="rcrules.toml")


def test_paths_stay_relative_to_the_folder_of_the_file():
    text = '[board]\nnetlist = ["a.xml", "x/../b.xml"]\nbom = "../c.csv"\nrules = ["own/r.toml", "debounce"]\n'
    text += 'waivers = "w.toml"'
    found = load(text, "boards/one/rcrules.toml")
    assert found.netlists == ("a.xml", "b.xml")
    assert found.boms == ("../c.csv",)
    assert found.rules == ("own/r.toml", "debounce")
    assert found.waivers == "w.toml"


def test_a_path_that_leaves_the_folder_is_said():
    (notice,) = load('[board]\nnetlist = "a.xml"\nbom = "../c.csv"').notices
    assert str(notice.place) == "rcrules.toml:3:1"
    assert notice.text == "bom lies outside the project file's folder: ../c.csv"


def test_conditions_and_supplies_have_units():
    found = load(
        '[conditions]\ntemperature = "-20 degC .. 60 degC"\nlife = "10 year"\n'
        '[supply."+3V3"]\nrise = "1 ms"\nafter = "+5V"'
    )
    assert found.temperature == spread(-20, 60, "degC")
    assert found.life.nominal == pytest.approx(315576000)
    assert found.supplies["+3V3"].rise == spread(0.001, 0.001, "s")
    assert found.supplies["+3V3"].after == "+5V"


def test_a_pin_has_levels_pulls_and_further_numbers():
    pin = load(
        '[pin."U3.7"]\nkind = "input"\nlow = "30 % of +3V3"\nmax-voltage = "+3V3 + 0.3 V"\ndrive = "0.4 V at 3 mA"\n'
        'pull-up = "25 kohm .. 55 kohm to +3V3"\nacquisition-time = "2 us"\n'
        'set = { mode = "fast", bits = 12, gap = "1 ms .. 3 ms" }'
    ).pins["U3.7"]
    assert pin.low.nets[0][1] == "+3V3"
    assert pin.max_voltage.offset.nominal == pytest.approx(0.3)
    assert pin.pull_up == (spread(25e3, 55e3, "Ω"), "+3V3")
    assert pin.drive == (spread(0.4, 0.4, "V"), spread(0.003, 0.003, "A", 0.003))
    assert pin.set == {"acquisition-time": pytest.approx(2e-6), "mode": "fast", "bits": 12, "gap": pytest.approx(2e-3)}
    assert pin.spreads["gap"] == spread(0.001, 0.003, "s")


def test_a_part_has_tolerance_ratings_and_a_curve():
    part = load(
        '[part."C1"]\ntolerance = "-20 % +80 %"\nrated-voltage = "16 V"\nvalue = "100 nF"\nfitted = false\n'
        'bias-curve = [["0 V", "100 %"], ["5 V", "62 %"]]\ntcr = "100 ppm/K"'
    ).parts["C1"]
    assert part.tolerance == pytest.approx((-0.2, 0.8))
    assert part.bias_curve == ((0.0, 1.0), (5.0, pytest.approx(0.62)))
    assert part.fitted is False
    assert part.tcr.unit == "1/K"
    assert part.set["rated-voltage"] == 16


@pytest.mark.parametrize(
    ("text", "share"), [("5 %", (-0.05, 0.05)), ("+/- 5 %", (-0.05, 0.05)), ("-10 % +30 %", (-0.1, 0.3))]
)
def test_tolerances_are_shares(text, share):
    assert load(f'[defaults.resistor]\ntolerance = "{text}"').defaults["resistor"].tolerance == pytest.approx(share)


def test_contacts_have_bounce_and_a_rest_state():
    part = load('[part."SW1"]\ncontact = "normally open"\nbounce = "5 ms .. 10 ms"').parts["SW1"]
    assert part.contact == "normally open"
    assert part.bounce == part.spreads["bounce"] == spread(0.005, 0.010, "s")


def test_settings_hold_numbers_with_units_and_words():
    found = load('[settings."adc-settles"]\nbits = 12\nwindow = "1 us"\nmode = "4-20 mA loop"')
    assert found.settings["adc-settles"] == {"bits": 12, "window": pytest.approx(1e-6), "mode": "4-20 mA loop"}
    assert found.setting_units["adc-settles"] == {"bits": "1", "window": "s"}


def test_grounds_columns_and_nets():
    found = load(
        '[ground]\nnets = ["GND", "AGND"]\n[columns]\nreference = "Pos"\n[net."SDA"]\nheld = "free"\nrole = "low-pass"'
    )
    assert found.grounds == ("GND", "AGND")
    assert found.columns == {"reference": "Pos"}
    assert found.nets["SDA"].held == "free"


def test_names_are_found_from_any_folder_below(tmp_path: Path):
    (tmp_path / "a" / "b").mkdir(parents=True)
    (tmp_path / "rcrules.toml").write_text('[board]\nname = "x"\n')
    found = project.find(tmp_path / "a" / "b")
    assert found == (tmp_path / "rcrules.toml").resolve()
    assert project.read(found, "rcrules.toml").name == "x"


def test_mistakes_come_in_the_order_of_the_file():
    with pytest.raises(UserMistake) as caught:
        load('[zzz]\n[net.A]\nswing = "1"\n[board]\nname = 1\n[aaa]')
    assert [item.place.line for item in caught.value.mistakes] == [1, 3, 5, 6]


def test_hostile_numbers_end_in_a_message():
    with pytest.raises(UserMistake, match="must be a finite number"):
        load('[settings."r"]\na = 0x' + "f" * 5000 + "\nb = nan\nc = [1]")


def test_the_line_that_gives_a_number_is_one_the_file_may_hold():
    for line in (
        project.line_for("pin", "U5.AIN0", "acquisition_time", "2 us"),
        project.line_for("net", "SDA", "hold_time", "2 us"),
        project.line_for("part", "SW1", "bounce", "2 us"),
    ):
        header, _, rest = line.partition("] ")
        load(f"{header}]\n{rest}")
    assert project.NUMBERS["acquisition_time"] == "s"


def test_a_diode_has_a_forward_drop_a_resistance_and_a_breakdown():
    found = load(
        '[part."D1"]\nforward = "0.3 V .. 0.8 V"\non-resistance = "0.1 ohm .. 10 ohm"\n'
        '[defaults.diode]\nbreakdown = "5.6 V"\n'
    )
    assert found.parts["D1"].forward == spread(0.3, 0.8, "V")
    assert found.parts["D1"].on_resistance == spread(0.1, 10.0, "Ω")
    assert found.defaults["diode"].breakdown == spread(5.6, 5.6, "V")


def test_limits_of_inputs_are_whole_numbers_by_name():
    assert load("[limits]\nparts = 200000\nfile-size = 100").limits == {"parts": 200_000, "file-size": 100}
