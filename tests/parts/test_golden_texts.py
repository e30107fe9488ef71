"""Value texts of every pattern that schematics and BOMs hold, each with everything it says, reviewed line by line."""

import csv
from pathlib import Path

import pytest

from rcrules.parts import read_value

KINDS = {"R": "resistor", "C": "capacitor"}
LINES = (Path(__file__).parent / "value_texts.tsv").read_text(encoding="utf-8").split("\n")
ROWS = list(csv.DictReader(filter(None, LINES), delimiter="\t", quoting=csv.QUOTE_NONE))


def _number(text):
    return None if text == "" else pytest.approx(float(text), rel=1e-8)


def _ends(text):
    return None if text == "" else pytest.approx([float(end) / 100 for end in text.split()], rel=1e-4)


@pytest.mark.parametrize("row", ROWS, ids=[f"{row['part']}-{row['text']}" for row in ROWS])
def test_a_text_says_this_and_no_more(row):
    read = read_value(row["text"], KINDS[row["part"]])
    assert read.value == _number(row["value"])
    assert read.why_unknown == row["why no value"]
    assert (None if read.tolerance is None else list(read.tolerance)) == _ends(row["tolerance %"])
    assert read.rated_voltage == _number(row["voltage"])
    assert read.rated_power == _number(row["power"])
    assert (None if read.coefficient is None else read.coefficient * 1e6) == _number(row["ppm/K"])
    assert (read.dielectric or "", read.technology or "", read.size) == (
        row["dielectric"],
        row["technology"],
        row["size"],
    )
    assert (str(read.count or ""), "" if read.fitted else "yes") == (row["count"], row["not fitted"])


def test_the_list_is_long_and_each_text_stands_in_it_once():
    texts = [(row["part"], row["text"]) for row in ROWS]
    assert len(texts) == len(set(texts)) >= 400
