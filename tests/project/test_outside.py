"""A project file of a stranger's change cannot have other files read: paths stay in the repository."""

from pathlib import Path

import pytest

from rcrules.cli import main
from rcrules.errors import UserMistake
from rcrules.project import read


@pytest.fixture
def repository(tmp_path: Path) -> Path:
    """A repository with a board in a folder, and a secret beside the repository."""
    (tmp_path / "secret.toml").write_text('password = "hunter2"\n', encoding="utf-8")
    root = tmp_path / "work"
    (root / ".git").mkdir(parents=True)
    (root / "boards").mkdir()
    (root / "shared.toml").write_text('[pack]\nname = "shared"\n', encoding="utf-8")
    return root


def written(repository: Path, key: str, path: str) -> Path:
    file = repository / "boards" / "rcrules.toml"
    file.write_text(f"[board]\n{key} = {path}\n", encoding="utf-8")
    return file


@pytest.mark.parametrize("key", ["netlist", "bom", "rules", "waivers", "part-numbers"])
def test_a_path_out_of_the_repository_is_refused_before_the_file_is_read(repository, key, capsys):
    file = written(repository, key, '"../../secret.toml"')
    assert main(["check", "--project", str(file)]) == 2
    told = capsys.readouterr().err
    assert f"rcrules.toml:2:{len(key) + 4}: '{key}' leaves the repository" in told
    assert "hunter2" not in told


def test_each_path_of_a_list_is_looked_at(repository):
    file = written(repository, "rules", '["power-on-reset", "../shared.toml", "../../secret.toml"]')
    with pytest.raises(UserMistake) as caught:
        read(file)
    assert [item.found for item in caught.value.mistakes] == ["'../../secret.toml'"]


def test_a_link_out_of_the_repository_is_refused(repository):
    (repository / "boards" / "inside.toml").symlink_to(repository.parent / "secret.toml")
    with pytest.raises(UserMistake, match="leaves the repository"):
        read(written(repository, "rules", '"inside.toml"'))


def test_a_path_inside_the_repository_is_taken_though_it_leaves_the_folder(repository):
    assert read(written(repository, "rules", '"../shared.toml"')).rules == ("../shared.toml",)


def test_where_there_is_no_repository_paths_may_leave_the_folder(tmp_path):
    (tmp_path / "boards").mkdir()
    file = tmp_path / "boards" / "rcrules.toml"
    file.write_text('[board]\nrules = "../shared.toml"\n', encoding="utf-8")
    assert read(file).rules == ("../shared.toml",)
