"""The demo board out of the package."""

import tempfile
from importlib.resources import files
from pathlib import Path

from rcrules.errors import Mistake, Place, UserMistake


def copy_demo(folder: Path | None) -> Path:
    """Copy every demo file into the folder, made if need be; without one into a new temporary folder.

    Raises UserMistake where the folder cannot be written, or holds another file of the same name.
    """
    try:
        return _copied(folder or Path(tempfile.mkdtemp(prefix="rcrules-demo-")))
    except OSError as error:
        place = Place(file=str(folder or tempfile.gettempdir()))
        raise UserMistake(
            Mistake(place=place, problem=f"cannot write the demo board: {error.strerror}", do="name another folder")
        ) from error


def _copied(folder: Path) -> Path:
    folder.mkdir(parents=True, exist_ok=True)
    sources = [
        item for item in (files("rcrules") / "demo").iterdir() if item.is_file() and not item.name.endswith(".py")
    ]
    for source in sources:
        target = folder / source.name
        if target.exists() and target.read_bytes() != source.read_bytes():
            raise UserMistake(
                Mistake(place=Place(file=str(target)), problem="another file stands here", do="name an empty folder")
            )
    for source in sources:
        (folder / source.name).write_bytes(source.read_bytes())
    return folder
