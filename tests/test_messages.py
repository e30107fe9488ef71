"""Files with mistakes say in their first lines which messages they must give, each as ``#: line:column text``."""

import re
from pathlib import Path

import pytest

from rcrules import project, rulebook, tomlfile
from rcrules.errors import UserMistake
from rcrules.measures import registry

FOLDER = Path(__file__).parent / "messages"
LOADERS = {
    "project": project.load,
    "rulebook": lambda name, text: rulebook.compile_pack(tomlfile.load(name, text), registry()),
}


@pytest.mark.parametrize("path", sorted(FOLDER.rglob("*.toml")), ids=lambda path: f"{path.parent.name}-{path.stem}")
def test_every_mistake_of_the_file_is_told_at_its_place(path):
    text = path.read_text(encoding="utf-8")
    wanted = re.findall(r"^#: (\d+:\d+) (.*)$", text, re.MULTILINE)
    with pytest.raises(UserMistake) as caught:
        LOADERS[path.parent.name](path.name, text)
    told = [(f"{item.place.line}:{item.place.column}", str(item)) for item in caught.value.mistakes]
    for place, words in wanted:
        assert any(place == at and words in message for at, message in told), (place, words, told)
    assert {place for place, _ in told} == {place for place, _ in wanted}
