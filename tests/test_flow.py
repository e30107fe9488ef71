"""The order of the rooms is told in three places that must agree: the package, each door, DEVELOPERS.md."""

import importlib
import re
from pathlib import Path

import rcrules

ROOT = Path(__file__).parent.parent


def steps_in_developers() -> dict[str, int]:
    """Room -> step, as the guide's table says."""
    text = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    return {room: int(step) for step, room in re.findall(r"^\| (\d+) \| `(\w+)/` \|", text, re.MULTILINE)}


def test_each_door_says_its_step() -> None:
    rooms = steps_in_developers()
    assert len(rooms) >= 11
    for room, step in rooms.items():
        first = (importlib.import_module(f"rcrules.{room}").__doc__ or "").splitlines()[0]
        assert first.startswith(f"Step {step}:"), f"{room}: {first}"


def test_the_package_names_the_rooms_in_order() -> None:
    told = re.findall(r"\w+", rcrules.__doc__ or "")
    rooms = [room for room, _ in sorted(steps_in_developers().items(), key=lambda item: item[1])]
    assert [word for word in told if word in rooms] == rooms


def test_every_room_stands_in_the_guide() -> None:
    text = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    rooms = {path.name for path in (ROOT / "rcrules").iterdir() if path.is_dir() and not path.name.startswith("_")}
    assert [room for room in sorted(rooms - {"demo"}) if f"`{room}" not in text] == []
