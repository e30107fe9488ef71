import json
import tomllib
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from rcrules.errors import UserMistake
from rcrules.findings import Document, Finding, dumps, schema_text
from rcrules.reports import reports
from rcrules.waivers import Waiver, entries_text, read, today, waived
from tests.reports._sample import DOCUMENT, finding

DAY = date(2026, 12, 1)
PACKS = [{**pack, "rules": [{"id": "reset-lifts-late-enough"}]} for pack in DOCUMENT.packs]


def document(*findings: Finding, **changed: Any) -> Document:
    return replace(DOCUMENT, findings=list(findings) or [finding()], packs=PACKS, **changed)


def waiver(tmp_path: Path, of: Document | None = None, **changed: Any) -> Waiver:
    """The entry that is written for the first finding, completed and read back."""
    text = entries_text(of or document(), (of or document()).findings[:1], DAY)
    text = text.replace('reason  = ""', 'reason = "a prototype"').replace('who     = ""', 'who = "Ada"')
    path = tmp_path / "waivers.toml"
    path.write_text(text, encoding="utf-8")
    return replace(read(path, "waivers.toml")[0], **changed)


def outcome(found: Document, *waivers: Waiver, day: date = DAY) -> tuple[str, str, list[str]]:
    """Outcome of the first finding; state of the first waiver, and what is told about it."""
    with_waivers = waived(found, waivers, day)
    row = with_waivers.waivers[0]
    return with_waivers.findings[0].outcome, row["state"], row["told"]


def test_what_is_written_covers_the_finding_once_completed(tmp_path: Path) -> None:
    assert outcome(document(), waiver(tmp_path)) == ("waived", "used", [])
    assert waived(document(), [waiver(tmp_path)], DAY).findings[0].waiver == 0


def test_an_entry_that_nobody_completed_is_a_mistake(tmp_path: Path) -> None:
    path = tmp_path / "waivers.toml"
    path.write_text(entries_text(document(), [finding()], DAY), encoding="utf-8")
    with pytest.raises(UserMistake) as caught:
        read(path, "waivers.toml")
    assert [mistake.problem for mistake in caught.value.mistakes] == [
        "the waiver has no reason",
        "the waiver has no name",
    ]


def test_an_undecided_finding_may_be_waived(tmp_path: Path) -> None:
    found = document(finding(outcome="undecided"))
    assert outcome(found, waiver(tmp_path, found))[:2] == ("waived", "used")


def test_another_value_lapses_it(tmp_path: Path) -> None:
    parts = [row | {"value": 4.7e-06, "low": 3.8e-6} if row["ref"] == "C7" else row for row in DOCUMENT.parts]
    assert outcome(document(parts=parts), waiver(tmp_path)) == (
        "fails",
        "lapsed",
        ["C7 was 10 µF (9 µF .. 11 µF), NRST to GND, is 4.7 µF (3.8 µF .. 11 µF), NRST to GND"],
    )


def test_another_connection_lapses_it(tmp_path: Path) -> None:
    networks = json.loads(json.dumps(DOCUMENT.networks))
    networks[0]["branches"][1]["nets"] = ["+5V", "NRST"]
    state, told = outcome(document(networks=networks), waiver(tmp_path))[1:]
    assert state == "lapsed"
    assert "R12 was 10 kΩ (9 kΩ .. 11 kΩ), +3V3 to NRST, is 10 kΩ (9 kΩ .. 11 kΩ), +5V to NRST" in told


def test_another_part_in_the_network_lapses_it(tmp_path: Path) -> None:
    networks = json.loads(json.dumps(DOCUMENT.networks))
    networks[0]["branches"].append({"part": "C21", "nets": ["NRST", "GND"]})
    assert outcome(document(networks=networks), waiver(tmp_path))[1:] == (
        "lapsed",
        ["C21 is new (1 nF (900 pF .. 1.1 nF), NRST to GND)"],
    )


@pytest.mark.parametrize(
    ("changed", "told"),
    [
        (
            {"held": [row | {"high": 3.6} if row["net"] == "+3V3" else row for row in DOCUMENT.held]},
            "+3V3 was supply 3.2 V .. 3.4 V, is supply 3.2 V .. 3.6 V",
        ),
        (
            {"conditions": {"temperature": {"low": 0.0, "nominal": 25.0, "high": 60.0, "unit": "degC"}}},
            "temperature was -20 °C .. 60 °C, is 0 °C .. 60 °C",
        ),
    ],
)
def test_another_source_or_condition_lapses_it(tmp_path: Path, changed: dict[str, Any], told: str) -> None:
    state, found = outcome(document(**changed), waiver(tmp_path))[1:]
    assert state == "lapsed"
    assert told in found


def test_another_limit_or_number_lapses_it(tmp_path: Path) -> None:
    limit = {"at_least": 0.04, "unit": "s", "text": "", "from": ""}
    assert outcome(document(finding(limit=limit)), waiver(tmp_path))[1:] == (
        "lapsed",
        ["limit was at least 30 ms, is at least 40 ms"],
    )
    measured = finding().measured
    assert measured is not None
    worse = document(finding(measured=replace(measured, low=0.015)))
    assert outcome(worse, waiver(tmp_path))[1:] == ("lapsed", ["measured was 21.9 ms .. 49.7 ms, is 15 ms .. 49.7 ms"])


def test_an_undecided_finding_that_now_fails_is_not_covered(tmp_path: Path) -> None:
    written = waiver(tmp_path, document(finding(outcome="undecided")))
    assert outcome(document(), written) == ("fails", "lapsed", ["outcome was undecided, is fails"])


def test_it_counts_to_its_last_day(tmp_path: Path) -> None:
    written = waiver(tmp_path, expires=date(2027, 6, 30))
    assert outcome(document(), written, day=date(2027, 6, 30))[0] == "waived"
    assert outcome(document(), written, day=date(2027, 7, 1)) == ("fails", "expired", ["since 2027-06-30"])


def test_one_that_meets_nothing_is_unused(tmp_path: Path) -> None:
    written = waiver(tmp_path)
    assert outcome(document(finding(outcome="holds")), written) == ("holds", "unused", ["the finding holds without it"])
    other = document(finding(net="OTHER", fingerprint="1111111111111111.2222222222222222"))
    assert outcome(other, written) == ("fails", "unused", ["no finding of this rule there"])
    assert outcome(document(), replace(written, rule="gone"))[2] == ["its rule is not applied in this run"]


def test_it_survives_other_references(tmp_path: Path) -> None:
    """The schematic is annotated anew: the same circuit under other references and, by the editor, another net name."""
    swap = {"C7": "C90", "R12": "R90"}
    parts = [row | {"ref": swap.get(row["ref"], row["ref"])} for row in DOCUMENT.parts]
    networks = json.loads(json.dumps(DOCUMENT.networks).replace("C7", "C90").replace("R12", "R90"))
    item = finding(parts=["R90", "C90"], fingerprint="1111111111111111.fedcba9876543210")
    assert outcome(document(item, parts=parts, networks=networks), waiver(tmp_path))[:2] == ("waived", "used")


def test_hostile_names_are_written_as_texts() -> None:
    name = 'N"]\n[[waiver]]\x7f\ud800'
    item = finding(net=name, parts=["C1"])
    text = entries_text(document(item), [item], DAY)
    assert [entry["rule"] for entry in tomllib.loads(text)["waiver"]] == ["reset-lifts-late-enough"]


def test_a_document_with_waivers_is_valid_and_reports_tell_what_lapsed(tmp_path: Path) -> None:
    found = waived(document(finding(net="OTHER")), [waiver(tmp_path, circuit="x.y"), waiver(tmp_path)], DAY)
    jsonschema.Draft202012Validator(json.loads(schema_text())).validate(
        json.loads(dumps(replace(found, packs=DOCUMENT.packs)))
    )
    lapsed = waived(document(conditions={}), [waiver(tmp_path)], DAY)
    assert "waiver lapsed  reset-lifts-late-enough   NRST   waivers.toml:2" in reports()["text"].render(lapsed)
    assert "accepted by Ada on 2026-12-01: a prototype" in reports()["text"].render(lapsed)
    assert "lapsed: `reset-lifts-late-enough` at NRST" in reports()["markdown"].render(lapsed)


def test_a_caution_is_printed_also_where_its_finding_is_waived(tmp_path: Path) -> None:
    item = finding(pack="stored-energy")
    found = waived(document(item), [waiver(tmp_path, document(item))], DAY)
    assert found.findings[0].outcome == "waived"
    for name in ("text", "markdown"):
        assert "A calculation is not a measurement" in reports()[name].render(found)


@pytest.mark.parametrize(
    ("line", "message"),
    [
        ('date = "2026-12-01"', "'date' must be a date"),
        ("date = 2026-12-01T10:00:00", "'date' must be a date"),
        ("expires = 5", "'expires' must be a date"),
        ("reasons = 'x'", "did you mean 'reason'?"),
        ("circuit = 5", "'circuit' must be"),
    ],
)
def test_mistakes_are_told_at_their_place(tmp_path: Path, line: str, message: str) -> None:
    path = tmp_path / "waivers.toml"
    key = line.partition(" =")[0]
    entry = {"rule": "'a'", "reason": "'b'", "who": "'c'", "date": "2026-12-01", "circuit": "'d.e'"}
    entry.pop(key, None)
    path.write_text("\n".join(["[[waiver]]", *(f"{name} = {text}" for name, text in entry.items()), line]))
    with pytest.raises(UserMistake, match=r"waivers\.toml:") as caught:
        read(path, "waivers.toml")
    assert message in str(caught.value)


def test_an_entry_without_its_pins_is_refused_with_the_way_to_get_them(tmp_path: Path) -> None:
    path = tmp_path / "waivers.toml"
    path.write_text("[[waiver]]\nrule = 'a'\nnet = 'N'\nreason = 'b'\nwho = 'c'\ndate = 2026-12-01\n")
    with pytest.raises(UserMistake, match="let 'rcrules check --waive' write the entry"):
        read(path, "waivers.toml")


def test_the_day_is_that_of_the_epoch_where_one_is_set(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "86400")
    assert today() == date(1970, 1, 2)
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "soon")
    with pytest.raises(UserMistake, match="SOURCE_DATE_EPOCH: not a time"):
        today()
