"""What many parts lack is asked for once, first."""

from pathlib import Path

import pytest

from rcrules.cli import main

_HEAD = '<?xml version="1.0" encoding="UTF-8"?>\n<export version="D">\n'


def board(capacitors: int) -> str:
    """Capacitors without a rating between a supply and ground."""
    parts = "".join(f'<comp ref="C{n}"><value>{n}u X7R 10%</value></comp>' for n in range(1, capacitors + 1))
    pins = ["".join(f'<node ref="C{n}" pin="{pin}"/>' for n in range(1, capacitors + 1)) for pin in (1, 2)]
    rail = '<node ref="U1" pin="{}" pinfunction="{}" pintype="power_in"/>'
    return (
        f'{_HEAD}<components>{parts}<comp ref="U1"><value>QX7301</value></comp></components><nets>'
        f'<net code="1" name="+3V3">{pins[0]}{rail.format(1, "VDD")}</net>'
        f'<net code="2" name="GND">{pins[1]}{rail.format(2, "GND")}</net></nets></export>\n'
    )


@pytest.mark.parametrize(
    ("capacitors", "asked"),
    [
        (14, 'one line decides 14 findings   [defaults.capacitor] rated-voltage = "…"'),
        (3, 'one line each decides 3 findings   [part."C1"] rated-voltage = "…"   and so for C2, C3'),
    ],
)
def test_a_rating_that_many_capacitors_lack_is_the_first_line_asked_for(
    capacitors: int, asked: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.chdir(tmp_path)
    (tmp_path / "rcrules.toml").write_text('[board]\nnetlist = "board.xml"\n', encoding="utf-8")
    (tmp_path / "board.xml").write_text(board(capacitors), encoding="utf-8")
    assert main(["check", "--rules", "capacitor-voltage"]) == 0
    told = [line for line in capsys.readouterr().out.splitlines() if line.startswith("undecided: ")]
    assert told[0].startswith(f"undecided: {asked}")
