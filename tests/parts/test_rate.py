"""Parts with what is known about them, each fact from its strongest source."""

import pytest

from rcrules.errors import Place
from rcrules.parts import Known, Unknown, at_bias, rate
from rcrules.project import PartFacts, Project
from rcrules.quantities import parse_quantity
from tests.parts.parts_by_hand import BOM, PLACE, design, part

FILE = Place(file="rcrules.toml", line=9)


def rated(item, project=None):
    return rate(design(item), project or Project())[item.ref]


def facts(**given):
    return PartFacts(place=FILE, **given)


def shares(item):
    return {share.name: (pytest.approx(share.low), pytest.approx(share.high), share.given) for share in item.shares}


def asks(item):
    return {share.name: share.ask for share in item.shares}


def test_a_value_keeps_its_origin_and_place():
    found = rated(part("R1", "10k"))
    assert found.value == Known(si=10e3, origin="netlist value", place=PLACE)
    assert found.origins["value"] == ("netlist value", PLACE)
    assert (found.kind, found.text) == ("resistor", "10k")


def test_the_bom_wins_over_the_schematic_and_the_loser_is_told():
    found = rated(part("R1", "10k", bom="4k7"))
    assert found.value == Known(si=4700.0, origin="BOM value", place=BOM)
    assert found.disagreements == (), "the design tells where two value texts differ"


def test_a_rating_that_another_source_contradicts_is_told():
    found = rated(part("C1", "100n 10V", bom="100nF 16V"))
    assert found.disagreements == ()
    told = rated(part("R1", "10k 1/4W", description="RES 10K OHM 1% 1/10W 0603")).disagreements
    assert told == ("rated power 250 mW (netlist value) is taken, not 100 mW (netlist description)",)


def test_a_default_that_loses_contradicts_nothing():
    default = Project(defaults={"capacitor": facts(tolerance=(-0.3, 0.3), dielectric="X7R")})
    found = rated(part("C1", "100n 5% C0G"), default)
    assert (found.dielectric, found.disagreements) == ("C0G", ())


def test_equal_values_in_other_spelling_do_not_disagree():
    assert rated(part("C1", "100nF", bom="0.1uF")).disagreements == ()


def test_a_value_text_not_understood_leaves_the_word_to_the_next_source():
    found = rated(part("R1", "10k", bom="R0603"))
    assert found.value == Known(si=10e3, origin="netlist value", place=PLACE)
    described = rated(part("R2", "R", description="RES 4.7K OHM 1% 1/10W 0603"))
    assert described.value == Known(si=4700.0, origin="netlist description", place=PLACE)
    assert described.rated_power == Known(si=0.1, origin="netlist description", place=PLACE)


def test_a_symbol_description_of_another_value_is_not_believed():
    found = rated(part("C1", "100n", description="CAP CER 100PF 50V C0G"))
    assert (found.dielectric, found.rated_voltage) == (None, Unknown(why="not given"))


def test_an_unread_value_says_why():
    assert rated(part("C1", "4.7")).value == Unknown(why="'4.7' has no unit: pF or µF")
    assert rated(part("C1")).value == Unknown(why="no value text")
    assert rated(part("U1", "QX7301")).value == Unknown(why="not a resistor or capacitor")


@pytest.mark.parametrize(
    ("fields", "name", "value"),
    [
        ({"Tol": "1%"}, "tolerance", (-0.01, 0.01)),
        ({"tolerance": "0.1 %"}, "tolerance", (-0.001, 0.001)),
        ({"bom_Tolerance": "5"}, "tolerance", (-0.05, 0.05)),
        ({"Tolerance": "K"}, "tolerance", (-0.1, 0.1)),
        ({"Toleranz": "±2 %"}, "tolerance", (-0.02, 0.02)),
        ({"V": "200v"}, "rated_voltage", 200.0),
        ({"Vdc": ">=250V"}, "rated_voltage", 250.0),
        ({"WVDC": ">=6.3V"}, "rated_voltage", 6.3),
        ({"bom_Voltage_Rating": "25"}, "rated_voltage", 25.0),
        ({"Spannung": "16 V"}, "rated_voltage", 16.0),
        ({"Dielectric": "NP0"}, "dielectric", "C0G"),
        ({"construct": "x7r"}, "dielectric", "X7R"),
        ({"Value2": "5% 50V X7R"}, "dielectric", "X7R"),
        ({"Value2": "5% 50V X7R"}, "rated_voltage", 50.0),
        ({"req": "50V/X7R/10%"}, "tolerance", (-0.1, 0.1)),
    ],
)
def test_rating_fields_are_recognised_by_their_names(fields, name, value):
    found = rated(part("C1", "100n", **fields))
    if name == "tolerance":
        assert shares(found)["tolerance"] == (*value, True)
    else:
        known = getattr(found, name)
        assert (known.si if isinstance(known, Known) else known) == value
    assert found.origins[name][0].startswith(("netlist field", "BOM field"))


def test_a_resistors_field_gives_power_tolerance_and_coefficient():
    found = rated(
        part("R1", "10k", req="63mW/1%", TC="25 ppm/°C"), Project(temperature=parse_quantity("0 degC .. 65 degC"))
    )
    assert found.rated_power == Known(si=0.063, origin="netlist field 'req'", place=PLACE)
    assert shares(found) == {"tolerance": (-0.01, 0.01, True), "temperature": (-0.001, 0.001, True)}


def test_precedence_runs_from_project_over_bom_field_netlist_field_and_value_text_to_defaults():
    item = part("C1", "100n 20%", Tol="10%", bom_Tolerance="5%")
    project = Project(parts={"C1": facts(tolerance=(-0.02, 0.02))})
    default = Project(defaults={"capacitor": facts(tolerance=(-0.3, 0.3))})
    assert shares(rated(item, project))["tolerance"] == (-0.02, 0.02, True)
    assert shares(rated(item))["tolerance"] == (-0.05, 0.05, True)
    assert shares(rated(part("C1", "100n 20%", Tol="10%"), default))["tolerance"] == (-0.1, 0.1, True)
    assert shares(rated(part("C1", "100n 20%"), default))["tolerance"] == (-0.2, 0.2, True)
    assert shares(rated(part("C1", "100n"), default))["tolerance"] == (-0.3, 0.3, True)
    assert shares(rated(part("C1", "100n")))["tolerance"] == (-0.2, 0.2, False)


def test_an_exact_name_wins_over_a_glob():
    project = Project(parts={"C*": facts(rated_voltage=parse_quantity("10 V")), "C1": facts(dielectric="X5R")})
    found = rated(part("C1", "100n"), project)
    assert found.dielectric == "X5R"
    assert found.rated_voltage == Known(si=10.0, origin='project [part."C*"]', place=FILE)


def test_three_digits_are_a_value_where_a_field_gives_the_tolerance():
    assert rated(part("R1", "332", Tol="1%")).value == Known(si=332.0, origin="netlist value", place=PLACE)
    assert isinstance(rated(part("R1", "332")).value, Unknown)


def test_what_nobody_gives_is_assumed_and_carries_the_line_that_would_give_it():
    found = rated(part("C7", "10u"))
    assert shares(found) == {
        "tolerance": (-0.20, 0.20, False),
        "temperature": (-0.15, 0.15, False),
        "bias": (-0.60, 0.0, False),
        "ageing": (pytest.approx(-0.0525, abs=1e-4), pytest.approx(0.0811, abs=1e-4), False),
    }
    assert asks(found) == {
        "tolerance": '[part."C7"] tolerance = "…"',
        "temperature": '[part."C7"] dielectric = "…"',
        "bias": '[part."C7"] bias-curve = [["0 V", "100 %"], ["… V", "… %"]]',
        "ageing": '[part."C7"] dielectric = "…"',
    }
    assert all(share.origin.startswith("assumed: ") for share in found.shares)


def test_small_capacitors_lose_less_by_bias():
    losses = [shares(rated(part("C1", text)))["bias"][0] for text in ("10u", "100n", "100p")]
    assert losses == [-0.6, -0.3, -0.1]


def test_parts_written_alike_share_one_line():
    found = rate(design(part("C7", "10u"), part("C8", "10u"), part("C9", "22u")), Project())
    assert asks(found["C7"])["tolerance"] == asks(found["C8"])["tolerance"] == '[part."C7, C8"] tolerance = "…"'
    assert asks(found["C9"])["tolerance"] == '[part."C9"] tolerance = "…"'


def test_many_parts_written_alike_share_the_default_of_their_kind():
    found = rate(design(*[part(f"C{number}", "100n") for number in range(1, 14)]), Project())
    assert asks(found["C13"])["tolerance"] == '[defaults.capacitor] tolerance = "…"'


def test_parts_written_alike_keep_their_own_places():
    first, second = part("C7", "10u 16V"), part("C8", "10u 16V", place=Place(file="board.xml", line=99))
    found = rate(design(first, second), Project())
    assert (found["C8"].part, found["C8"].value.place.line) == (second, 99)
    assert found["C8"].origins["rated_voltage"] == ("netlist value", Place(file="board.xml", line=99))
    assert (found["C7"].value.place.line, found["C7"].shares) == (7, found["C8"].shares)


def test_a_project_table_of_one_part_leaves_its_twin_alone():
    project = Project(parts={"C7": facts(tolerance=(-0.05, 0.05))})
    found = rate(design(part("C7", "10u"), part("C8", "10u")), project)
    assert [shares(found[ref])["tolerance"][2] for ref in ("C7", "C8")] == [True, False]


def test_that_line_is_understood():
    project = Project(parts={"C7, C8": facts(tolerance=(-0.05, 0.05))})
    found = rate(design(part("C7", "10u"), part("C8", "10u"), part("C9", "22u")), project)
    assert [shares(found[ref])["tolerance"][2] for ref in ("C7", "C8", "C9")] == [True, True, False]


def test_a_letter_code_gives_temperature_and_ageing_when_conditions_are_given():
    project = Project(temperature=parse_quantity("-40 degC .. 85 degC"), life=parse_quantity("10 year"))
    found = rated(part("C1", "10u 10% X7R"), project)
    assert shares(found) == {
        "tolerance": (-0.1, 0.1, True),
        "temperature": (-0.15, 0.15, True),
        "bias": (-0.6, 0.0, False),
        "ageing": (pytest.approx(-0.0525, abs=1e-4), pytest.approx(0.0811, abs=1e-4), True),
    }


@pytest.mark.parametrize(("life", "share"), [("1000 h", 0.01), ("8000 h", 0.02), ("10 year", 0.02)])
def test_a_resistor_drifts_over_a_given_life(life: str, share: float):
    """Thick-film chips at rated power and 70 °C: 1 % over 1000 h, 2 % over 8000 h (a maker's data sheet)."""
    found = rated(part("R1", "10k 1%"), Project(life=parse_quantity(life)))
    assert shares(found)["ageing"] == (-share, share, False)
    assert [item.ask for item in found.shares if item.name == "ageing"] == ['[part."R1"] load-life = "…"']


def test_what_is_said_of_its_drift_replaces_that_and_holds_without_a_life():
    said = {"resistor": facts(load_life=parse_quantity("0.5 %"))}
    assert shares(rated(part("R1", "10k 1%"), Project(defaults=said)))["ageing"] == (-0.005, 0.005, True)
    assert "ageing" not in shares(rated(part("R1", "10k 1%"), Project()))


@pytest.mark.parametrize(("coldest", "loss"), [("-25 degC", -0.2), ("-40 degC", -0.4)])
def test_an_aluminium_electrolytic_loses_more_in_the_cold(coldest: str, loss: float):
    """20 % to 40 % at -40 °C: common practice."""
    found = rated(
        part("C1", "100u 20%"),
        Project(
            defaults={"capacitor": facts(dielectric="aluminium")}, temperature=parse_quantity(f"{coldest} .. 60 degC")
        ),
    )
    assert shares(found)["temperature"] == (loss, 0.2, False)


def test_outside_the_temperatures_of_the_letter_nothing_is_promised():
    found = rated(part("C1", "10u X5R"), Project(temperature=parse_quantity("-40 degC .. 105 degC")))
    share = next(share for share in found.shares if share.name == "temperature")
    assert (share.given, share.low < -0.5) == (False, True)
    assert share.origin == "assumed: X5R promises nothing outside -55 °C to 85 °C"


def test_a_class_one_ceramic_drifts_by_its_coefficient_and_knows_no_bias_or_ageing():
    found = rated(part("C1", "100p 5% C0G"), Project(temperature=parse_quantity("-55 degC .. 125 degC")))
    assert shares(found) == {"tolerance": (-0.05, 0.05, True), "temperature": (-0.003, 0.003, True)}


def test_an_assumed_temperature_range_is_said():
    found = rated(part("R1", "10k 1% 25ppm"))
    share = next(share for share in found.shares if share.name == "temperature")
    assert share.origin == "assumed: 25 ppm/K from netlist value over 0 °C to 70 °C (assumed range)"
    assert share.ask == '[conditions] temperature = "…"'
    assert (share.low, share.high) == (pytest.approx(-45 * 25e-6), pytest.approx(45 * 25e-6))


@pytest.mark.parametrize("item", [part("C1", "100u", symbol="lib:CP"), part("C1", "100u 25V ALUM")])
def test_an_electrolytic_is_polarised_and_has_no_ceramic_effects(item):
    found = rated(item)
    assert found.polarised
    assert set(shares(found)) == {"tolerance", "temperature"}
    assert shares(found)["tolerance"] == (-0.2, 0.2, False)


def test_a_given_bias_curve_replaces_the_envelope_and_narrows_with_the_voltage():
    curve = ((0.0, 1.0), (3.3, 0.91), (16.0, 0.40))
    found = rated(part("C7", "10u 16V X5R"), Project(parts={"C7": facts(bias_curve=curve)}))
    assert shares(found)["bias"] == (-0.6, 0.0, True)
    assert shares(at_bias(found, 3.3))["bias"] == (-0.09, 0.0, True)
    assert shares(at_bias(found, -1.65))["bias"] == (-0.045, 0.0, True)
    assert shares(at_bias(found, 100.0))["bias"] == (-0.6, 0.0, True)


def test_the_assumed_envelope_narrows_in_proportion_where_the_rating_is_known():
    assert shares(at_bias(rated(part("C7", "10u 16V X5R")), 4.0))["bias"] == (-0.15, 0.0, False)
    assert shares(at_bias(rated(part("C7", "10u X5R")), 4.0))["bias"] == (-0.6, 0.0, False)


def test_zero_ohms_has_no_spread():
    found = rated(part("R1", "0R"))
    assert found.bounds() == (0.0, 0.0, 0.0)


def test_bounds_multiply_the_shares():
    found = rated(part("R1", "10k 1% 100ppm"), Project(temperature=parse_quantity("-35 degC .. 85 degC")))
    low, nominal, high = found.bounds()
    assert (low, nominal, high) == (pytest.approx(10e3 * 0.99 * 0.994), 10e3, pytest.approx(10e3 * 1.01 * 1.006))


@pytest.mark.parametrize(
    ("item", "why"),
    [(part("C1", "100p DNP"), "value text 'DNP'"), (part("R1", "10k", fitted=False), "netlist: value 'DNP'")],
)
def test_a_part_may_be_marked_as_not_fitted(item, why):
    found = rated(item)
    assert (found.fitted, found.fitted_why) == (False, why)


def test_the_project_has_the_last_word_on_fitting_and_kind():
    project = Project(parts={"R1": facts(fitted=True), "R2": facts(kind="thermistor")})
    found = rate(design(part("R1", "10k DNP"), part("R2", "10k")), project)
    assert found["R1"].fitted
    assert (found["R2"].kind, found["R2"].kind_why) == ("thermistor", 'project [part."R2"]')


def test_the_size_comes_from_the_footprint_or_the_texts():
    assert rated(part("R1", "10k", footprint="lib:R_0603_1608Metric")).size == "0603"
    assert rated(part("R1", "10k 0805")).size == "0805"


def test_every_part_is_rated_in_the_order_of_the_design():
    assert list(rate(design(part("U1", "QX1"), part("R2", "1k"), part("C1", "1n")), Project())) == ["U1", "R2", "C1"]


def test_a_tolerance_letter_with_several_meanings_is_told_with_the_line_to_add():
    read = rate(design(part("R1", "4K7H")), Project())["R1"]
    assert read.value.si == 4700.0
    assert read.disagreements == (
        "the tolerance letter 'H' is used in several meanings, so none is taken; "
        'its [part] can tell it: tolerance = "…"',
    )


def test_where_many_capacitors_lack_a_rating_one_line_is_asked_for_all():
    many = rate(design(*(part(f"C{n}", f"{n}n") for n in range(1, 14))), Project())
    assert many["C3"].rated_voltage == Unknown(why="not given", ask='[defaults.capacitor] rated-voltage = "…"')
    few = rate(design(*(part(f"C{n}", f"{n}n") for n in range(1, 4))), Project())
    assert few["C3"].rated_voltage == Unknown(why="not given")
