"""Files that an input names: read only where they lie in the folder of the project."""

import posixpath
from dataclasses import replace
from os.path import relpath
from pathlib import Path, PurePosixPath, PureWindowsPath

from rcrules.errors import UserMistake
from rcrules.readers._export import Source
from rcrules.readers._load import load
from rcrules.readers._mistakes import refusal, shorten


def included(source: Source, line: int, name: str) -> Source | str:
    """The file that a line of a source names, relative to the file that names it; or why it is not read.

    Raises UserMistake where it lies outside the folder of the project, by its name or by a link, or is unreadable.
    """
    said = name.replace("\\", "/")
    if not said or "\0" in said or len(said) > 1000:
        raise refusal(source.name, "an include without the name of a file", line=line, expected="a path", do="name one")
    if source.path is None or source.folder is None:
        return f"{shorten(name)!r} is not read: standard input has no folder; what it defines is not known"
    if said.startswith("~") or PurePosixPath(said).is_absolute() or PureWindowsPath(said).drive:
        raise _outside(source, line, name)
    try:
        path = (source.path.parent / said).resolve()
        if not path.is_relative_to(source.folder.resolve()):
            raise _outside(source, line, name)
        if not path.exists():
            return f"{shorten(name)!r} is not there; what it defines is not known"
    except (OSError, RuntimeError) as error:
        raise refusal(source.name, "an included file cannot be read", line=line, found=shorten(name)) from error
    inner = load(str(path), source.limits, named_in=f"{source.name}:{line}")
    return replace(inner, name=_shown(source, path), folder=source.folder)


def _shown(source: Source, path: Path) -> str:
    """The path from where the file that names it is shown."""
    folder = source.path.resolve().parent if source.path is not None else path.parent
    return posixpath.normpath(posixpath.join(posixpath.dirname(source.name), Path(relpath(path, folder)).as_posix()))


def _outside(source: Source, line: int, name: str) -> UserMistake:
    return refusal(
        source.name,
        "an include that leaves the folder of the project",
        line=line,
        found=shorten(name, 200),
        expected="a path below that folder, relative to this file",
        do="copy the file into the project and name it there",
    )
